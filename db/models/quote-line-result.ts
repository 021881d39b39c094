// One line of a version: its roll-up and the cells of units and temperatures, packed.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { StoredCell } from "../../app/rf/stored-result";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class QuoteLineResult extends Model<InferAttributes<QuoteLineResult>, InferCreationAttributes<QuoteLineResult>> {
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare versionId: number;
  declare revisionId: number;
  declare coreVersion: string;
  declare lineKey: string;
  declare verdict: string;
  declare value: CreationOptional<number | null>;
  declare margin: CreationOptional<number | null>;
  declare creditedMargin: CreationOptional<number | null>;
  declare frequency: CreationOptional<number | null>;
  declare unit: CreationOptional<string | null>;
  declare temperature: CreationOptional<string | null>;
  declare cells: StoredCell[];
  declare reason: CreationOptional<string | null>;
}

QuoteLineResult.init(
  {
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    versionId: { ...reference, primaryKey: true },
    revisionId: { ...reference, primaryKey: true },
    coreVersion: { type: DataTypes.STRING(16), allowNull: false, primaryKey: true },
    lineKey: { type: DataTypes.STRING(16), allowNull: false, primaryKey: true },
    verdict: { type: DataTypes.STRING(20), allowNull: false },
    value: { type: DataTypes.DOUBLE, allowNull: true },
    margin: { type: DataTypes.DOUBLE, allowNull: true },
    creditedMargin: { type: DataTypes.DOUBLE, allowNull: true },
    frequency: { type: DataTypes.DOUBLE, allowNull: true },
    unit: { type: DataTypes.STRING(60), allowNull: true },
    temperature: { type: DataTypes.DECIMAL(5, 1), allowNull: true },
    cells: { type: DataTypes.JSON, allowNull: false },
    reason: { type: DataTypes.TEXT, allowNull: true },
  },
  { sequelize, tableName: "quote_line_results" },
);
