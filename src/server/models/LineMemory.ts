import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** What a printed label of a utility means, as a person last told; the next engagement with that utility begins with it. */
export class LineMemory extends Model<InferAttributes<LineMemory>, InferCreationAttributes<LineMemory>> {
  declare id: CreationOptional<number>;
  declare utility: string;
  declare label: string;
  declare lineId: string;
  /** Where it was told. */
  declare engagementId: number;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

LineMemory.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    utility: { type: DataTypes.TEXT, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    lineId: { type: DataTypes.TEXT, allowNull: false },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'line_memories' },
);
withTrail(LineMemory);
