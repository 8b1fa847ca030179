import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { Places } from '../../schemas/attachment';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A bill as the utility issued it, period [periodFrom, periodTo). */
export class Bill extends Model<InferAttributes<Bill>, InferCreationAttributes<Bill>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare intakeId: number | null;
  declare periodFrom: string;
  declare periodTo: string;
  declare quantities: Record<string, number>;
  declare currency: string;
  declare totalMinor: number | null;
  declare sourceRow: string | null;
  /** Where on its pages a value was taken from, by field. */
  declare places: CreationOptional<Places | null>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Bill.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    intakeId: { type: DataTypes.INTEGER, allowNull: true },
    periodFrom: { type: DataTypes.DATEONLY, allowNull: false },
    periodTo: { type: DataTypes.DATEONLY, allowNull: false },
    quantities: { type: DataTypes.JSON, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    totalMinor: { type: DataTypes.INTEGER, allowNull: true },
    sourceRow: { type: DataTypes.TEXT, allowNull: true },
    places: { type: DataTypes.JSON, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'bills', version: true },
);
withTrail(Bill);
