import { fixField, goldenMinimum, ratedCurrentA, ratedKva, withAssumed } from '../machine';
import type { SynchronousMotor } from '../machine';
import { shaftLoadFromSubmeter } from './submeter';

/** One row of a load test: what was read at the motor at one load. */
export interface LoadTestRow {
  /** Of the machine's own field. [A], >= 0 */
  fieldCurrentA: number;
  /** Whole input. [kW], >= 0 */
  inputKw: number;
  /** Absorbed; negative when delivered. [kvar]; null where not read */
  kvar: number | null;
  /** [A]; null where not read */
  lineCurrentA: number | null;
  /** Terminal voltage, 1 when absent. [pu] */
  voltagePu?: number;
}

/** A row beside what the motor's data say of it. */
export interface LoadTestPoint {
  /** Input less the losses at that field. [kW] */
  shaftKw: number;
  /** By the motor's data. */
  kvar: number;
  lineCurrentA: number;
  /** By the motor's data less as read; null where not read. */
  kvarOff: number | null;
  lineCurrentOffA: number | null;
  /** Apparent power by volts and amperes over that by kW and kvar, less 1: how far the instruments agree. Null where not all were read. */
  instrumentsOff: number | null;
  /** `stands`: the input is below half the motor's losses; `pull-out`: by the data this field cannot hold it. */
  fault: 'stands' | 'pull-out' | null;
}

/** A value of the motor's data that would explain the readings if it were another. */
export interface LoadTestSuspect {
  field: SuspectField;
  value: number;
  /** Value at which data and readings agree best. */
  fitted: number;
  /** Root mean square of what is left between them, of rated kVA. */
  leftShare: number;
}

export type SuspectField = 'xdPu' | 'xqPu' | 'ratedFieldCurrentA';

export interface LoadTestResult {
  points: LoadTestPoint[];
  /** Root mean square of the reactive power's difference, of rated kVA; null where no row could be compared. */
  offShare: number | null;
  /** Rows that could be compared. */
  compared: number;
  /** Best first; empty where data and readings agree within `AGREES_SHARE`, or nothing explains the difference. */
  suspects: LoadTestSuspect[];
}

/** Difference up to which data and readings agree: common practice for switchboard instruments of class 1.5. */
export const AGREES_SHARE = 0.02;

const SUSPECTS: readonly SuspectField[] = ['xdPu', 'xqPu', 'ratedFieldCurrentA'];

/** Factors by which a suspect may be off. */
const LEAST_FACTOR = 0.5;
const MOST_FACTOR = 2;

/**
 * Sets a load test beside the motor's data: shaft load and reactive power of each row at the field and voltage read there, and
 * which single value of the data, if it were another, would explain the difference.
 *
 * Amperes stand in for reactive power where that was not read: with its sense as the data have it.
 *
 * @param motor  Motor data.
 * @param rows  At least one.
 * @throws {RangeError} naming the row and entry out of range
 */
export function compareLoadTest(motor: SynchronousMotor, rows: readonly LoadTestRow[]): LoadTestResult {
  if (rows.length === 0) throw new RangeError('rows must have at least one row of the load test, got none');
  rows.forEach(checkRow);
  const points = rows.map((row) => pointOf(motor, row));
  const left = leftOf(motor, rows);
  const compared = left.length;
  const offShare = compared === 0 ? null : rootMeanSquare(left);
  const suspects = offShare === null || offShare <= AGREES_SHARE ? [] : suspectsOf(motor, rows, offShare);
  return { points, offShare, compared, suspects };
}

function checkRow(row: LoadTestRow, index: number): void {
  const entries = { fieldCurrentA: row.fieldCurrentA, inputKw: row.inputKw, lineCurrentA: row.lineCurrentA ?? 0 };
  for (const [name, value] of Object.entries(entries)) {
    if (!(value >= 0 && Number.isFinite(value)))
      throw new RangeError(`rows[${index}].${name} must be >= 0, got ${value}`);
  }
  if (row.kvar !== null && !Number.isFinite(row.kvar))
    throw new RangeError(`rows[${index}].kvar must be finite, got ${row.kvar}`);
}

function pointOf(motor: SynchronousMotor, row: LoadTestRow): LoadTestPoint {
  const { fieldCurrentA, voltagePu } = row;
  const inputKw = Float64Array.from([row.inputKw]);
  const { shaftKw, beyondPullOut } = shaftLoadFromSubmeter(motor, { inputKw, fieldCurrentA, voltagePu });
  const point = fixField(motor, { fieldCurrentA, voltagePu }).point(shaftKw[0]!);
  const read = readKvar(motor, row, point.kvar);
  return {
    shaftKw: shaftKw[0]!,
    kvar: point.kvar,
    lineCurrentA: point.lineCurrentA,
    kvarOff: read === null ? null : point.kvar - read,
    lineCurrentOffA: row.lineCurrentA === null ? null : point.lineCurrentA - row.lineCurrentA,
    instrumentsOff: instrumentsOff(motor, row),
    fault: beyondPullOut > 0 ? 'pull-out' : shaftKw[0] === 0 && row.inputKw > 0 ? 'stands' : null,
  };
}

/** Apparent power by volts and amperes. [kVA]; null where amperes were not read */
function apparentKva(motor: SynchronousMotor, { lineCurrentA, voltagePu = 1 }: LoadTestRow): number | null {
  return lineCurrentA === null ? null : (lineCurrentA / ratedCurrentA(motor)) * voltagePu * ratedKva(motor);
}

/** Reactive power as read, or from amperes in the sense of `alike`; null where neither was read. [kvar] */
function readKvar(motor: SynchronousMotor, row: LoadTestRow, alike: number): number | null {
  if (row.kvar !== null) return row.kvar;
  const kva = apparentKva(motor, row);
  if (kva === null) return null;
  const size = Math.sqrt(Math.max(0, kva ** 2 - row.inputKw ** 2));
  return alike < 0 ? -size : size;
}

function instrumentsOff(motor: SynchronousMotor, row: LoadTestRow): number | null {
  const kva = apparentKva(motor, row);
  if (kva === null || row.kvar === null) return null;
  const byPower = Math.hypot(row.inputKw, row.kvar);
  return byPower === 0 ? null : kva / byPower - 1;
}

/** Difference of reactive power of each row that can be compared, of rated kVA. */
function leftOf(motor: SynchronousMotor, rows: readonly LoadTestRow[]): number[] {
  return rows.flatMap((row) => {
    const { kvarOff, fault } = pointOf(motor, row);
    return kvarOff === null || fault !== null ? [] : [kvarOff / ratedKva(motor)];
  });
}

const rootMeanSquare = (values: number[]) => Math.sqrt(values.reduce((sum, x) => sum + x * x, 0) / values.length);

function suspectsOf(motor: SynchronousMotor, rows: readonly LoadTestRow[], offShare: number): LoadTestSuspect[] {
  const fits = SUSPECTS.filter((field) => field !== 'xqPu' || motor.xqPu < motor.xdPu).map((field) => {
    const leftWith = (logFactor: number) => leftWithout(motor, rows, field, motor[field] * Math.exp(logFactor));
    const best = goldenMinimum(leftWith, Math.log(LEAST_FACTOR), Math.log(MOST_FACTOR));
    return { field, value: motor[field], fitted: motor[field] * Math.exp(best), leftShare: leftWith(best) };
  });
  return fits.filter(({ leftShare }) => leftShare < offShare / 2).sort((a, b) => a.leftShare - b.leftShare);
}

/** What is left with one value replaced; a row that can then no longer be compared speaks against the value. */
function leftWithout(
  motor: SynchronousMotor,
  rows: readonly LoadTestRow[],
  field: SuspectField,
  value: number,
): number {
  const changed = withAssumed(motor, field, value);
  const left = leftOf(changed, rows);
  const lost = leftOf(motor, rows).length - left.length;
  return left.length === 0 ? 1 : rootMeanSquare(left) + Math.max(0, lost);
}
