import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { ItemKind, ItemState } from '../../schemas/request';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** One thing that is asked for: what it is, which days or motor it concerns, what became of it. */
export class RequestItem extends Model<InferAttributes<RequestItem>, InferCreationAttributes<RequestItem>> {
  declare id: CreationOptional<number>;
  declare requestId: number;
  declare position: number;
  declare kind: ItemKind;
  declare words: string;
  declare periodFrom: string | null;
  declare periodTo: string | null;
  declare motorId: number | null;
  declare state: ItemState;
  declare reason: string | null;
  declare answer: string | null;
  declare answeredById: number | null;
  declare answeredAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

RequestItem.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    requestId: { type: DataTypes.INTEGER, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    words: { type: DataTypes.TEXT, allowNull: false },
    periodFrom: { type: DataTypes.DATEONLY, allowNull: true },
    periodTo: { type: DataTypes.DATEONLY, allowNull: true },
    motorId: { type: DataTypes.INTEGER, allowNull: true },
    state: { type: DataTypes.TEXT, allowNull: false },
    reason: { type: DataTypes.TEXT, allowNull: true },
    answer: { type: DataTypes.TEXT, allowNull: true },
    answeredById: { type: DataTypes.INTEGER, allowNull: true },
    answeredAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'request_items', version: true },
);
withTrail(RequestItem);
