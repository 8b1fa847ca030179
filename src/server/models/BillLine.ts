import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A line charge as printed on a bill. */
export class BillLine extends Model<InferAttributes<BillLine>, InferCreationAttributes<BillLine>> {
  declare id: CreationOptional<number>;
  declare billId: number;
  declare position: number;
  declare label: string;
  declare amountMinor: number;
  /** What the amount was worked out from, where the bill prints it. */
  declare quantity: CreationOptional<number | null>;
  declare unit: CreationOptional<string | null>;
  declare rate: CreationOptional<number | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

BillLine.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    billId: { type: DataTypes.INTEGER, allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    amountMinor: { type: DataTypes.INTEGER, allowNull: false },
    quantity: { type: DataTypes.DOUBLE, allowNull: true },
    unit: { type: DataTypes.TEXT, allowNull: true },
    rate: { type: DataTypes.DOUBLE, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'bill_lines' },
);
withTrail(BillLine);
