// One mebibyte of a file, deflated at level 1.
import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class FileChunk extends Model<InferAttributes<FileChunk>, InferCreationAttributes<FileChunk>> {
  declare fileId: number;
  declare ordinal: number;
  declare bytes: Buffer;
}

FileChunk.init(
  {
    fileId: { ...reference, primaryKey: true },
    ordinal: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
    bytes: { type: DataTypes.BLOB("medium"), allowNull: false },
  },
  { sequelize, tableName: "file_chunks" },
);
