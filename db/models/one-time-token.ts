// A single-use link of a mail: password reset or invitation; the row holds its SHA-256.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { hash, instant, optionalInstant, optionalReference } from "./columns";

export class OneTimeToken extends Model<InferAttributes<OneTimeToken>, InferCreationAttributes<OneTimeToken>> {
  declare tokenHash: Buffer;
  declare purpose: "password-reset" | "invitation";
  declare userId: CreationOptional<number | null>;
  declare invitationId: CreationOptional<number | null>;
  declare createdAt: Date;
  declare expiresAt: Date;
  declare usedAt: CreationOptional<Date | null>;
  declare revokedAt: CreationOptional<Date | null>;
}

OneTimeToken.init(
  {
    tokenHash: { ...hash, primaryKey: true },
    purpose: { type: DataTypes.ENUM("password-reset", "invitation"), allowNull: false },
    userId: { ...optionalReference },
    invitationId: { ...optionalReference },
    createdAt: { ...instant },
    expiresAt: { ...instant },
    usedAt: { ...optionalInstant },
    revokedAt: { ...optionalInstant },
  },
  { sequelize, tableName: "one_time_tokens" },
);
