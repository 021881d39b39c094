// Column types the models share; spread at each use, because Sequelize writes the field name into the object it is given.
import { DataTypes } from "sequelize";

export const id = { type: DataTypes.INTEGER.UNSIGNED, primaryKey: true, autoIncrement: true } as const;
export const reference = { type: DataTypes.INTEGER.UNSIGNED, allowNull: false } as const;
export const optionalReference = { type: DataTypes.INTEGER.UNSIGNED, allowNull: true } as const;
/** Random 16 characters that name a row in addresses. */
export const publicId = { type: DataTypes.CHAR(16), allowNull: false } as const;
export const instant = { type: DataTypes.DATE(3), allowNull: false } as const;
export const optionalInstant = { type: DataTypes.DATE(3), allowNull: true } as const;
export const hash = { type: DataTypes.BLOB, allowNull: false } as const;
