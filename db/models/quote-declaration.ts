// The answer to one declared line in one version.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { reference } from "./columns";

export class QuoteDeclaration extends Model<
  InferAttributes<QuoteDeclaration>,
  InferCreationAttributes<QuoteDeclaration>
> {
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare versionId: number;
  declare lineKey: string;
  declare answer: "comply" | "exception";
  declare text: CreationOptional<string | null>;
}

QuoteDeclaration.init(
  {
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    versionId: { ...reference, primaryKey: true },
    lineKey: { type: DataTypes.STRING(16), allowNull: false, primaryKey: true },
    answer: { type: DataTypes.ENUM("comply", "exception"), allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: true },
  },
  { sequelize, tableName: "quote_declarations" },
);
