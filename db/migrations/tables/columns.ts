import { DataTypes, literal, type ModelAttributeColumnOptions } from 'sequelize';

/** Columns of a table by name. */
export type Columns = Record<string, ModelAttributeColumnOptions>;

export const id: Columns = { id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true } };
export const stamps: Columns = {
  created_at: { type: DataTypes.DATE, allowNull: false, defaultValue: literal('CURRENT_TIMESTAMP') },
  updated_at: { type: DataTypes.DATE, allowNull: false, defaultValue: literal('CURRENT_TIMESTAMP') },
};
export const version: Columns = { version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 } };

export const text = (allowNull = false) => ({ type: DataTypes.TEXT, allowNull });
export const whole = (allowNull = false) => ({ type: DataTypes.INTEGER, allowNull });
export const real = (allowNull = false) => ({ type: DataTypes.DOUBLE, allowNull });
export const date = (allowNull = false) => ({ type: DataTypes.DATEONLY, allowNull });
export const instant = (allowNull = false) => ({ type: DataTypes.DATE, allowNull });
export const json = (allowNull = false) => ({ type: DataTypes.JSON, allowNull });
export const bytes = (allowNull = false) => ({ type: DataTypes.BLOB, allowNull });
export const flag = (defaultValue: boolean) => ({ type: DataTypes.BOOLEAN, allowNull: false, defaultValue });
export const link = (model: string, allowNull = false, onDelete = 'RESTRICT') => ({
  type: DataTypes.INTEGER,
  allowNull,
  references: { model, key: 'id' },
  onDelete,
});
