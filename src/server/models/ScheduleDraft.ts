import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';

/**
 * What a person is writing on a schedule, errors and all, kept as it is typed. No trail: it is nobody's record until it
 * is kept as a revision.
 */
export class ScheduleDraft extends Model<InferAttributes<ScheduleDraft>, InferCreationAttributes<ScheduleDraft>> {
  declare id: CreationOptional<number>;
  declare scheduleSlug: string;
  declare userId: number;
  declare text: string;
  /** Revision it was begun on; 0 where the library holds only a file. */
  declare baseNumber: number;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ScheduleDraft.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    scheduleSlug: { type: DataTypes.TEXT, allowNull: false },
    userId: { type: DataTypes.INTEGER, allowNull: false },
    text: { type: DataTypes.TEXT, allowNull: false },
    baseNumber: { type: DataTypes.INTEGER, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'schedule_drafts' },
);
