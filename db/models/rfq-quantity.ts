// A quantity for which a unit price is asked.
import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class RfqQuantity extends Model<InferAttributes<RfqQuantity>, InferCreationAttributes<RfqQuantity>> {
  declare buyerOrganisationId: number;
  declare rfqId: number;
  declare quantity: number;
}

RfqQuantity.init(
  {
    buyerOrganisationId: { ...reference },
    rfqId: { ...reference, primaryKey: true },
    quantity: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
  },
  { sequelize, tableName: "rfq_quantities" },
);
