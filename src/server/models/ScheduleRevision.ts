import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A text of a schedule as it was kept; never changed afterwards. */
export class ScheduleRevision extends Model<
  InferAttributes<ScheduleRevision>,
  InferCreationAttributes<ScheduleRevision>
> {
  declare id: CreationOptional<number>;
  declare scheduleId: number;
  declare number: number;
  declare text: string;
  declare sha256: string;
  declare note: string | null;
  declare madeById: number | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ScheduleRevision.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    scheduleId: { type: DataTypes.INTEGER, allowNull: false },
    number: { type: DataTypes.INTEGER, allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    note: { type: DataTypes.TEXT, allowNull: true },
    madeById: { type: DataTypes.INTEGER, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'schedule_revisions' },
);
withTrail(ScheduleRevision);
