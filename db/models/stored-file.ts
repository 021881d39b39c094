// An uploaded file; its bytes lie in file_chunks.
import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from "sequelize";
import { sequelize } from "../connection.server";
import { hash, id, instant, optionalInstant, publicId, reference } from "./columns";

export class StoredFile extends Model<InferAttributes<StoredFile>, InferCreationAttributes<StoredFile>> {
  declare id: CreationOptional<number>;
  declare publicId: string;
  declare buyerOrganisationId: number;
  declare supplierOrganisationId: number;
  declare quoteId: number;
  declare name: string;
  declare mediaType: string;
  declare size: number;
  declare sha256: Buffer;
  declare sharedAt: CreationOptional<Date | null>;
  declare createdAt: Date;
}

StoredFile.init(
  {
    id: { ...id },
    publicId: { ...publicId },
    buyerOrganisationId: { ...reference },
    supplierOrganisationId: { ...reference },
    quoteId: { ...reference },
    name: { type: DataTypes.STRING(255), allowNull: false },
    mediaType: { type: DataTypes.STRING(80), allowNull: false },
    size: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    sha256: { ...hash },
    sharedAt: { ...optionalInstant },
    createdAt: { ...instant },
  },
  { sequelize, tableName: "files" },
);
