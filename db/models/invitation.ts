// A supplier asked to quote: the only way it reaches the RFQ.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant, optionalReference, publicId, reference } from "./columns";

export class Invitation extends Model<InferAttributes<Invitation>, InferCreationAttributes<Invitation>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare rfqId: number;
  declare supplierId: number;
  declare email: string;
  declare supplierOrganisationId: CreationOptional<number | null>;
  declare state: CreationOptional<"draft" | "sent" | "accepted" | "declined" | "revoked">;
  declare reason: CreationOptional<string | null>;
  declare sentAt: CreationOptional<Date | null>;
  declare acceptedAt: CreationOptional<Date | null>;
  declare declinedAt: CreationOptional<Date | null>;
  declare createdAt: Date;
}

Invitation.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    rfqId: { ...reference },
    supplierId: { ...reference },
    email: { type: DataTypes.STRING(254), allowNull: false },
    supplierOrganisationId: { ...optionalReference },
    state: {
      type: DataTypes.ENUM("draft", "sent", "accepted", "declined", "revoked"),
      allowNull: false,
      defaultValue: "draft",
    },
    reason: { type: DataTypes.TEXT, allowNull: true },
    sentAt: { ...optionalInstant },
    acceptedAt: { ...optionalInstant },
    declinedAt: { ...optionalInstant },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "invitations" },
);
