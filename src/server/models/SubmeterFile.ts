import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { ColumnMap } from '../../core/intake';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A file of a motor's submeter: its mean active power by interval lies in blocks, the file itself in the drawer. */
export class SubmeterFile extends Model<InferAttributes<SubmeterFile>, InferCreationAttributes<SubmeterFile>> {
  declare id: CreationOptional<number>;
  declare motorId: number;
  declare fileName: string;
  declare bytes: number;
  declare sha256: string;
  /** Every figure of the file was multiplied by this. */
  declare factor: number;
  declare startMs: number;
  declare stepMinutes: number;
  declare intervals: number;
  declare missing: number;
  declare highestKw: number;
  declare totalKwh: number;
  declare columnMap: ColumnMap;
  declare notes: string[];
  declare broughtById: number | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

SubmeterFile.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    motorId: { type: DataTypes.INTEGER, allowNull: false },
    fileName: { type: DataTypes.TEXT, allowNull: false },
    bytes: { type: DataTypes.INTEGER, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    factor: { type: DataTypes.DOUBLE, allowNull: false },
    startMs: { type: DataTypes.BIGINT, allowNull: false },
    stepMinutes: { type: DataTypes.INTEGER, allowNull: false },
    intervals: { type: DataTypes.INTEGER, allowNull: false },
    missing: { type: DataTypes.INTEGER, allowNull: false },
    highestKw: { type: DataTypes.DOUBLE, allowNull: false },
    totalKwh: { type: DataTypes.DOUBLE, allowNull: false },
    columnMap: { type: DataTypes.JSON, allowNull: false },
    notes: { type: DataTypes.JSON, allowNull: false },
    broughtById: { type: DataTypes.INTEGER, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'submeter_files' },
);
withTrail(SubmeterFile);
