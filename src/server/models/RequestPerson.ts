import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** Somebody of the client a request goes to, and whether its mail went. */
export class RequestPerson extends Model<InferAttributes<RequestPerson>, InferCreationAttributes<RequestPerson>> {
  declare id: CreationOptional<number>;
  declare requestId: number;
  declare userId: number;
  declare state: 'sending' | 'sent' | 'failed';
  declare error: string | null;
  declare sentAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

RequestPerson.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    requestId: { type: DataTypes.INTEGER, allowNull: false },
    userId: { type: DataTypes.INTEGER, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    error: { type: DataTypes.TEXT, allowNull: true },
    sentAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'request_people', version: true },
);
withTrail(RequestPerson);
