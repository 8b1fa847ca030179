import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { SupplyInput } from '../../schemas/supply';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** How the bus of an engagement's plant is supplied; an entry that is null is not known. */
export class Supply extends Model<InferAttributes<Supply>, InferCreationAttributes<Supply>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare entries: SupplyInput;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Supply.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false, unique: true },
    entries: { type: DataTypes.JSON, allowNull: false },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'supplies', version: true },
);
withTrail(Supply);
