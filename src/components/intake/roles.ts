import type { ColumnEvidence, ColumnMap, ColumnUse, Measure } from '../../core/intake';
import { billQuantities, billQuantity } from '../../schemas/bill';
import type { SelectOption } from '../ui/Field';

type Role = ColumnUse['role'];

const intervalRoles: [Role, string][] = [
  ['stamp', 'Date and time'],
  ['date', 'Date'],
  ['time', 'Time of day'],
  ['interval-number', 'Number of the interval'],
  ['stamp-begin', 'Beginning of interval'],
  ['stamp-end', 'End of interval'],
  ['active', 'Energy, drawn'],
  ['export', 'Energy, delivered'],
  ['reactive-lagging', 'Reactive, lagging'],
  ['reactive-leading', 'Reactive, leading'],
  ['reactive-signed', 'Reactive, signed'],
  ['apparent', 'Apparent'],
  ['power-factor', 'Power factor'],
  ['sense', 'Lagging or leading'],
  ['quality', 'Quality mark'],
  ['meter', 'Meter'],
  ['channel', 'Name of the quantity'],
  ['unit', 'Unit of the row'],
  ['value', 'Reading'],
  ['ignore', 'leave out'],
];

const periodRoles: [Role, string][] = [
  ['period-from', 'First day'],
  ['period-to', 'Last day'],
  ['period', 'First and last day'],
  ['month', 'Month of the bill'],
  ['year', 'Year of the month'],
  ['days', 'Days'],
  ['invoice', 'Invoice number'],
  ['read-type', 'Estimated or actual'],
  ['meter', 'Account or meter'],
];

const chargeRoles: [Role, string][] = [
  ['charge', 'Line charge'],
  ['rate', 'Rate of a line'],
];

const lineRoles: [Role, string][] = [
  ['line-label', 'Name of the line'],
  ['line-quantity', 'Quantity of the line'],
  ['line-unit', 'Unit of the line'],
  ['line-rate', 'Rate of the line'],
  ['line-amount', 'Amount of the line'],
];

const lastRoles: [Role, string][] = [
  ['total', 'Printed total'],
  ['ignore', 'leave out'],
];

/** What a column can be taken for; a quantity of a bill carries its name, as in `quantity:kwh`. */
export function roleOptions(
  kind: 'intervals' | 'bills',
  column: ColumnEvidence,
  layout?: ColumnMap['layout'],
): SelectOption[] {
  if (column.takenAs === 'day-value' || column.span > 1) {
    return [
      { value: 'day-value', label: 'Readings of the day' },
      { value: 'ignore', label: 'leave out' },
    ];
  }
  if (kind === 'intervals') return intervalRoles.map(([value, label]) => ({ value, label }));
  const quantities = billQuantities.map(({ name, label, unit }) => ({
    value: `quantity:${name}`,
    label: unit ? `${label}, ${unit}` : label,
  }));
  const own = column.quantity && !billQuantities.some(({ name }) => name === column.quantity) ? column.quantity : null;
  const options = (roles: [Role, string][]) => roles.map(([value, label]) => ({ value, label }));
  return [
    ...options(periodRoles),
    ...quantities,
    ...(own ? [{ value: `quantity:${own}`, label: billQuantity(own).label }] : []),
    ...options(layout === 'items' ? lineRoles : chargeRoles),
    ...options(lastRoles),
  ];
}

/** The value of the select for what a column is taken for. */
export const roleValue = (column: Pick<ColumnEvidence, 'takenAs' | 'quantity'>) =>
  column.takenAs === 'quantity' ? `quantity:${column.quantity ?? ''}` : column.takenAs;

const units = {
  active: ['kWh', 'MWh', 'Wh', 'kW', 'MW', 'W'],
  reactive: ['kvarh', 'Mvarh', 'varh', 'kvar', 'Mvar', 'var'],
  apparent: ['kVAh', 'VAh', 'kVA', 'VA'],
};

const unitFamily: Partial<Record<Role, string[]>> = {
  active: units.active,
  export: units.active,
  'reactive-lagging': units.reactive,
  'reactive-leading': units.reactive,
  'reactive-signed': units.reactive,
  apparent: units.apparent,
  'day-value': [...units.active, ...units.reactive],
  value: [...units.active, ...units.reactive],
};

const isEnergy = (unit: string) => unit.endsWith('h');

const billFamilies: [RegExp, string[]][] = [
  [/^kwh/, ['kWh', 'MWh', 'GWh', 'Wh']],
  [/^kvarh/, ['kvarh', 'Mvarh', 'varh']],
  [/^kvah/, ['kVAh', 'MVAh', 'VAh']],
  [/Kvar/, ['kvar', 'Mvar', 'var']],
  [/Kva/, ['kVA', 'MVA', 'VA']],
  [/Kw/, ['kW', 'MW', 'W']],
];

/** Units in which a bill may print a quantity. */
function billUnits(quantity = '', unit: string): SelectOption[] {
  const family = billFamilies.find(([pattern]) => pattern.test(quantity))?.[1] ?? [];
  const known = family.includes(unit) || unit === '' || family.length === 0 ? family : [unit, ...family];
  return known.map((one) => ({ value: `${one}|${isEnergy(one) ? 'energy' : 'power'}`, label: one }));
}

/** Units a column of this role may carry, each energy also as a register that only grows. */
export function unitOptions(column: Pick<ColumnEvidence, 'takenAs' | 'unit' | 'quantity'>): SelectOption[] {
  if (column.takenAs === 'quantity') return billUnits(column.quantity, column.unit);
  const family = unitFamily[column.takenAs];
  if (!family) return [];
  const known = family.includes(column.unit) || column.unit === '' ? family : [column.unit, ...family];
  return known.flatMap((unit) =>
    isEnergy(unit)
      ? [
          { value: `${unit}|energy`, label: unit },
          { value: `${unit}|register`, label: `${unit}, register` },
        ]
      : [{ value: `${unit}|power`, label: `${unit}, mean` }],
  );
}

export const unitValue = (column: Pick<ColumnEvidence, 'unit' | 'measure'>) =>
  `${column.unit}|${column.measure ?? (isEnergy(column.unit) ? 'energy' : 'power')}`;

/** A column's use with another role. */
export function withRole(use: ColumnUse, value: string): ColumnUse {
  const { index, name, factor, minuteOfDay } = use;
  const isMultiplied = factor !== undefined && use.role !== 'rate';
  const base: ColumnUse = { index, name, role: value as Role, ...(isMultiplied ? { factor } : {}) };
  if (value.startsWith('quantity:')) return { ...base, role: 'quantity', quantity: value.slice('quantity:'.length) };
  if (value === 'day-value') return { ...use, role: 'day-value', minuteOfDay };
  const family = unitFamily[base.role];
  if (!family) return base;
  const kept = use.unit && family.includes(use.unit) ? use.unit : family[0];
  return { ...base, unit: kept, measure: measureOf(kept ?? '', use.measure) };
}

function measureOf(unit: string, before: Measure | undefined): Measure {
  if (!isEnergy(unit)) return 'power';
  return before === 'register' ? 'register' : 'energy';
}

/** Lines a rate can be of, as its select. */
export const rateOptions = (columns: readonly ColumnUse[]): SelectOption[] =>
  columns.filter((use) => use.role === 'charge').map(({ name }) => ({ value: name, label: name }));

/** A rate's use as that of another line; the quantity it is multiplied with is found anew. */
export const withCharge = ({ index, name, role }: ColumnUse, charge: string): ColumnUse => ({
  index,
  name,
  role,
  charge,
});

/** A column's use with another unit, given as the select's value. */
export function withUnit(use: ColumnUse, value: string): ColumnUse {
  const [unit = '', measure] = value.split('|');
  return { ...use, unit, measure: measure as Measure };
}
