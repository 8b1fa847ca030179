import { chargeFields, chargeKinds } from './charges';
import {
  contractFields,
  holidayFields,
  sourceFields,
  straddle,
  straddleFields,
  windowKinds,
  zeroKwhFields,
} from './entries';
import { exampleFields, mostExamples } from './examples';
import { quantityFields, quantityKinds } from './quantities';
import { before, date, rounding, text } from './shared';
import type { Field, Takes } from './types';
import { metering } from './words';

const span: Takes = {
  kind: 'written',
  pattern: '^(\\d{2}-\\d{2}\\s+to\\s+\\d{2}-\\d{2}|rest)$',
  forms: ['05-01 to 10-31', 'rest'],
};
const rules: Takes = { kind: 'kinds', kinds: windowKinds.filter(({ name }) => name === 'days'), common: [] };

/** Parts of a schedule, in the order they are best written. */
const parts: readonly Field[] = [
  {
    name: 'schedule',
    about: "The schedule's id, and the file's name.",
    takes: { kind: 'written', pattern: '^[a-z0-9]+(-[a-z0-9]+)*$', forms: ['millrace-large'] },
    example: 'millrace-large',
    isRequired: true,
  },
  {
    name: 'title',
    about: 'What the tariff is, in a few words.',
    takes: text,
    example: 'Large supply',
    leftOut: 'the id',
  },
  {
    name: 'currency',
    about: 'Currency of all rates and amounts.',
    takes: { kind: 'written', pattern: '^[A-Z]{3}$', forms: ['EUR', 'USD'] },
    example: 'EUR',
    isRequired: true,
  },
  {
    name: 'timeZone',
    about: 'Zone to which every clock time and date is local.',
    takes: text,
    example: 'Europe/Lisbon',
    isRequired: true,
  },
  {
    name: 'source',
    about: 'Where the tariff was read.',
    takes: { kind: 'set', fields: sourceFields },
    example: '{ publisher: Millrace Power, title: Sheet 4, date: 2025-12-15, status: invented }',
  },
  {
    name: 'inForce',
    about: 'The day from which the text holds.',
    takes: date,
    example: '2026-01-01',
    leftOut: 'every period is priced',
  },
  {
    name: 'meters',
    about:
      'Whether a bill is of one meter, or of several of a site whose readings are summed before anything is measured.',
    takes: { kind: 'word', words: metering },
    example: 'summed',
    leftOut: 'one',
  },
  {
    name: 'demandWindow',
    about: 'The time over which demand is averaged.',
    takes: {
      kind: 'written',
      pattern: '^\\d+ min( rolling every \\d+ min)?$',
      forms: ['15 min', '30 min', '60 min', '30 min rolling every 5 min'],
    },
    example: '15 min',
    leftOut: "the readings' own interval",
    inVersions: true,
  },
  {
    name: 'holidays',
    about: 'The holidays that windows know.',
    takes: { kind: 'set', fields: holidayFields },
    example: '{ calendar: PT, add: [2026-12-24] }',
    leftOut: 'none',
    inVersions: true,
  },
  {
    name: 'straddle',
    about: 'How a bill across two versions, seasons or rider months is divided; one word, or one for each.',
    takes: { kind: 'either', of: [straddle, { kind: 'set', fields: straddleFields }] },
    example: 'days',
    leftOut: 'days',
  },
  {
    name: 'rounding',
    about: 'The step to which every line is rounded.',
    takes: rounding,
    example: '0.01',
    leftOut: "the currency's minor unit",
    inVersions: true,
  },
  {
    name: 'zeroKwh',
    about: 'What pf(...) and ratio(...) are in a period without kWh.',
    takes: { kind: 'set', fields: zeroKwhFields },
    example: '{ pf: 1, ratio: 0 }',
    inVersions: true,
  },
  {
    name: 'contract',
    about: "What the site's contract supplies.",
    takes: { kind: 'entries', key: 'own', of: { kind: 'set', fields: contractFields } },
    example: '{ contractKva: { unit: kVA, default: 2000 } }',
    inVersions: true,
  },
  {
    name: 'rates',
    about: 'Numbers that formulas use, and monthly riders.',
    takes: { kind: 'entries', key: 'own', of: { kind: 'place', by: ['season', 'month'] } },
    example: '{ allowance: 0.40, fuel: { months: { 2026-07: 0.0031 } } }',
    inVersions: true,
  },
  {
    name: 'seasons',
    about: 'Spans of the year, both ends included; together they fill it.',
    takes: { kind: 'entries', key: 'own', of: { kind: 'list', of: span, mayStandAlone: true } },
    example: '{ summer: 05-01 to 10-31, winter: rest }',
    inVersions: true,
  },
  {
    name: 'windows',
    about: 'Hours of the week that are measured or priced apart.',
    takes: {
      kind: 'entries',
      key: 'own',
      of: {
        kind: 'either',
        of: [
          { kind: 'kinds', kinds: windowKinds, common: [before] },
          { kind: 'list', of: rules },
        ],
      },
    },
    example: '{ peak: { days: weekdays, hours: 08:00-20:00 }, offPeak: { rest: peak } }',
    inVersions: true,
  },
  {
    name: 'quantities',
    about: 'What is measured, and what is worked out from it, top to bottom.',
    takes: { kind: 'entries', key: 'own', of: { kind: 'kinds', kinds: quantityKinds, common: quantityFields } },
    example: '{ kwh: { sum: kwh } }',
    inVersions: true,
  },
  {
    name: 'charges',
    about: 'The lines of the bill, top to bottom.',
    takes: { kind: 'entries', key: 'own', of: { kind: 'kinds', kinds: chargeKinds, common: chargeFields } },
    example: '{ energy: { per: kwh, rate: 0.10, group: energy } }',
    inVersions: true,
  },
];

/** What a version says: its note, and what it changes. */
export const versionParts: readonly Field[] = [
  { name: 'note', about: 'What the version is.', takes: text, example: 'Sheet 5' },
  ...parts.filter(({ inVersions }) => inVersions),
];

/** All parts of a schedule, in order. */
export const allParts: readonly Field[] = [
  ...parts,
  {
    name: 'versions',
    about: 'What changes from a day on.',
    takes: { kind: 'entries', key: 'date', of: { kind: 'set', fields: versionParts } },
    example: '{ 2026-08-01: { charges: { energy: { rate: 0.11 } } } }',
  },
  {
    name: 'examples',
    about: 'Worked bills the schedule must reproduce.',
    takes: { kind: 'list', of: { kind: 'set', fields: exampleFields }, most: mostExamples },
    example: '[ { title: T, from: 2026-07-01, to: 2026-08-01, quantities: { kwh: 10 }, expect: { total: 1.00 } } ]',
  },
];
