import { fieldCurrentAtPanelA, type CompletedMotor, type SynchronousMotor } from '../../core/machine';
import {
  AGREES_SHARE,
  type LoadTestPoint,
  type LoadTestResult,
  type LoadTestRow,
  type SuspectField,
} from '../../core/plan';
import type {
  LoadTestRowInput,
  LoadTestRowView,
  LoadTestView,
  ShaftLoadView,
  SubmeterFileView,
} from '../../schemas/shaft-load';
import type { MotorLoad } from '../models/MotorLoad';
import type { SubmeterFile } from '../models/SubmeterFile';
import type { YearLoad } from '../services/shaft-load';

/** A row of a load test in the words of the core: the machine's own field, kvar absorbed, per-unit volts. */
export function toLoadTestRow(machine: SynchronousMotor, row: LoadTestRowInput): LoadTestRow {
  return {
    fieldCurrentA: Math.max(0, fieldCurrentAtPanelA(machine, row.fieldA)),
    inputKw: row.inputKw,
    kvar: kvarAbsorbed(row),
    lineCurrentA: row.lineA ?? null,
    voltagePu: row.voltageV === undefined ? undefined : row.voltageV / machine.ratedVoltageV,
  };
}

function kvarAbsorbed({ kvar, powerFactor, sense, inputKw }: LoadTestRowInput): number | null {
  const size = kvar ?? (powerFactor === undefined ? null : inputKw * Math.tan(Math.acos(powerFactor)));
  return size === null ? null : sense === 'leading' ? -size : size;
}

const suspectNames: Record<SuspectField, [label: string, unit: string]> = {
  xdPu: ['Xd', 'pu'],
  xqPu: ['Xq', 'pu'],
  ratedFieldCurrentA: ['Rated field current', 'A'],
};

/** A load test beside the motor's data. */
export function presentLoadTest(
  { motor, assumed }: CompletedMotor & { motor: SynchronousMotor },
  { points, offShare, compared, suspects }: LoadTestResult,
): LoadTestView {
  return {
    rows: points.map((point) => presentPoint(point, motor)),
    offPercent: offShare === null ? null : offShare * 100,
    compared,
    agrees: offShare !== null && offShare <= AGREES_SHARE,
    suspects: suspects.map(({ field, value, fitted, leftShare }) => {
      const [label, unit] = suspectNames[field];
      const isAssumed = assumed.some((one) => one.field === field);
      return { label, unit, value, fitted, assumed: isAssumed, leftPercent: leftShare * 100 };
    }),
  };
}

function presentPoint(point: LoadTestPoint, { ratedOutputKw }: SynchronousMotor): LoadTestRowView {
  const { shaftKw, kvar, kvarOff, lineCurrentA, lineCurrentOffA, instrumentsOff, fault } = point;
  return {
    shaftKw,
    shaftPercent: (100 * shaftKw) / ratedOutputKw,
    kvarDelivered: -kvar,
    kvarOff: kvarOff === null ? null : -kvarOff,
    lineA: lineCurrentA,
    lineOffA: lineCurrentOffA,
    instrumentsOffPercent: instrumentsOff === null ? null : instrumentsOff * 100,
    fault,
  };
}

function presentFile(file: SubmeterFile): SubmeterFileView {
  const { id, fileName, bytes, factor, stepMinutes, intervals, missing, highestKw, totalKwh, notes } = file;
  const fromMs = Number(file.startMs);
  return {
    id,
    fileName,
    bytes,
    factor,
    fromMs,
    toMs: fromMs + intervals * stepMinutes * 60_000,
    stepMinutes,
    intervals,
    missing,
    highestKw,
    totalKwh,
    notes,
    broughtAt: file.createdAt.toISOString(),
  };
}

/** Where a motor's load comes from, and what that gives over the year. */
export function presentShaftLoad(told: {
  motorId: number;
  row: MotorLoad | null;
  files: SubmeterFile[];
  load: YearLoad & { usualShaftKw: number; hoursRunning: number };
  test: LoadTestView | null;
}): ShaftLoadView {
  const { motorId, row, files, load, test } = told;
  return {
    motorId,
    version: row?.version ?? 0,
    source: row?.source ?? 'calendar',
    profile: row?.profile ?? null,
    whenMissing: row?.whenMissing ?? 'calendar',
    loadTest: row?.loadTest ?? [],
    files: files.map(presentFile),
    year: {
      hoursRunning: load.hoursRunning,
      usualShaftKw: load.usualShaftKw,
      highestShaftKw: load.hours.reduce((most, { shaftKw }) => Math.max(most, shaftKw), 0),
      hoursMissing: load.hoursMissing,
      hoursBeyond: load.hoursBeyond,
    },
    test,
  };
}
