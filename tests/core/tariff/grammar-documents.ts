import { parse, stringify } from 'yaml';
import type { Field, Kind } from '@/core/tariff/grammar';
import { scheduleGrammar } from '@/core/tariff/grammar';

/** A schedule as plain data. */
export type Document = Record<string, unknown>;

/** A set of fields somewhere in a schedule. */
export interface Host {
  name: string;
  fields: readonly Field[];
  /** A whole schedule with this set as given, so that nothing but the set can be wrong. */
  document(set: Document): Document;
  /** The set with nothing that could be left out; without the field given, if that stands for another. */
  least(without?: string): Document;
}

/** Text of a schedule. */
export const textOf = (document: Document): string => stringify(document, { version: '1.2', schema: 'core' });

/** The example of a field, read. */
export const exampleOf = ({ example }: Field): unknown => parse(example, { version: '1.2', schema: 'core' });

/** A sum of kWh is no kVA. */
const withUnitOfSum = (field: Field): Field => (field.name === 'unit' ? { ...field, example: 'kWh' } : field);

/** Names the table's examples use. */
const base = parse(
  `schedule: example
currency: EUR
timeZone: Europe/Lisbon
inForce: 2026-01-01
seasons: { summer: 05-01 to 10-31, winter: rest }
windows: { peak: { days: weekdays, hours: 08:00-20:00 }, offPeak: { rest: peak } }
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKva: { highest: kva }
  maxKw: { highest: kw }
  billedKw: { formula: maxKw, unit: kW }
  cos: { formula: 0.9 }
  pf: { formula: 0.9 }
  pointsBelow: { formula: 1, unit: points }
charges:
  energy: { per: kwh, rate: 0.10, group: energy }
`,
  { version: '1.2', schema: 'core' },
) as Record<'windows' | 'quantities' | 'charges' | 'seasons', Document> & Document;

const contract = { contractKva: { unit: 'kVA', default: 2000 } };
const fee = { amount: 'contractKva', group: 'fixed' };
const withContract = { ...base, contract, charges: { ...base.charges, fee } };
const example = {
  title: 'T',
  from: '2026-07-01',
  to: '2026-08-01',
  quantities: { kwh: 10 },
  expect: { total: 1 },
};

function least(fields: readonly Field[], isLeft: (name: string) => boolean = () => false): Document {
  return Object.fromEntries(
    fields.filter(({ name, isRequired }) => isRequired || isLeft(name)).map((field) => [field.name, exampleOf(field)]),
  );
}

function setHost(name: string, fields: readonly Field[], document: Host['document']): Host {
  return { name, fields, document, least: () => least(fields) };
}

function kindHosts(what: string, kinds: readonly Kind[], common: readonly Field[], document: Host['document']): Host[] {
  return kinds.map(({ name, fields, oneOf = [] }) => ({
    name: `${what} that says ${name}`,
    fields: [...fields, ...(name === 'sum' ? common.map(withUnitOfSum) : common)].filter(
      ({ onlyInVersions }) => !onlyInVersions,
    ),
    document,
    least: (without) => {
      const needed = fields.find((field) => field.name === without)?.needs;
      const isOther = without !== undefined && oneOf.includes(without);
      return least(
        [...fields, ...common],
        (field) => (field === oneOf[0] && !isOther) || field === 'over' || field === needed,
      );
    },
  }));
}

const partOf = (name: string): Field => scheduleGrammar.parts.find((part) => part.name === name)!;
const setFields = (name: string): readonly Field[] => {
  const { takes } = partOf(name);
  const inside = takes.kind === 'entries' ? takes.of : takes;
  return inside.kind === 'set' ? inside.fields.filter(({ onlyInVersions }) => !onlyInVersions) : [];
};
const straddleFields = (): readonly Field[] => {
  const { takes } = partOf('straddle');
  const set = takes.kind === 'either' ? takes.of.find(({ kind }) => kind === 'set') : takes;
  return set?.kind === 'set' ? set.fields : [];
};
const windowKinds = (): readonly Kind[] => {
  const { takes } = partOf('windows');
  const either = takes.kind === 'entries' && takes.of.kind === 'either' ? takes.of.of[0]! : takes;
  return either.kind === 'kinds' ? either.kinds : [];
};

/** A whole schedule with some parts replaced; what they make is used. */
function wholeSchedule(set: Document): Document {
  const ofRates = set['rates'] ? { rider: { per: 'kwh', rate: 'fuel * allowance', group: 'adjustment' } } : {};
  const charges = { ...withContract.charges, ...ofRates, ...(set['charges'] as Document | undefined) };
  return { ...withContract, ...set, charges };
}

const { parts, quantityKinds, quantityFields, chargeKinds, chargeFields, exampleFields, readingFields } =
  scheduleGrammar;
const withReadings = (readings: Document): Document => ({
  ...base,
  examples: [{ ...example, quantities: {}, readings }],
});

/** Every set of fields of a schedule. */
export const hosts: Host[] = [
  { name: 'a schedule', fields: parts, document: wholeSchedule, least: () => ({}) },
  setHost('straddle', straddleFields(), (set) => ({ ...base, straddle: set })),
  ...['source', 'holidays'].map((name) => setHost(name, setFields(name), (set) => ({ ...base, [name]: set }))),
  setHost('zeroKwh', setFields('zeroKwh'), (set) => ({ ...base, zeroKwh: set })),
  setHost('a contract input', setFields('contract'), (set) => ({ ...withContract, contract: { contractKva: set } })),
  ...kindHosts('a window', windowKinds(), [], (set) => ({
    ...base,
    windows: { ...base.windows, other: set },
  })),
  ...kindHosts('a quantity', quantityKinds, quantityFields, (set) => ({
    ...base,
    quantities: { ...base.quantities, other: set },
  })),
  ...kindHosts('a charge', chargeKinds, chargeFields, (set) => ({ ...base, charges: { ...base.charges, other: set } })),
  {
    name: 'an example',
    fields: exampleFields,
    document: (set) => ({ ...withContract, examples: [set] }),
    least: (without) => ({ ...least(exampleFields), ...(without !== 'readings' && { quantities: { kwh: 10 } }) }),
  },
  setHost('readings', readingFields, withReadings),
];

/** Every field of the language, each name once. */
export const allFields: Field[] = [
  ...new Map(hosts.flatMap(({ fields }) => fields).map((field) => [field.name, field])).values(),
];
