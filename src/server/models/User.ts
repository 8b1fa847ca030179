import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';
import type { ClientRights, Role } from '../policies/actor';

/** A person who signs in: staff, or somebody of a client. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<number>;
  declare email: string;
  declare name: string;
  declare role: Role;
  declare clientId: number | null;
  declare passwordHash: string | null;
  declare rights: ClientRights;
  declare licenceJurisdiction: string | null;
  declare licenceNumber: string | null;
  declare licenceExpires: string | null;
  declare licenceCheckedById: number | null;
  declare disabledAt: Date | null;
  declare sessionEpoch: CreationOptional<number>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

User.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    email: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    role: { type: DataTypes.TEXT, allowNull: false },
    clientId: { type: DataTypes.INTEGER, allowNull: true },
    passwordHash: { type: DataTypes.TEXT, allowNull: true },
    rights: { type: DataTypes.JSON, allowNull: false },
    licenceJurisdiction: { type: DataTypes.TEXT, allowNull: true },
    licenceNumber: { type: DataTypes.TEXT, allowNull: true },
    licenceExpires: { type: DataTypes.DATEONLY, allowNull: true },
    licenceCheckedById: { type: DataTypes.INTEGER, allowNull: true },
    disabledAt: { type: DataTypes.DATE, allowNull: true },
    sessionEpoch: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'users', version: true },
);
withTrail(User);
