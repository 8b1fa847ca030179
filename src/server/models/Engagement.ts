import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** One audit of one meter over one year, [yearFrom, yearTo). */
export class Engagement extends Model<InferAttributes<Engagement>, InferCreationAttributes<Engagement>> {
  declare id: CreationOptional<number>;
  declare code: string;
  declare title: string;
  declare clientId: number;
  declare siteId: number;
  declare meterId: number;
  declare yearFrom: string;
  declare yearTo: string;
  declare currency: string;
  declare budgetHours: number | null;
  declare closedAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Engagement.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    code: { type: DataTypes.TEXT, allowNull: false },
    title: { type: DataTypes.TEXT, allowNull: false },
    clientId: { type: DataTypes.INTEGER, allowNull: false },
    siteId: { type: DataTypes.INTEGER, allowNull: false },
    meterId: { type: DataTypes.INTEGER, allowNull: false },
    yearFrom: { type: DataTypes.DATEONLY, allowNull: false },
    yearTo: { type: DataTypes.DATEONLY, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    budgetHours: { type: DataTypes.DOUBLE, allowNull: true },
    closedAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'engagements', version: true },
);
withTrail(Engagement);
