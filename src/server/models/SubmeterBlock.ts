import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** One calendar month (UTC) of a submeter's file: mean kW as little-endian doubles, NaN where missing. */
export class SubmeterBlock extends Model<InferAttributes<SubmeterBlock>, InferCreationAttributes<SubmeterBlock>> {
  declare id: CreationOptional<number>;
  declare submeterFileId: number;
  declare month: string;
  declare startMs: number;
  declare stepMinutes: number;
  declare count: number;
  declare values: Buffer;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

SubmeterBlock.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    submeterFileId: { type: DataTypes.INTEGER, allowNull: false },
    month: { type: DataTypes.TEXT, allowNull: false },
    startMs: { type: DataTypes.BIGINT, allowNull: false },
    stepMinutes: { type: DataTypes.INTEGER, allowNull: false },
    count: { type: DataTypes.INTEGER, allowNull: false },
    values: { type: DataTypes.BLOB, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'submeter_blocks' },
);
withTrail(SubmeterBlock);
