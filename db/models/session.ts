// A signed-in browser; the cookie holds the token, the row its SHA-256.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { hash, instant, optionalInstant, reference } from "./columns";

export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare tokenHash: Buffer;
  declare userId: number;
  declare createdAt: Date;
  declare lastSeenAt: Date;
  declare expiresAt: Date;
  declare revokedAt: CreationOptional<Date | null>;
  declare userAgent: CreationOptional<string | null>;
  declare ip: CreationOptional<string | null>;
}

Session.init(
  {
    tokenHash: { ...hash, primaryKey: true },
    userId: { ...reference },
    createdAt: { ...instant },
    lastSeenAt: { ...instant },
    expiresAt: { ...instant },
    revokedAt: { ...optionalInstant },
    userAgent: { type: DataTypes.STRING(255), allowNull: true },
    ip: { type: DataTypes.STRING(45), allowNull: true },
  },
  { sequelize, tableName: "sessions" },
);
