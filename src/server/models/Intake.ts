import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import type { ColumnMap, IntakeProblem } from '../../core/intake';
import type { IntakePreview, StoredReading } from '../../schemas/intake';
import { sequelize } from '../db/connection';
import { withTrail } from './Trail';

export type IntakeKind = 'intervals' | 'bills';
export type IntakeState = 'reading' | 'read' | 'refused' | 'kept' | 'undone' | 'given-up';

/** One file on its way in: read, matched, checked, kept or given up. The file itself lies in the drawer by its SHA-256. */
export class Intake extends Model<InferAttributes<Intake>, InferCreationAttributes<Intake>> {
  declare id: CreationOptional<number>;
  declare engagementId: number;
  /** The meter whose readings it holds; of bills the engagement's own. */
  declare meterId: number;
  declare kind: IntakeKind;
  declare fileName: string;
  declare bytes: number;
  declare sha256: string;
  declare state: IntakeState;
  declare columnMap: ColumnMap | null;
  declare preview: StoredReading | null;
  declare report: IntakePreview['report'] | null;
  declare problems: IntakeProblem[] | null;
  declare broughtById: number | null;
  declare keptAt: Date | null;
  declare undoneAt: Date | null;
  declare version: CreationOptional<number>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
}

Intake.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    engagementId: { type: DataTypes.INTEGER, allowNull: false },
    meterId: { type: DataTypes.INTEGER, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    fileName: { type: DataTypes.TEXT, allowNull: false },
    bytes: { type: DataTypes.INTEGER, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT, allowNull: false },
    columnMap: { type: DataTypes.JSON, allowNull: true },
    preview: { type: DataTypes.JSON, allowNull: true },
    report: { type: DataTypes.JSON, allowNull: true },
    problems: { type: DataTypes.JSON, allowNull: true },
    broughtById: { type: DataTypes.INTEGER, allowNull: true },
    keptAt: { type: DataTypes.DATE, allowNull: true },
    undoneAt: { type: DataTypes.DATE, allowNull: true },
    version: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    createdAt: DataTypes.DATE,
    updatedAt: DataTypes.DATE,
  },
  { sequelize, tableName: 'intakes', version: true },
);
withTrail(Intake);
