// The unit price of one break in one version.
import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class QuotePrice extends Model<InferAttributes<QuotePrice>, InferCreationAttributes<QuotePrice>> {
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare versionId: number;
  declare quantity: number;
  declare unitPrice: string;
}

QuotePrice.init(
  {
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    versionId: { ...reference, primaryKey: true },
    quantity: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
    unitPrice: { type: DataTypes.DECIMAL(18, 4), allowNull: false },
  },
  { sequelize, tableName: "quote_prices" },
);
