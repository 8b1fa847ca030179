import { DataTypes } from 'sequelize';
import { bytes, id, json, link, real, stamps, text, version, whole, type Columns } from './columns';

const instantMs = { type: DataTypes.BIGINT, allowNull: false };

/** Where a motor's shaft load comes from where it is not the shift calendar alone, and what its submeter read. */
export const motorLoadTables: Record<string, Columns> = {
  motor_loads: {
    ...id,
    motor_id: { ...link('motors', false, 'CASCADE'), unique: true },
    source: text(),
    profile: json(true),
    when_missing: text(),
    load_test: json(),
    ...version,
    ...stamps,
  },
  submeter_files: {
    ...id,
    motor_id: link('motors', false, 'CASCADE'),
    file_name: text(),
    bytes: whole(),
    sha256: text(),
    factor: real(),
    start_ms: instantMs,
    step_minutes: whole(),
    intervals: whole(),
    missing: whole(),
    highest_kw: real(),
    total_kwh: real(),
    column_map: json(),
    notes: json(),
    brought_by_id: link('users', true),
    ...stamps,
  },
  submeter_blocks: {
    ...id,
    submeter_file_id: link('submeter_files', false, 'CASCADE'),
    month: text(),
    start_ms: instantMs,
    step_minutes: whole(),
    count: whole(),
    values: bytes(),
    ...stamps,
  },
};

export const motorLoadChecks: Record<string, string[]> = {
  motor_loads: ["source IN ('calendar','profile','submeter')", "when_missing IN ('calendar','standstill')"],
};
