// One line of a revision; lineKey names it through all revisions.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { RequirementDefinition } from "../../app/rf/line-definition";
import { sequelize } from "../connection.server";
import { id, instant, reference } from "./columns";

export class RequirementRow extends Model<InferAttributes<RequirementRow>, InferCreationAttributes<RequirementRow>> {
  declare id: CreationOptional<number>;
  declare buyerOrganisationId: number;
  declare revisionId: number;
  declare ordinal: number;
  declare lineKey: string;
  declare lineNumber: string;
  declare kind: string;
  declare definition: RequirementDefinition;
  declare createdAt: Date;
}

RequirementRow.init(
  {
    id: { ...id },
    buyerOrganisationId: { ...reference },
    revisionId: { ...reference },
    ordinal: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    lineKey: { type: DataTypes.STRING(16), allowNull: false },
    lineNumber: { type: DataTypes.STRING(12), allowNull: false },
    kind: { type: DataTypes.STRING(32), allowNull: false },
    definition: { type: DataTypes.JSON, allowNull: false },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "requirements" },
);
