// A buyer or a supplier; people belong to exactly one.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, publicId } from "./columns";

export class Organisation extends Model<InferAttributes<Organisation>, InferCreationAttributes<Organisation>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare kind: "buyer" | "supplier";
  declare name: string;
  declare timeZone: string;
  declare currency: string;
  declare secondPerson: CreationOptional<boolean>;
  declare decisionRule: CreationOptional<"simple" | "guarded">;
  declare createdAt: Date;
}

Organisation.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    kind: { type: DataTypes.ENUM("buyer", "supplier"), allowNull: false },
    name: { type: DataTypes.STRING(120), allowNull: false },
    timeZone: { type: DataTypes.STRING(64), allowNull: false },
    currency: { type: DataTypes.STRING(3), allowNull: false },
    secondPerson: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
    decisionRule: { type: DataTypes.ENUM("simple", "guarded"), allowNull: false, defaultValue: "simple" },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "organisations" },
);
