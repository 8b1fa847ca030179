import { fieldCurrentAtPanelA, panelCurrentA } from '../machine';
import type { FieldControl } from '../machine';
import { fieldBounds } from './field-bounds';
import type { FieldBounds } from './field-bounds';
import type { PlanMotor } from './types';

/** What an operator sets at a motor, and in which steps. */
export type SearchedSetting =
  | {
      holds: 'field-current';
      /** Step an operator can set, as the panel shows it. [A], > 0 */
      stepA: number;
      /** Narrower range than the motor's limits, of the panel. [A] */
      panelLowA?: number;
      panelHighA?: number;
    }
  /** Power factors from lagging over unity to leading. [unitless], (0, 1] */
  | { holds: 'power-factor'; step: number; leastLagging: number; leastLeading: number }
  /** Delivered. [kvar] */
  | { holds: 'kvar'; stepKvar: number; lowKvar: number; highKvar: number }
  /** One for all motors that hold it at a meter. [unitless], lagging */
  | { holds: 'plant-power-factor'; step: number; least: number; most: number };

/** A motor of a plant that is searched. */
export interface SearchMotor extends PlanMotor {
  /** Absent: field current in steps of 1 A; null: the motor is left as it stands. */
  searched?: SearchedSetting | null;
}

/** One thing that is set: of one motor, or of those that hold the power factor at one meter together, in one span. */
export interface SearchAxis {
  motors: number[];
  span: number;
  /** In order; leaving the motors as they stand is one of them. */
  settings: FieldControl[];
  standing: number;
  /** Standing keeps every limit. */
  standingAdmissible: boolean;
  /** Of field currents. */
  bounds: FieldBounds | null;
}

/** Most settings of an axis. */
const MOST_SETTINGS = 2000;

/** Axes of a search: every span of every motor that is searched. Notes say what is not offered. */
export function searchAxes(motors: readonly SearchMotor[], spans: number): { axes: SearchAxis[]; notes: string[] } {
  const notes: string[] = [];
  const axes: SearchAxis[] = [];
  const holders = new Map<number, number[]>();
  motors.forEach((motor, m) => {
    const searched = searchedOf(motor);
    if (!searched) return;
    checkSetting(searched, `motors[${m}].searched`);
    if (searched.holds !== 'plant-power-factor') {
      const axis = axisOf(motor, m, searched, notes);
      if (axis.settings.length > 1) axes.push(...perSpan(axis, spans));
      return;
    }
    const meter = motor.behind ?? 0;
    const others = holders.get(meter);
    if (others) others.push(m);
    else holders.set(meter, [m]);
  });
  for (const held of holders.values()) axes.push(...perSpan(sharedAxis(motors, held), spans));
  return { axes, notes };
}

const searchedOf = ({ searched }: SearchMotor): SearchedSetting | null =>
  searched === undefined ? { holds: 'field-current', stepA: 1 } : searched;

const perSpan = (axis: Omit<SearchAxis, 'span'>, spans: number): SearchAxis[] =>
  Array.from({ length: spans }, (_, span) => ({ ...axis, span }));

const standingControl = (motor: PlanMotor): FieldControl => ({
  holds: 'field-current',
  fieldCurrentA: motor.standingFieldA,
});

function axisOf(motor: SearchMotor, m: number, searched: SearchedSetting, notes: string[]): Omit<SearchAxis, 'span'> {
  if (searched.holds === 'field-current') return fieldAxis(motor, m, searched, notes);
  const settings = [standingControl(motor), ...setPoints(searched)];
  // Regulators keep within limits by themselves; whether the motor as it stands does is a matter of its field.
  const found = fieldBounds(motor);
  return {
    motors: [m],
    settings,
    standing: 0,
    standingAdmissible: isWithin(found, motor.standingFieldA),
    bounds: null,
  };
}

function sharedAxis(motors: readonly SearchMotor[], held: number[]): Omit<SearchAxis, 'span'> {
  const first = motors[held[0]!]!;
  const settings = [standingControl(first), ...setPoints(searchedOf(first)!)];
  const standingAdmissible = held.every((m) => isWithin(fieldBounds(motors[m]!), motors[m]!.standingFieldA));
  return { motors: held, settings, standing: 0, standingAdmissible, bounds: null };
}

/** Set points of a regulator, in order. */
function setPoints(searched: SearchedSetting): FieldControl[] {
  switch (searched.holds) {
    case 'kvar':
      return stepsBetween(searched.lowKvar, searched.highKvar, searched.stepKvar).map((kvarDelivered) => ({
        holds: 'kvar',
        kvarDelivered,
      }));
    case 'power-factor': {
      const lagging = stepsBetween(searched.leastLagging, 1, searched.step);
      const leading = stepsBetween(searched.leastLeading, 1, searched.step).reverse();
      return [
        ...lagging.filter((powerFactor) => powerFactor < 1).map((powerFactor) => ({ powerFactor, leading: false })),
        ...leading.map((powerFactor) => ({ powerFactor, leading: true })),
      ].map((at) => ({ holds: 'power-factor', ...at }));
    }
    case 'plant-power-factor':
      return stepsBetween(searched.least, searched.most, searched.step).map((powerFactor) => ({
        holds: 'plant-power-factor',
        powerFactor,
      }));
    case 'field-current':
      throw new RangeError('field currents are set in steps of the panel');
  }
}

/** Multiples of a step from low to high, without the crumbs of binary fractions. */
function stepsBetween(low: number, high: number, step: number): number[] {
  const found: number[] = [];
  for (let k = Math.ceil(low / step - 1e-9); k * step <= high + 1e-9 * step; k++)
    found.push(Number((k * step).toPrecision(12)));
  return found;
}

/** Field currents: multiples of the panel's step within bounds, and the standing one. */
function fieldAxis(
  motor: SearchMotor,
  m: number,
  { stepA, panelLowA = -Infinity, panelHighA = Infinity }: Extract<SearchedSetting, { holds: 'field-current' }>,
  notes: string[],
): Omit<SearchAxis, 'span'> {
  const { standingFieldA } = motor;
  const found = fieldBounds(motor);
  const alone = {
    motors: [m],
    settings: [standingControl(motor)],
    standing: 0,
    standingAdmissible: true,
    bounds: null,
  };
  if ('none' in found) {
    const { limit, shaftKw, voltagePu } = found.none;
    const at = `${shaftKw.toFixed(1)} kW${voltagePu === 1 ? '' : ` and ${voltagePu} of rated voltage`}`;
    notes.push(`Motor ${m + 1} has no admissible field at ${at} (${limit}): its field is left alone.`);
    return alone;
  }
  const low = Math.max(panelCurrentA(motor.motor, found.lowA), panelLowA);
  const high = Math.min(panelCurrentA(motor.motor, found.highA), panelHighA);
  const steps = stepsBetween(low, high, stepA).map((panelA) => fieldCurrentAtPanelA(motor.motor, panelA));
  const fields = [...new Set([standingFieldA, ...steps])].sort((a, b) => a - b);
  const standingAdmissible = isWithin(found, standingFieldA);
  if (!standingAdmissible) {
    notes.push(
      `Motor ${m + 1} stands at ${standingFieldA} A, outside its limits of ${found.lowA.toFixed(1)} to ${found.highA.toFixed(1)} A: ` +
        (fields.length > 1
          ? 'leaving it alone is not offered.'
          : 'no step lies within them and the range given, so its field is left alone.'),
    );
  }
  return {
    motors: [m],
    settings: fields.map((fieldCurrentA) => ({ holds: 'field-current', fieldCurrentA })),
    standing: fields.indexOf(standingFieldA),
    standingAdmissible: standingAdmissible || fields.length === 1,
    bounds: found,
  };
}

function isWithin(found: ReturnType<typeof fieldBounds>, fieldA: number): boolean {
  return 'none' in found || (fieldA >= found.lowA * (1 - 1e-9) && fieldA <= found.highA * (1 + 1e-9));
}

function checkSetting(searched: SearchedSetting, name: string): void {
  const ranges: [low: number, high: number, step: number, stepName: string] =
    searched.holds === 'field-current'
      ? [0, 1, searched.stepA, 'stepA']
      : searched.holds === 'kvar'
        ? [searched.lowKvar, searched.highKvar, searched.stepKvar, 'stepKvar']
        : searched.holds === 'power-factor'
          ? [Math.min(searched.leastLagging, searched.leastLeading), 1, searched.step, 'step']
          : [searched.least, searched.most, searched.step, 'step'];
  const [low, high, step, stepName] = ranges;
  if (!(step > 0 && Number.isFinite(step))) throw new RangeError(`${name}.${stepName} must be > 0, got ${step}`);
  if (!(low <= high && Number.isFinite(high - low)))
    throw new RangeError(`${name} must have its least value first, got ${low} to ${high}`);
  if ((high - low) / step > MOST_SETTINGS)
    throw new RangeError(`${name} must have at most ${MOST_SETTINGS} settings, got ${Math.ceil((high - low) / step)}`);
  if (searched.holds.endsWith('power-factor') && !(low > 0 && high <= 1))
    throw new RangeError(`${name} must be power factors in (0, 1], got ${low} to ${high}`);
}
