// The results of one sweep against one revision, packed.
import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { StoredResult } from "../../app/rf/stored-result";
import { sequelize } from "../connection.server";
import { instant, reference } from "./columns";

export class MeasurementResult extends Model<
  InferAttributes<MeasurementResult>,
  InferCreationAttributes<MeasurementResult>
> {
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare measurementId: number;
  declare revisionId: number;
  declare coreVersion: string;
  declare setupHash: string;
  declare results: StoredResult[];
  declare verdict: string;
  declare createdAt: Date;
}

MeasurementResult.init(
  {
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    measurementId: { ...reference, primaryKey: true },
    revisionId: { ...reference, primaryKey: true },
    coreVersion: { type: DataTypes.STRING(16), allowNull: false, primaryKey: true },
    setupHash: { type: DataTypes.STRING(32), allowNull: false, primaryKey: true },
    results: { type: DataTypes.JSON, allowNull: false },
    verdict: { type: DataTypes.STRING(20), allowNull: false },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "measurement_results" },
);
