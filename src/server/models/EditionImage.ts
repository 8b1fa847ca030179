import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A picture of an edition: SVG for the pages, PNG for the mail. */
export class EditionImage extends Model<InferAttributes<EditionImage>, InferCreationAttributes<EditionImage>> {
  declare id: CreationOptional<number>;
  declare editionId: number;
  declare name: string;
  declare mediaType: string;
  declare body: Buffer;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

EditionImage.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    editionId: { type: DataTypes.INTEGER, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    mediaType: { type: DataTypes.TEXT, allowNull: false },
    body: { type: DataTypes.BLOB, allowNull: false },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'edition_images' },
);
withTrail(EditionImage);
