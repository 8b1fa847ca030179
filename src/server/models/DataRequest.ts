import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { ReminderRule } from '../../schemas/request';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** What a client is asked for, with a day by which it is due. Everything else about it hangs off it. */
export class DataRequest extends Model<InferAttributes<DataRequest>, InferCreationAttributes<DataRequest>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare number: number;
  declare requestId: string;
  declare state: 'open' | 'closed' | 'withdrawn';
  declare dueOn: string;
  declare note: string | null;
  declare internalNote: string | null;
  declare reminders: ReminderRule;
  declare madeById: number | null;
  declare sentAt: Date;
  declare endedAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

DataRequest.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    number: { type: DataTypes.INTEGER, allowNull: false },
    requestId: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    dueOn: { type: DataTypes.DATEONLY, allowNull: false },
    note: { type: DataTypes.TEXT, allowNull: true },
    internalNote: { type: DataTypes.TEXT, allowNull: true },
    reminders: { type: DataTypes.JSON, allowNull: false },
    madeById: { type: DataTypes.INTEGER, allowNull: true },
    sentAt: { type: DataTypes.DATE, allowNull: false },
    endedAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'data_requests', version: true },
);
withTrail(DataRequest);
