// A filter specification through all its revisions.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, publicId, reference } from "./columns";

export class Specification extends Model<InferAttributes<Specification>, InferCreationAttributes<Specification>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare number: number;
  declare title: string;
  declare ownerId: number;
  declare createdAt: Date;
}

Specification.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    title: { type: DataTypes.STRING(90), allowNull: false },
    ownerId: { ...reference },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "specifications" },
);
