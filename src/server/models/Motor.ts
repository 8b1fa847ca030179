import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { CalendarInput } from '../../schemas/motor';
import type { PlateInput } from '../../schemas/plate';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A synchronous motor of the plant: nameplate, shaft load over time, field current today. */
export class Motor extends Model<InferAttributes<Motor>, InferCreationAttributes<Motor>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  /** The meter it stands behind. */
  declare meterId: number;
  declare position: number;
  declare name: string;
  declare drives: string | null;
  declare plate: PlateInput;
  declare calendar: CalendarInput;
  declare fieldTodayA: number;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Motor.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    meterId: { type: DataTypes.INTEGER, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    drives: { type: DataTypes.TEXT, allowNull: true },
    plate: { type: DataTypes.JSON, allowNull: false },
    calendar: { type: DataTypes.JSON, allowNull: false },
    fieldTodayA: { type: DataTypes.DOUBLE, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'motors', version: true },
);
withTrail(Motor);
