import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { FindingState } from '../../schemas/finding';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** One step of a finding's history: from state to state with its day and amount, or a note alone. Never changed. */
export class FindingChange extends Model<InferAttributes<FindingChange>, InferCreationAttributes<FindingChange>> {
  declare id: CreationOptional<number>;
  declare findingId: number;
  declare byId: number | null;
  declare fromState: FindingState | null;
  declare toState: FindingState | null;
  /** The finding's amount then; of a refund the amount refunded. */
  declare amountMinor: number | null;
  declare day: string;
  declare note: string | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

FindingChange.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    findingId: { type: DataTypes.INTEGER, allowNull: false },
    byId: { type: DataTypes.INTEGER, allowNull: true },
    fromState: { type: DataTypes.TEXT, allowNull: true },
    toState: { type: DataTypes.TEXT, allowNull: true },
    amountMinor: { type: DataTypes.INTEGER, allowNull: true },
    day: { type: DataTypes.DATEONLY, allowNull: false },
    note: { type: DataTypes.TEXT, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'finding_changes' },
);
withTrail(FindingChange);
