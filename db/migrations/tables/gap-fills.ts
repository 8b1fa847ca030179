import { DataTypes } from 'sequelize';
import { bytes, id, link, real, stamps, text, version, whole, type Columns } from './columns';

/** Stretches of missing readings that a person had estimated. */
export const gapFillTables: Record<string, Columns> = {
  gap_fills: {
    ...id,
    meter_id: link('meters'),
    from_ms: { type: DataTypes.BIGINT, allowNull: false },
    to_ms: { type: DataTypes.BIGINT, allowNull: false },
    method: text(),
    step_minutes: whole(),
    intervals: whole(),
    left: whole(),
    kwh: real(true),
    values: bytes(),
    made_by_id: link('users', true),
    ...version,
    ...stamps,
  },
};

export const gapFillChecks: Record<string, string[]> = {
  gap_fills: ["method IN ('same-weekday','linear')"],
};
