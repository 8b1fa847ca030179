import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { FindingFamily, FindingState } from '../../schemas/finding';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** What people decided about a finding that pricing works out anew; its identity outlives each pricing. */
export class Finding extends Model<InferAttributes<Finding>, InferCreationAttributes<Finding>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare periodFrom: string;
  declare periodTo: string;
  declare lineKey: string;
  declare family: FindingFamily;
  /** As pricing last said it. */
  declare title: string;
  declare lineLabel: string | null;
  declare amountMinor: number;
  /** Whether the newest pricing still finds it. */
  declare found: CreationOptional<boolean>;
  declare state: FindingState;
  /** The day the state began. */
  declare since: string;
  /** The amount when it left the state open. */
  declare decidedMinor: CreationOptional<number | null>;
  declare refundedMinor: CreationOptional<number | null>;
  declare refundedOn: CreationOptional<string | null>;
  declare letterId: CreationOptional<number | null>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Finding.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    periodFrom: { type: DataTypes.DATEONLY, allowNull: false },
    periodTo: { type: DataTypes.DATEONLY, allowNull: false },
    lineKey: { type: DataTypes.TEXT, allowNull: false },
    family: { type: DataTypes.TEXT, allowNull: false },
    title: { type: DataTypes.TEXT, allowNull: false },
    lineLabel: { type: DataTypes.TEXT, allowNull: true },
    amountMinor: { type: DataTypes.INTEGER, allowNull: false },
    found: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
    state: { type: DataTypes.TEXT, allowNull: false },
    since: { type: DataTypes.DATEONLY, allowNull: false },
    decidedMinor: { type: DataTypes.INTEGER, allowNull: true },
    refundedMinor: { type: DataTypes.INTEGER, allowNull: true },
    refundedOn: { type: DataTypes.DATEONLY, allowNull: true },
    letterId: { type: DataTypes.INTEGER, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'findings', version: true },
);
withTrail(Finding);
