import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { UtilityLetterContent } from '../../schemas/utility-letter';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A letter that puts findings to the utility, frozen as it was sent. Its content and page never change. */
export class UtilityLetter extends Model<InferAttributes<UtilityLetter>, InferCreationAttributes<UtilityLetter>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare number: number;
  /** Given by the page that sends it, so that pressing twice sends once. */
  declare requestId: string;
  declare way: 'mail' | 'post';
  declare state: 'sending' | 'sent' | 'failed';
  declare error: string | null;
  declare content: UtilityLetterContent;
  declare html: string;
  declare digest: string;
  declare madeById: number | null;
  declare sentAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

UtilityLetter.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    number: { type: DataTypes.INTEGER, allowNull: false },
    requestId: { type: DataTypes.TEXT, allowNull: false },
    way: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    error: { type: DataTypes.TEXT, allowNull: true },
    content: { type: DataTypes.JSON, allowNull: false },
    html: { type: DataTypes.TEXT, allowNull: false },
    digest: { type: DataTypes.TEXT, allowNull: false },
    madeById: { type: DataTypes.INTEGER, allowNull: true },
    sentAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'utility_letters', version: true },
);
withTrail(UtilityLetter);
