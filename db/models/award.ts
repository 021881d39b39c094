// What a decision gives to one quote version.
import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class Award extends Model<InferAttributes<Award>, InferCreationAttributes<Award>> {
  declare buyerOrganisationId: number;
  declare decisionId: number;
  declare versionId: number;
  declare supplierOrganisationId: number;
  declare share: string;
  declare quantity: number;
  declare total: string;
}

Award.init(
  {
    buyerOrganisationId: { ...reference },
    decisionId: { ...reference, primaryKey: true },
    versionId: { ...reference, primaryKey: true },
    supplierOrganisationId: { ...reference },
    share: { type: DataTypes.DECIMAL(5, 2), allowNull: false },
    quantity: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    total: { type: DataTypes.DECIMAL(18, 4), allowNull: false },
  },
  { sequelize, tableName: "awards" },
);
