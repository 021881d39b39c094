// A mail written in the transaction of what it tells; the worker sends it.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant } from "./columns";

export class OutboxEmail extends Model<InferAttributes<OutboxEmail>, InferCreationAttributes<OutboxEmail>> {
  declare id: CreationOptional<number>;
  declare eventKey: string;
  declare recipient: string;
  declare recipientName: CreationOptional<string | null>;
  declare messageId: string;
  declare template: string;
  declare props: object;
  declare state: CreationOptional<"pending" | "sent" | "failed">;
  declare attempts: CreationOptional<number>;
  declare nextAt: Date;
  declare leasedUntil: CreationOptional<Date | null>;
  declare leaseToken: CreationOptional<string | null>;
  declare sentAt: CreationOptional<Date | null>;
  declare lastError: CreationOptional<string | null>;
  declare createdAt: Date;
}

OutboxEmail.init(
  {
    id: { ...id },
    eventKey: { type: DataTypes.STRING(190), allowNull: false },
    recipient: { type: DataTypes.STRING(254), allowNull: false },
    recipientName: { type: DataTypes.STRING(120), allowNull: true },
    messageId: { type: DataTypes.STRING(190), allowNull: false },
    template: { type: DataTypes.STRING(40), allowNull: false },
    props: { type: DataTypes.JSON, allowNull: false },
    state: { type: DataTypes.ENUM("pending", "sent", "failed"), allowNull: false, defaultValue: "pending" },
    attempts: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    nextAt: { ...instant },
    leasedUntil: { ...optionalInstant },
    leaseToken: { type: DataTypes.STRING(16), allowNull: true },
    sentAt: { ...optionalInstant },
    lastError: { type: DataTypes.STRING(500), allowNull: true },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "outbox_emails" },
);
