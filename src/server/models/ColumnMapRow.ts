import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { ColumnMap } from '../../core/intake';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A remembered way to read one kind of file. */
export class ColumnMapRow extends Model<InferAttributes<ColumnMapRow>, InferCreationAttributes<ColumnMapRow>> {
  declare id: CreationOptional<number>;
  declare name: string;
  declare kind: 'intervals' | 'bills';
  declare signature: string;
  declare map: ColumnMap;
  declare createdById: number | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ColumnMapRow.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    name: { type: DataTypes.TEXT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    signature: { type: DataTypes.TEXT, allowNull: false },
    map: { type: DataTypes.JSON, allowNull: false },
    createdById: { type: DataTypes.INTEGER, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'column_maps' },
);
withTrail(ColumnMapRow);
