import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A further meter of the site that is billed together with the engagement's own. */
export class EngagementMeter extends Model<InferAttributes<EngagementMeter>, InferCreationAttributes<EngagementMeter>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare meterId: number;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

EngagementMeter.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    meterId: { type: DataTypes.INTEGER, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'engagement_meters' },
);
withTrail(EngagementMeter);
