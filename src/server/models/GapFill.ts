import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { GapMethod } from '../../core/load';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/**
 * A stretch of missing readings of a meter that a person had estimated, and how. The decision stands as long as it is not
 * taken back; its values are worked out again whenever the readings it rests on change.
 */
export class GapFill extends Model<InferAttributes<GapFill>, InferCreationAttributes<GapFill>> {
  declare id: CreationOptional<number>;
  declare meterId: number;
  declare fromMs: number;
  declare toMs: number;
  declare method: GapMethod;
  declare stepMinutes: number;
  /** Intervals it fills; 0 where the readings have come in since, or nothing is left to estimate from. */
  declare intervals: number;
  /** Missing intervals of the stretch that cannot be estimated in this way. */
  declare left: number;
  /** What it adds. [kWh] */
  declare kwh: number | null;
  /** Little-endian doubles of the stretch: kWh, then lagging, then leading kvarh; NaN where nothing is estimated. */
  declare values: Buffer;
  declare madeById: number | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

GapFill.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    meterId: { type: DataTypes.INTEGER, allowNull: false },
    fromMs: { type: DataTypes.BIGINT, allowNull: false },
    toMs: { type: DataTypes.BIGINT, allowNull: false },
    method: { type: DataTypes.TEXT, allowNull: false },
    stepMinutes: { type: DataTypes.INTEGER, allowNull: false },
    intervals: { type: DataTypes.INTEGER, allowNull: false },
    left: { type: DataTypes.INTEGER, allowNull: false },
    kwh: { type: DataTypes.DOUBLE, allowNull: true },
    values: { type: DataTypes.BLOB, allowNull: false },
    madeById: { type: DataTypes.INTEGER, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'gap_fills', version: true },
);
withTrail(GapFill);
