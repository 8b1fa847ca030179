import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { Places } from '../../schemas/attachment';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/**
 * A bill as the utility issued it, period [periodFrom, periodTo).
 *
 * A bill that another file took the place of is put away: it counts nowhere, and only `Bill.unscoped()` finds it.
 */
export class Bill extends Model<InferAttributes<Bill>, InferCreationAttributes<Bill>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare intakeId: number | null;
  declare periodFrom: string;
  declare periodTo: string;
  declare quantities: Record<string, number>;
  declare currency: string;
  declare totalMinor: number | null;
  declare sourceRow: string | null;
  /** Where on its pages a value was taken from, by field. */
  declare places: CreationOptional<Places | null>;
  /** Number of the invoice as printed. */
  declare invoice: CreationOptional<string | null>;
  /** Day the meter was read. */
  declare readOn: CreationOptional<string | null>;
  /** Whether the utility estimated the reading. */
  declare estimated: CreationOptional<boolean>;
  /** The first of the invoices that make one bill together, on each of them; null where this invoice is the bill. */
  declare joinedToId: CreationOptional<number | null>;
  /** On the first of joined invoices: why they are one bill. */
  declare joinNote: CreationOptional<string | null>;
  /** The file whose bill took this one's place. */
  declare putAwayById: CreationOptional<number | null>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Bill.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    intakeId: { type: DataTypes.INTEGER, allowNull: true },
    periodFrom: { type: DataTypes.DATEONLY, allowNull: false },
    periodTo: { type: DataTypes.DATEONLY, allowNull: false },
    quantities: { type: DataTypes.JSON, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    totalMinor: { type: DataTypes.INTEGER, allowNull: true },
    sourceRow: { type: DataTypes.TEXT, allowNull: true },
    places: { type: DataTypes.JSON, allowNull: true },
    invoice: { type: DataTypes.TEXT, allowNull: true },
    readOn: { type: DataTypes.DATEONLY, allowNull: true },
    estimated: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
    joinedToId: { type: DataTypes.INTEGER, allowNull: true },
    joinNote: { type: DataTypes.TEXT, allowNull: true },
    putAwayById: { type: DataTypes.INTEGER, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'bills', version: true, defaultScope: { where: { putAwayById: null } } },
);
withTrail(Bill);
