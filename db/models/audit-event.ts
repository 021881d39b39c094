// Who did what and when; rows are added and never changed.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { id, instant, optionalReference } from "./columns";

export class AuditEvent extends Model<InferAttributes<AuditEvent>, InferCreationAttributes<AuditEvent>> {
  declare id: CreationOptional<number>;
  declare at: Date;
  declare actorUserId: CreationOptional<number | null>;
  declare actorName: CreationOptional<string | null>;
  declare actorOrganisationId: CreationOptional<number | null>;
  declare buyerOrganisationId: CreationOptional<number | null>;
  declare supplierOrganisationId: CreationOptional<number | null>;
  declare rfqId: CreationOptional<number | null>;
  declare quoteId: CreationOptional<number | null>;
  declare specificationId: CreationOptional<number | null>;
  declare subject: string;
  declare action: string;
  declare detail: CreationOptional<object | null>;
  declare requestId: CreationOptional<string | null>;
  declare ip: CreationOptional<string | null>;
}

AuditEvent.init(
  {
    id: { ...id },
    at: { ...instant },
    actorUserId: { ...optionalReference },
    actorName: { type: DataTypes.STRING(120), allowNull: true },
    actorOrganisationId: { ...optionalReference },
    buyerOrganisationId: { ...optionalReference },
    supplierOrganisationId: { ...optionalReference },
    rfqId: { ...optionalReference },
    quoteId: { ...optionalReference },
    specificationId: { ...optionalReference },
    subject: { type: DataTypes.STRING(60), allowNull: false },
    action: { type: DataTypes.STRING(60), allowNull: false },
    detail: { type: DataTypes.JSON, allowNull: true },
    requestId: { type: DataTypes.STRING(36), allowNull: true },
    ip: { type: DataTypes.STRING(45), allowNull: true },
  },
  { sequelize, tableName: "audit_events" },
);
