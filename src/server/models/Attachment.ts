import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { MediaType } from '../../schemas/attachment';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** Pages of a bill as PDF or photo; those without a bill wait for one. The file itself lies in the drawer by its SHA-256. */
export class Attachment extends Model<InferAttributes<Attachment>, InferCreationAttributes<Attachment>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare billId: number | null;
  declare fileName: string;
  declare bytes: number;
  declare sha256: string;
  declare mediaType: MediaType;
  declare pageCount: number | null;
  declare attachedById: number | null;
  declare removedAt: CreationOptional<Date | null>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Attachment.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    billId: { type: DataTypes.INTEGER, allowNull: true },
    fileName: { type: DataTypes.TEXT, allowNull: false },
    bytes: { type: DataTypes.INTEGER, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    mediaType: { type: DataTypes.TEXT, allowNull: false },
    pageCount: { type: DataTypes.INTEGER, allowNull: true },
    attachedById: { type: DataTypes.INTEGER, allowNull: true },
    removedAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'attachments', version: true },
);
withTrail(Attachment);
