import { DataTypes, Model, type InferAttributes, type InferCreationAttributes } from 'sequelize';
import { sequelize } from '../db/connection';

/** A signed-in browser, in the shape the session store asks for. No trail: it is no change of the practice's records. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  declare sid: string;
  declare expires: Date | null;
  declare data: string | null;
}

Session.init(
  {
    sid: { type: DataTypes.STRING(64), primaryKey: true },
    expires: DataTypes.DATE,
    data: DataTypes.TEXT,
  },
  { sequelize, tableName: 'sessions', timestamps: true },
);
