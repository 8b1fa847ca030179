import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { PlanEconomics } from '../../schemas/plan-money';
import type { PlanAction } from '../../schemas/plan-settings';
import type { SpanSet } from '../../schemas/plan-spans';
import type { SearchView } from '../../schemas/search';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A set of actions priced as a whole against the standing plant. */
export class Plan extends Model<InferAttributes<Plan>, InferCreationAttributes<Plan>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare name: string;
  /** How the year is parted for the settings of the actions. */
  declare spans: CreationOptional<SpanSet>;
  declare actions: PlanAction[];
  /** Work at the motors alone; what an action costs stands in it. */
  declare workCostMinor: number;
  declare yearlyUpkeepMinor: number;
  declare economics: PlanEconomics;
  declare chosen: CreationOptional<boolean>;
  declare search: SearchView | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Plan.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    spans: { type: DataTypes.JSON, allowNull: false, defaultValue: { by: 'year' } },
    actions: { type: DataTypes.JSON, allowNull: false },
    workCostMinor: { type: DataTypes.INTEGER, allowNull: false },
    yearlyUpkeepMinor: { type: DataTypes.INTEGER, allowNull: false },
    economics: { type: DataTypes.JSON, allowNull: false },
    chosen: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    search: { type: DataTypes.JSON, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'plans', version: true },
);
withTrail(Plan);
