import { DataTypes } from 'sequelize';

/**
 * Attribute definitions that every model shares; the exact column types are in the migrations. Functions, because
 * Sequelize writes the name of the column into the object it is given.
 */
export const idAttribute = () => ({ type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true }) as const;
export const referenceAttribute = () => ({ type: DataTypes.UUID, allowNull: false }) as const;
export const optionalReferenceAttribute = () => ({ type: DataTypes.UUID, allowNull: true }) as const;
/** Plain DATE drops milliseconds on MariaDB. */
export const timeAttribute = () => ({ type: DataTypes.DATE(3), allowNull: false }) as const;
export const optionalTimeAttribute = () => ({ type: DataTypes.DATE(3), allowNull: true }) as const;
