import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A reminder to one person, reserved before its mail goes, so that none goes twice. */
export class RequestReminder extends Model<InferAttributes<RequestReminder>, InferCreationAttributes<RequestReminder>> {
  declare id: CreationOptional<number>;
  declare requestId: number;
  declare userId: number;
  declare dueOn: string;
  declare step: number;
  declare day: string;
  declare state: 'sending' | 'sent' | 'failed';
  declare error: string | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

RequestReminder.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    requestId: { type: DataTypes.INTEGER, allowNull: false },
    userId: { type: DataTypes.INTEGER, allowNull: false },
    dueOn: { type: DataTypes.DATEONLY, allowNull: false },
    step: { type: DataTypes.INTEGER, allowNull: false },
    day: { type: DataTypes.DATEONLY, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    error: { type: DataTypes.TEXT, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'request_reminders' },
);
withTrail(RequestReminder);
