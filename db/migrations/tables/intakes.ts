import { DataTypes } from 'sequelize';
import { bytes, id, instant, json, link, real, stamps, text, version, whole, type Columns } from './columns';

/** Files on their way in, the remembered ways to read them, and the readings they brought. */
export const intakeTables: Record<string, Columns> = {
  column_maps: {
    ...id,
    name: text(),
    kind: text(),
    signature: text(),
    map: json(),
    created_by_id: link('users', true),
    ...stamps,
  },
  intakes: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    meter_id: link('meters'),
    kind: text(),
    file_name: text(),
    bytes: whole(),
    sha256: text(),
    state: text(),
    column_map: json(true),
    preview: json(true),
    report: json(true),
    problems: json(true),
    brought_by_id: link('users', true),
    kept_at: instant(true),
    undone_at: instant(true),
    ...version,
    ...stamps,
  },
  reading_blocks: {
    ...id,
    meter_id: link('meters'),
    intake_id: link('intakes', false, 'CASCADE'),
    rank: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    channel: text(),
    month: text(),
    start_ms: { type: DataTypes.BIGINT, allowNull: false },
    step_minutes: whole(),
    count: whole(),
    missing: whole(),
    total: real(true),
    values: bytes(),
    ...stamps,
  },
};

export const intakeIndexes: Record<string, string[][]> = {
  column_maps: [['signature']],
  intakes: [['sha256']],
  reading_blocks: [['meter_id', 'channel', 'start_ms']],
};

export const intakeChecks: Record<string, string[]> = {
  intakes: ["kind IN ('intervals','bills')", "state IN ('reading','read','refused','kept','undone','given-up')"],
};
