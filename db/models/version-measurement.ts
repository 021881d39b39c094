// Which sweeps a submitted version rests on.
import { Model, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class VersionMeasurement extends Model<
  InferAttributes<VersionMeasurement>,
  InferCreationAttributes<VersionMeasurement>
> {
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare versionId: number;
  declare measurementId: number;
}

VersionMeasurement.init(
  {
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    versionId: { ...reference, primaryKey: true },
    measurementId: { ...reference, primaryKey: true },
  },
  { sequelize, tableName: "version_measurements" },
);
