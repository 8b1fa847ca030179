import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

export type ReadingChannel = 'kwh' | 'kvarhLagging' | 'kvarhLeading' | 'quality';

/**
 * One channel of one calendar month (UTC) of the readings of a file: little-endian doubles (quality: bytes), NaN where missing.
 * Files of one meter may overlap; of two readings that of the higher rank shows.
 */
export class ReadingBlock extends Model<InferAttributes<ReadingBlock>, InferCreationAttributes<ReadingBlock>> {
  declare id: CreationOptional<number>;
  declare meterId: number;
  declare intakeId: number;
  declare rank: CreationOptional<number>;
  declare channel: ReadingChannel;
  declare month: string;
  declare startMs: number;
  declare stepMinutes: number;
  declare count: number;
  declare missing: number;
  declare total: number | null;
  declare values: Buffer;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

ReadingBlock.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    meterId: { type: DataTypes.INTEGER, allowNull: false },
    intakeId: { type: DataTypes.INTEGER, allowNull: false },
    rank: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    channel: { type: DataTypes.TEXT, allowNull: false },
    month: { type: DataTypes.TEXT, allowNull: false },
    startMs: { type: DataTypes.BIGINT, allowNull: false },
    stepMinutes: { type: DataTypes.INTEGER, allowNull: false },
    count: { type: DataTypes.INTEGER, allowNull: false },
    missing: { type: DataTypes.INTEGER, allowNull: false },
    total: { type: DataTypes.DOUBLE, allowNull: true },
    values: { type: DataTypes.BLOB, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'reading_blocks' },
);
withTrail(ReadingBlock);
