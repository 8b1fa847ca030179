import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A mail to the practice about what came for a request until an instant, reserved before it goes. */
export class RequestDigest extends Model<InferAttributes<RequestDigest>, InferCreationAttributes<RequestDigest>> {
  declare id: CreationOptional<number>;
  declare requestId: number;
  declare until: Date;
  declare state: 'sending' | 'sent' | 'failed';
  declare error: string | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

RequestDigest.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    requestId: { type: DataTypes.INTEGER, allowNull: false },
    until: { type: DataTypes.DATE, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    error: { type: DataTypes.TEXT, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'request_digests' },
);
withTrail(RequestDigest);
