import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { JobResult } from '../../schemas/job';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** Long work with honest progress: it goes on when its page is left. */
export class Job extends Model<InferAttributes<Job>, InferCreationAttributes<Job>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare kind: string;
  declare subjectId: number | null;
  declare state: 'running' | 'done' | 'failed' | 'cancelled';
  declare done: number;
  declare planned: number | null;
  declare unit: string | null;
  declare result: JobResult | null;
  declare error: string | null;
  declare startedById: number | null;
  declare endedAt: Date | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Job.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    subjectId: { type: DataTypes.INTEGER, allowNull: true },
    state: { type: DataTypes.TEXT, allowNull: false },
    done: { type: DataTypes.INTEGER, allowNull: false },
    planned: { type: DataTypes.INTEGER, allowNull: true },
    unit: { type: DataTypes.TEXT, allowNull: true },
    result: { type: DataTypes.JSON, allowNull: true },
    error: { type: DataTypes.TEXT, allowNull: true },
    startedById: { type: DataTypes.INTEGER, allowNull: true },
    endedAt: { type: DataTypes.DATE, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'jobs' },
);
withTrail(Job);
