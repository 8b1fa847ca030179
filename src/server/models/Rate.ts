import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** What an hour of a person is billed at from a day on; one with an engagement wins over the general one. */
export class Rate extends Model<InferAttributes<Rate>, InferCreationAttributes<Rate>> {
  declare id: CreationOptional<number>;
  declare userId: number;
  declare engagementId: number | null;
  declare perHourMinor: number;
  declare currency: string;
  declare from: string;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Rate.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    userId: { type: DataTypes.INTEGER, allowNull: false },
    engagementId: { type: DataTypes.INTEGER, allowNull: true },
    perHourMinor: { type: DataTypes.INTEGER, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    from: { type: DataTypes.DATEONLY, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'rates', version: true },
);
withTrail(Rate);
