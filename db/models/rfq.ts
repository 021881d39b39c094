// A request for quotation against one released revision.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import type { Setup } from "../../app/rf/contract";
import type { MeasurementPlan } from "../../app/rf/measurement-plan";
import { sequelize } from "../connection.server";
import { id, instant, optionalInstant, publicId, reference } from "./columns";

export class Rfq extends Model<InferAttributes<Rfq>, InferCreationAttributes<Rfq>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare year: number;
  declare number: number;
  declare title: string;
  declare specificationId: number;
  declare revisionId: number;
  declare ownerId: number;
  declare status: CreationOptional<"draft" | "open" | "closed" | "decided" | "cancelled">;
  declare dueAt: Date;
  declare dueZone: string;
  declare openedAt: CreationOptional<Date | null>;
  declare closedAt: CreationOptional<Date | null>;
  declare decisionRule: "simple" | "guarded";
  declare quantity: number;
  declare currency: string;
  declare text: CreationOptional<string | null>;
  declare unitsAsked: number;
  declare unitsOverRange: number;
  declare assumedSetup: Setup;
  declare measurementPlan: CreationOptional<MeasurementPlan>;
  declare lockVersion: CreationOptional<number>;
  declare createdAt: Date;
}

Rfq.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    year: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    title: { type: DataTypes.STRING(90), allowNull: false },
    specificationId: { ...reference },
    revisionId: { ...reference },
    ownerId: { ...reference },
    status: {
      type: DataTypes.ENUM("draft", "open", "closed", "decided", "cancelled"),
      allowNull: false,
      defaultValue: "draft",
    },
    dueAt: { ...instant },
    dueZone: { type: DataTypes.STRING(64), allowNull: false },
    openedAt: { ...optionalInstant },
    closedAt: { ...optionalInstant },
    decisionRule: { type: DataTypes.ENUM("simple", "guarded"), allowNull: false },
    quantity: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    currency: { type: DataTypes.STRING(3), allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: true },
    unitsAsked: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    unitsOverRange: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    assumedSetup: { type: DataTypes.JSON, allowNull: false },
    measurementPlan: { type: DataTypes.JSON, allowNull: false, defaultValue: {} },
    lockVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "rfqs" },
);
