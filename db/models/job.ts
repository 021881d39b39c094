// Work of the worker process, claimed with a lease.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant } from "./columns";

export class Job extends Model<InferAttributes<Job>, InferCreationAttributes<Job>> {
  declare id: CreationOptional<number>;
  declare kind: string;
  declare key: string;
  declare payload: object;
  declare state: CreationOptional<"pending" | "done" | "failed">;
  declare runAt: Date;
  declare attempts: CreationOptional<number>;
  declare leasedUntil: CreationOptional<Date | null>;
  declare leaseToken: CreationOptional<string | null>;
  declare done: CreationOptional<number>;
  declare total: CreationOptional<number>;
  declare lastError: CreationOptional<string | null>;
  declare finishedAt: CreationOptional<Date | null>;
  declare createdAt: Date;
}

Job.init(
  {
    id: { ...id },
    kind: { type: DataTypes.STRING(40), allowNull: false },
    key: { type: DataTypes.STRING(120), allowNull: false },
    payload: { type: DataTypes.JSON, allowNull: false },
    state: { type: DataTypes.ENUM("pending", "done", "failed"), allowNull: false, defaultValue: "pending" },
    runAt: { ...instant },
    attempts: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    leasedUntil: { ...optionalInstant },
    leaseToken: { type: DataTypes.STRING(16), allowNull: true },
    done: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    total: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    lastError: { type: DataTypes.STRING(500), allowNull: true },
    finishedAt: { ...optionalInstant },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "jobs" },
);
