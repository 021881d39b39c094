// A buyer's own directory entry for a supplier, linked to its organisation once an invitation is accepted.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalReference, publicId, reference } from "./columns";

export class Supplier extends Model<InferAttributes<Supplier>, InferCreationAttributes<Supplier>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare name: string;
  declare status: CreationOptional<"candidate" | "approved" | "blocked">;
  declare supplierOrganisationId: CreationOptional<number | null>;
  declare createdAt: Date;
}

Supplier.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    name: { type: DataTypes.STRING(120), allowNull: false },
    status: { type: DataTypes.ENUM("candidate", "approved", "blocked"), allowNull: false, defaultValue: "candidate" },
    supplierOrganisationId: { ...optionalReference },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "suppliers" },
);
