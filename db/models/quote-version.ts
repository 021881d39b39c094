// A submission, frozen.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { Setup } from "../../app/rf/contract";
import type { Instrument, StatedDrift } from "../../app/rf/stated-measurement";
import { sequelize } from "../connection.server";
import { hash, id, instant, reference } from "./columns";

export class QuoteVersion extends Model<InferAttributes<QuoteVersion>, InferCreationAttributes<QuoteVersion>> {
  declare id: CreationOptional<number>;
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare quoteId: number;
  declare rfqId: number;
  declare revisionId: number;
  declare number: number;
  declare submittedAt: Date;
  declare submittedBy: number;
  declare submitterName: string;
  declare basis: "measured" | "similar" | "simulated";
  declare currency: string;
  declare nre: string;
  declare leadFirstDays: CreationOptional<number | null>;
  declare leadVolumeDays: number;
  declare minimumQuantity: CreationOptional<number | null>;
  declare orderMultiple: CreationOptional<number | null>;
  declare validUntil: string;
  declare incoterms: CreationOptional<string | null>;
  declare place: CreationOptional<string | null>;
  declare paymentTerms: CreationOptional<string | null>;
  declare remarks: CreationOptional<string | null>;
  declare setup: Setup;
  declare instrument: CreationOptional<Instrument>;
  declare drift: CreationOptional<StatedDrift | null>;
  declare contentHash: Buffer;
  declare createdAt: Date;
}

QuoteVersion.init(
  {
    id: { ...id },
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    quoteId: { ...reference },
    rfqId: { ...reference },
    revisionId: { ...reference },
    number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    submittedAt: { ...instant },
    submittedBy: { ...reference },
    submitterName: { type: DataTypes.STRING(120), allowNull: false },
    basis: { type: DataTypes.ENUM("measured", "similar", "simulated"), allowNull: false },
    currency: { type: DataTypes.STRING(3), allowNull: false },
    nre: { type: DataTypes.DECIMAL(18, 4), allowNull: false },
    leadFirstDays: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
    leadVolumeDays: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    minimumQuantity: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
    orderMultiple: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
    validUntil: { type: DataTypes.DATEONLY, allowNull: false },
    incoterms: { type: DataTypes.STRING(3), allowNull: true },
    place: { type: DataTypes.STRING(120), allowNull: true },
    paymentTerms: { type: DataTypes.STRING(500), allowNull: true },
    remarks: { type: DataTypes.TEXT, allowNull: true },
    setup: { type: DataTypes.JSON, allowNull: false },
    instrument: { type: DataTypes.JSON, allowNull: false, defaultValue: {} },
    drift: { type: DataTypes.JSON, allowNull: true },
    contentHash: { ...hash },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "quote_versions" },
);
