// A person who signs in; the address is unique in the installation.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant, publicId, reference } from "./columns";

export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare organisationId: number;
  declare organisationKind: "buyer" | "supplier";
  declare email: string;
  declare name: string;
  declare role: "engineer" | "purchasing" | "admin" | "supplier";
  declare passwordHash: CreationOptional<string | null>;
  declare disabledAt: CreationOptional<Date | null>;
  declare timeZone: string;
  declare createdAt: Date;
}

User.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    organisationId: { ...reference },
    organisationKind: { type: DataTypes.ENUM("buyer", "supplier"), allowNull: false },
    email: { type: DataTypes.STRING(254), allowNull: false },
    name: { type: DataTypes.STRING(120), allowNull: false },
    role: { type: DataTypes.ENUM("engineer", "purchasing", "admin", "supplier"), allowNull: false },
    passwordHash: { type: DataTypes.STRING(255), allowNull: true },
    disabledAt: { ...optionalInstant },
    timeZone: { type: DataTypes.STRING(64), allowNull: false },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "users" },
);
