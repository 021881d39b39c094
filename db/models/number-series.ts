// The last number a buyer gave out, for specifications and for the RFQs of a year.
import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class NumberSeries extends Model<InferAttributes<NumberSeries>, InferCreationAttributes<NumberSeries>> {
  declare buyerOrganisationId: number;
  declare series: string;
  declare last: number;
}

NumberSeries.init(
  {
    buyerOrganisationId: { ...reference, primaryKey: true },
    series: { type: DataTypes.STRING(24), allowNull: false, primaryKey: true },
    last: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
  },
  { sequelize, tableName: "number_series" },
);
