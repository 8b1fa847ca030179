import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { EditionContent } from '../../schemas/edition';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A frozen, numbered report. Its content and pictures never change. */
export class Edition extends Model<InferAttributes<Edition>, InferCreationAttributes<Edition>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare planId: number | null;
  declare number: number;
  declare content: EditionContent;
  declare digest: string;
  declare madeById: number | null;
  declare shownAt: Date | null;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Edition.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    planId: { type: DataTypes.INTEGER, allowNull: true },
    number: { type: DataTypes.INTEGER, allowNull: false },
    content: { type: DataTypes.JSON, allowNull: false },
    digest: { type: DataTypes.TEXT, allowNull: false },
    madeById: { type: DataTypes.INTEGER, allowNull: true },
    shownAt: { type: DataTypes.DATE, allowNull: true },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'editions' },
);
withTrail(Edition);
