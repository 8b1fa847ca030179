import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { GapLoad, LoadSource, LoadTestRowInput, ProfileInput } from '../../schemas/shaft-load';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** Where a motor's shaft load comes from, and its load test. A motor without a row goes by its shift calendar. */
export class MotorLoad extends Model<InferAttributes<MotorLoad>, InferCreationAttributes<MotorLoad>> {
  declare id: CreationOptional<number>;
  declare motorId: number;
  declare source: LoadSource;
  declare profile: ProfileInput | null;
  /** What holds where the submeter has no reading. */
  declare whenMissing: GapLoad;
  declare loadTest: LoadTestRowInput[];
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

MotorLoad.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    motorId: { type: DataTypes.INTEGER, allowNull: false },
    source: { type: DataTypes.TEXT, allowNull: false },
    profile: { type: DataTypes.JSON, allowNull: true },
    whenMissing: { type: DataTypes.TEXT, allowNull: false },
    loadTest: { type: DataTypes.JSON, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'motor_loads', version: true },
);
withTrail(MotorLoad);
