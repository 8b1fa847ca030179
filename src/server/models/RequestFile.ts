import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { FileState } from '../../schemas/request';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A file the client sent for an item. It lies in the drawer by its SHA-256; the key is its address. */
export class RequestFile extends Model<InferAttributes<RequestFile>, InferCreationAttributes<RequestFile>> {
  declare id: CreationOptional<number>;
  declare key: string;
  declare itemId: number;
  declare fileName: string;
  declare bytes: number;
  declare sha256: string;
  declare mediaType: string;
  declare uploadedById: number | null;
  declare state: FileState;
  declare intakeId: number | null;
  declare motorId: number | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

RequestFile.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    key: { type: DataTypes.TEXT, allowNull: false },
    itemId: { type: DataTypes.INTEGER, allowNull: false },
    fileName: { type: DataTypes.TEXT, allowNull: false },
    bytes: { type: DataTypes.INTEGER, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    mediaType: { type: DataTypes.TEXT, allowNull: false },
    uploadedById: { type: DataTypes.INTEGER, allowNull: true },
    state: { type: DataTypes.TEXT, allowNull: false },
    intakeId: { type: DataTypes.INTEGER, allowNull: true },
    motorId: { type: DataTypes.INTEGER, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'request_files', version: true },
);
withTrail(RequestFile);
