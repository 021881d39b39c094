// A form sent once: the key it carried and what was answered, so that a repeat does nothing.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { hash, instant, reference } from "./columns";

export class IdempotencyKey extends Model<InferAttributes<IdempotencyKey>, InferCreationAttributes<IdempotencyKey>> {
  declare userId: number;
  declare key: string;
  declare requestHash: Buffer;
  declare response: CreationOptional<object | null>;
  declare createdAt: Date;
}

IdempotencyKey.init(
  {
    userId: { ...reference, primaryKey: true },
    key: { type: DataTypes.STRING(64), allowNull: false, primaryKey: true },
    requestHash: { ...hash },
    response: { type: DataTypes.JSON, allowNull: true },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "idempotency_keys" },
);
