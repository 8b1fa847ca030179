import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** A schedule written in the application. Its texts are revisions; the slug is the schedule's id in the language. */
export class KeptSchedule extends Model<InferAttributes<KeptSchedule>, InferCreationAttributes<KeptSchedule>> {
  declare id: CreationOptional<number>;
  declare slug: string;
  /** What it was begun from: "form kvarh-cliff", "schedule ostrander-lp4", "the library's file"; null for a blank one. */
  declare madeFrom: string | null;
  declare madeById: number | null;
  declare putAwayAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

KeptSchedule.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    slug: { type: DataTypes.TEXT, allowNull: false, unique: true },
    madeFrom: { type: DataTypes.TEXT, allowNull: true },
    madeById: { type: DataTypes.INTEGER, allowNull: true },
    putAwayAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'schedules', version: true },
);
withTrail(KeptSchedule);
