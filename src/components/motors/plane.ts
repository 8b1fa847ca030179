import { operatingPoint, pqLimits, PullOutError, type Limit, type OperatingPoint } from '../../core/machine';
import type { MotorView } from '../../schemas/motor';
import type { PqCloud, PqPlaneData, PqSquare } from '../charts/pq-plane';
import { formatNumber, formatQuantity } from '../ui/format';
import type { NamedField } from './curves';
import { fieldMeter } from './field-meter';

/** Squares across the plane at most. */
const squaresAcross = 60;

/** Active power of the armature: of a machine excited from the bus without what the exciter draws beside it. [kW] */
export const armatureKw = ({ machine }: MotorView, point: OperatingPoint) =>
  point.inputKw - (machine.exciterSupply === 'bus' ? point.lossesKw.field + point.lossesKw.exciter : 0);

/** A motor's year at one field current. */
export interface YearAtField {
  points: { hours: number; kw: number; kvarDelivered: number; beyond: OperatingPoint['beyond']; nearest: Limit }[];
  /** Hours in which this field cannot hold the load at all. */
  fallenHours: number;
}

/** Runs a motor through its year at a constant field. */
export function yearAtField(motor: MotorView, fieldCurrentA: number): YearAtField {
  const year: YearAtField = { points: [], fallenHours: 0 };
  for (const { shaftKw, hours } of motor.loadHours) {
    try {
      const point = operatingPoint(motor.machine, { shaftKw, fieldCurrentA });
      year.points.push({
        hours,
        kw: armatureKw(motor, point),
        kvarDelivered: -point.kvar,
        beyond: point.beyond,
        nearest: nearestLimit(motor, point),
      });
    } catch (error) {
      if (!(error instanceof PullOutError)) throw error;
      year.fallenHours += hours;
    }
  }
  return year;
}

/** The limit of which a point uses the greatest share. */
function nearestLimit({ limits }: MotorView, point: OperatingPoint): Limit {
  const shares: [Limit, number][] = [
    ['field', point.fieldCurrentA / limits.fieldA],
    ['armature', point.lineCurrentA / limits.armatureA],
    ['pull-out', limits.pullOutMargin / point.pullOutRatio],
  ];
  return shares.reduce((nearest, one) => (one[1] > nearest[1] ? one : nearest))[0];
}

/** Running hours at a constant field by the limit that is nearest; out of step counts as pull-out. */
export function hoursByNearest(motor: MotorView, fieldCurrentA: number): Record<Limit, number> {
  const year = yearAtField(motor, fieldCurrentA);
  const hours = { field: 0, armature: 0, 'pull-out': year.fallenHours };
  for (const point of year.points) hours[point.nearest] += point.hours;
  return hours;
}

/** Hours of a year that break a limit, by limit; falling out of step counts as pull-out. */
export function hoursBeyond({ points, fallenHours }: YearAtField) {
  const of = (limit: OperatingPoint['beyond'][number]) =>
    points.reduce((sum, { hours, beyond }) => sum + (beyond.includes(limit) ? hours : 0), 0);
  const any = points.reduce((sum, { hours, beyond }) => sum + (beyond.length > 0 ? hours : 0), fallenHours);
  return { any, field: of('field'), armature: of('armature'), 'pull-out': of('pull-out') + fallenHours };
}

/** A round number at least as great: 1, 2, 2.5 or 5 times a power of ten. */
function roundUp(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  return power * ([1, 2, 2.5, 5, 10].find((factor) => factor * power >= value * 0.999) ?? 10);
}

function squaresOf({ points }: YearAtField, side: number, fieldBy: string): PqSquare[] {
  const words = { field: fieldBy, armature: 'stator', 'pull-out': 'pull-out' };
  const squares = new Map<string, PqSquare>();
  for (const { hours, kw, kvarDelivered, beyond } of points) {
    const [row, column] = [Math.round(kw / side), Math.round(kvarDelivered / side)];
    const named = beyond.map((limit) => words[limit]).join(', ');
    const key = `${row} ${column} ${named}`;
    const square = squares.get(key);
    if (square) square.hours += hours;
    else squares.set(key, { kw: row * side, kvarDelivered: column * side, hours, beyond: named });
  }
  return [...squares.values()];
}

function cloudOf(motor: MotorView, named: NamedField, shape: PqCloud['shape'], side: number): PqCloud | null {
  try {
    const point = operatingPoint(motor.machine, { shaftKw: motor.usualShaftKw, fieldCurrentA: named.fieldA });
    return {
      name: `${named.name} ${fieldMeter(motor.machine).words(named.fieldA)}`,
      shape,
      usual: { kw: armatureKw(motor, point), kvarDelivered: -point.kvar },
      squares: squaresOf(yearAtField(motor, named.fieldA), side, motor.limits.fieldBy),
    };
  } catch (error) {
    if (error instanceof PullOutError) return null;
    throw error;
  }
}

/** Limits and the year's operating points, today and at a field being tried. */
export function planeData(motor: MotorView, tried: NamedField | null): PqPlaneData {
  const { machine, limits, usualShaftKw } = motor;
  const lines = pqLimits(machine);
  const inWords = (points: { armatureKw: number; kvarDelivered: number }[]) =>
    points.map((p) => ({ kw: p.armatureKw, kvarDelivered: p.kvarDelivered }));
  const side = roundUp(motor.ratedKva / squaresAcross);
  const today = cloudOf(motor, { name: 'today', fieldA: motor.fieldTodayA }, 'circle', side);
  const other = tried && cloudOf(motor, tried, 'diamond', side);
  const rated = operatingPoint(machine, {
    shaftKw: machine.ratedOutputKw,
    powerFactor: machine.ratedPowerFactor,
    leading: true,
  });
  return {
    motorName: motor.name,
    squareKw: side,
    squareKvar: side,
    limits: {
      armature: inWords(lines.armature),
      field: inWords(lines.field),
      fieldBy: limits.fieldBy,
      pullOut: inWords(lines.pullOut),
      pullOutName: `pull-out ${formatNumber(limits.pullOutMargin, { upTo: 2 })}`,
    },
    nameplate: { kw: armatureKw(motor, rated), kvarDelivered: -rated.kvar },
    usualKw: today?.usual.kw ?? usualShaftKw,
    usualName: `usual load, ${formatQuantity(motor.usualLoadPercent, '%')}`,
    clouds: [today, other].filter((cloud) => cloud !== null),
  };
}

/** The finding of the plane: hours beyond a limit, today and at the field being tried. */
export function planeFinding(motor: MotorView, tried: NamedField | null): string {
  const meter = fieldMeter(motor.machine);
  const running = formatQuantity(motor.hoursRunning, 'h');
  const today = hoursBeyond(yearAtField(motor, motor.fieldTodayA));
  const first = today.any > 0 ? `Today ${brokenWords(motor, today)}` : `Today all ${running} lie within the limits`;
  if (!tried) return `${first}.`;
  const then = hoursBeyond(yearAtField(motor, tried.fieldA));
  const at = `at ${meter.words(tried.fieldA)}`;
  if (then.any > 0) return `${first}; ${at} ${brokenWords(motor, then)}.`;
  return `${first}; ${at} ${today.any > 0 ? 'none do' : 'they do too'}.`;
}

function brokenWords({ limits }: MotorView, hours: ReturnType<typeof hoursBeyond>): string {
  const margin = formatNumber(limits.pullOutMargin, { upTo: 2 });
  const parts = [
    [hours['pull-out'], `below a pull-out margin of ${margin}`],
    [hours.field, `beyond the limit of the ${limits.fieldBy}`],
    [hours.armature, 'beyond the limit of the stator'],
  ] as const;
  const broken = parts.filter(([count]) => count > 0);
  const [[count, where] = [0, ''], ...others] = broken;
  const more = others.map(([many, place]) => `${formatQuantity(many, 'h')} ${place}`);
  return [`${formatQuantity(count, 'h')} lie ${where}`, ...more].join(', ');
}
