import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { lineToleranceMinor } from '../../schemas/pricing';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

/** The schedule an engagement is priced on, frozen as its file stood, with contract inputs. lineMatches: label on the bill to line id. */
export class TariffChoice extends Model<InferAttributes<TariffChoice>, InferCreationAttributes<TariffChoice>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  declare scheduleId: string;
  declare scheduleText: string;
  declare sha256: string;
  declare contract: Record<string, number>;
  declare history: Record<string, number[]> | null;
  declare lineMatches: Record<string, string>;
  /** Of the matches those taken over from an earlier engagement with the utility: label to the engagement's id. */
  declare remembered: CreationOptional<Record<string, number>>;
  declare toleranceMinor: CreationOptional<number>;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

TariffChoice.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    scheduleId: { type: DataTypes.TEXT, allowNull: false },
    scheduleText: { type: DataTypes.TEXT, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    contract: { type: DataTypes.JSON, allowNull: false },
    history: { type: DataTypes.JSON, allowNull: true },
    lineMatches: { type: DataTypes.JSON, allowNull: false },
    remembered: { type: DataTypes.JSON, allowNull: false, defaultValue: {} },
    toleranceMinor: { type: DataTypes.INTEGER, allowNull: false, defaultValue: lineToleranceMinor },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'tariff_choices', version: true },
);
withTrail(TariffChoice);
