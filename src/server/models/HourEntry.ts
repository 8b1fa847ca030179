import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** Time a person spent on an engagement. */
export class HourEntry extends Model<InferAttributes<HourEntry>, InferCreationAttributes<HourEntry>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare userId: number;
  declare day: string;
  declare minutes: number;
  declare station: string;
  declare note: string;
  declare billable: CreationOptional<boolean>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

HourEntry.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    userId: { type: DataTypes.INTEGER, allowNull: false },
    day: { type: DataTypes.DATEONLY, allowNull: false },
    minutes: { type: DataTypes.INTEGER, allowNull: false },
    station: { type: DataTypes.TEXT, allowNull: false },
    note: { type: DataTypes.TEXT, allowNull: false },
    billable: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'hour_entries', version: true },
);
withTrail(HourEntry);
