// What comparison and lists read of a scored version.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { LotNote } from "../../app/rf/lot-notes";
import { sequelize } from "../connection.server";
import { instant, reference } from "./columns";

export class QuoteSummary extends Model<InferAttributes<QuoteSummary>, InferCreationAttributes<QuoteSummary>> {
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare versionId: number;
  declare revisionId: number;
  declare coreVersion: string;
  declare verdict: string;
  declare conforming: CreationOptional<boolean>;
  declare worstLineKey: CreationOptional<string | null>;
  declare worstMargin: CreationOptional<number | null>;
  declare worstCreditedMargin: CreationOptional<number | null>;
  declare units: number;
  declare unitsOverRange: number;
  declare temperatures: number;
  declare notes: CreationOptional<readonly LotNote[]>;
  declare createdAt: Date;
}

QuoteSummary.init(
  {
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    versionId: { ...reference, primaryKey: true },
    revisionId: { ...reference, primaryKey: true },
    coreVersion: { type: DataTypes.STRING(16), allowNull: false, primaryKey: true },
    verdict: { type: DataTypes.STRING(20), allowNull: false },
    conforming: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    worstLineKey: { type: DataTypes.STRING(16), allowNull: true },
    worstMargin: { type: DataTypes.DOUBLE, allowNull: true },
    worstCreditedMargin: { type: DataTypes.DOUBLE, allowNull: true },
    units: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    unitsOverRange: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    temperatures: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    notes: { type: DataTypes.JSON, allowNull: false, defaultValue: [] },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "quote_summaries" },
);
