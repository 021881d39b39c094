// An address of a supplier in one buyer's directory.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, reference } from "./columns";

export class SupplierContact extends Model<InferAttributes<SupplierContact>, InferCreationAttributes<SupplierContact>> {
  declare id: CreationOptional<number>;
  declare buyerOrganisationId: number;
  declare supplierId: number;
  declare email: string;
  declare name: CreationOptional<string | null>;
  declare createdAt: Date;
}

SupplierContact.init(
  {
    id: { ...id },
    buyerOrganisationId: { ...reference },
    supplierId: { ...reference },
    email: { type: DataTypes.STRING(254), allowNull: false },
    name: { type: DataTypes.STRING(120), allowNull: true },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "supplier_contacts" },
);
