// One revision: a draft until it is released, frozen from then on.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant, optionalReference, reference } from "./columns";

export class SpecificationRevision extends Model<
  InferAttributes<SpecificationRevision>,
  InferCreationAttributes<SpecificationRevision>
> {
  declare id: CreationOptional<number>;
  declare buyerOrganisationId: number;
  declare specificationId: number;
  declare letter: string;
  declare status: CreationOptional<"draft" | "released" | "superseded">;
  declare title: string;
  declare impedance1: number;
  declare impedance2: number;
  declare ambient: number;
  declare temperatureFrom: CreationOptional<number | null>;
  declare temperatureTo: CreationOptional<number | null>;
  declare lowestTestFrequency: CreationOptional<number | null>;
  declare lockVersion: CreationOptional<number>;
  declare contentHash: CreationOptional<Buffer | null>;
  declare releasedAt: CreationOptional<Date | null>;
  declare releasedBy: CreationOptional<number | null>;
  declare savedAt: Date;
  declare createdAt: Date;
}

SpecificationRevision.init(
  {
    id: { ...id },
    buyerOrganisationId: { ...reference },
    specificationId: { ...reference },
    letter: { type: DataTypes.STRING(3), allowNull: false },
    status: { type: DataTypes.ENUM("draft", "released", "superseded"), allowNull: false, defaultValue: "draft" },
    title: { type: DataTypes.STRING(90), allowNull: false },
    impedance1: { type: DataTypes.DOUBLE, allowNull: false },
    impedance2: { type: DataTypes.DOUBLE, allowNull: false },
    ambient: { type: DataTypes.DOUBLE, allowNull: false },
    temperatureFrom: { type: DataTypes.DOUBLE, allowNull: true },
    temperatureTo: { type: DataTypes.DOUBLE, allowNull: true },
    lowestTestFrequency: { type: DataTypes.DOUBLE, allowNull: true },
    lockVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    contentHash: { type: DataTypes.BLOB, allowNull: true },
    releasedAt: { ...optionalInstant },
    releasedBy: { ...optionalReference },
    savedAt: { ...instant },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "specification_revisions" },
);
