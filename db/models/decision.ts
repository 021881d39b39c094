// A recommendation and what became of it.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { hash, id, instant, optionalInstant, optionalReference, publicId, reference } from "./columns";

export class Decision extends Model<InferAttributes<Decision>, InferCreationAttributes<Decision>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare rfqId: number;
  declare state: "recommended" | "returned" | "approved";
  declare recommendedBy: number;
  declare recommendedAt: Date;
  declare reason: string;
  declare secondPerson: CreationOptional<boolean>;
  declare decidedBy: CreationOptional<number | null>;
  declare decidedAt: CreationOptional<Date | null>;
  declare remark: CreationOptional<string | null>;
  declare snapshot: object;
  declare snapshotHash: Buffer;
  declare createdAt: Date;
}

Decision.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    rfqId: { ...reference },
    state: { type: DataTypes.ENUM("recommended", "returned", "approved"), allowNull: false },
    recommendedBy: { ...reference },
    recommendedAt: { ...instant },
    reason: { type: DataTypes.TEXT, allowNull: false },
    secondPerson: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
    decidedBy: { ...optionalReference },
    decidedAt: { ...optionalInstant },
    remark: { type: DataTypes.TEXT, allowNull: true },
    snapshot: { type: DataTypes.JSON, allowNull: false },
    snapshotHash: { ...hash },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "decisions" },
);
