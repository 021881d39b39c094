// What one supplier answers to one invitation: a draft kept as typed, and versions once submitted.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { QuoteDraft } from "../../app/workflow/quote-draft";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant, optionalReference, publicId, reference } from "./columns";

export class Quote extends Model<InferAttributes<Quote>, InferCreationAttributes<Quote>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare invitationId: number;
  declare rfqId: number;
  declare state: CreationOptional<"draft" | "submitted" | "withdrawn">;
  declare draft: QuoteDraft;
  declare basis: CreationOptional<"measured" | "similar" | "simulated">;
  declare lockVersion: CreationOptional<number>;
  declare currentVersionId: CreationOptional<number | null>;
  declare sharedAt: CreationOptional<Date | null>;
  declare outcome: CreationOptional<"awarded" | "regretted" | null>;
  declare savedAt: Date;
  declare createdAt: Date;
}

Quote.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    invitationId: { ...reference },
    rfqId: { ...reference },
    state: { type: DataTypes.ENUM("draft", "submitted", "withdrawn"), allowNull: false, defaultValue: "draft" },
    draft: { type: DataTypes.JSON, allowNull: false },
    basis: { type: DataTypes.ENUM("measured", "similar", "simulated"), allowNull: false, defaultValue: "measured" },
    lockVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    currentVersionId: { ...optionalReference },
    sharedAt: { ...optionalInstant },
    outcome: { type: DataTypes.ENUM("awarded", "regretted"), allowNull: true },
    savedAt: { ...instant },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "quotes" },
);
