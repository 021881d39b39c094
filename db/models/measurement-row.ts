// One sweep: an uploaded Touchstone file under its unit and temperature.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { Note, Setup } from "../../app/rf/contract";
import type { StepStretch } from "../../app/rf/step-profile";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant, publicId, reference } from "./columns";

export class MeasurementRow extends Model<InferAttributes<MeasurementRow>, InferCreationAttributes<MeasurementRow>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare quoteId: number;
  declare fileId: number;
  declare serial: CreationOptional<string | null>;
  declare temperature: CreationOptional<string | null>;
  declare points: number;
  declare frequencyFrom: number;
  declare frequencyTo: number;
  declare impedance1: number;
  declare impedance2: number;
  /** How fine the sweep is, stretch by stretch; null for a file stored before it was kept. */
  declare steps: CreationOptional<readonly StepStretch[] | null>;
  declare notes: Note[];
  declare setup: CreationOptional<Setup | null>;
  declare removedAt: CreationOptional<Date | null>;
  declare sharedAt: CreationOptional<Date | null>;
  declare createdAt: Date;
}

MeasurementRow.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    quoteId: { ...reference },
    fileId: { ...reference },
    serial: { type: DataTypes.STRING(60), allowNull: true },
    temperature: { type: DataTypes.DECIMAL(5, 1), allowNull: true },
    points: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    frequencyFrom: { type: DataTypes.DOUBLE, allowNull: false },
    frequencyTo: { type: DataTypes.DOUBLE, allowNull: false },
    impedance1: { type: DataTypes.DOUBLE, allowNull: false },
    impedance2: { type: DataTypes.DOUBLE, allowNull: false },
    steps: { type: DataTypes.JSON, allowNull: true },
    notes: { type: DataTypes.JSON, allowNull: false },
    setup: { type: DataTypes.JSON, allowNull: true },
    removedAt: { ...optionalInstant },
    sharedAt: { ...optionalInstant },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "measurements" },
);
