import { before, clause, date, label, number, text } from './shared';
import type { Field, Kind, Takes } from './types';
import { dayWords, meterUnits, statuses, straddles } from './words';

/** Fields of the source. */
export const sourceFields: readonly Field[] = [
  { name: 'publisher', about: 'Who published the tariff.', takes: text, example: 'Millrace Power' },
  { name: 'title', about: 'The sheet or text.', takes: text, example: 'Sheet 4' },
  { name: 'date', about: 'Its date.', takes: text, example: '2025-12-15' },
  {
    name: 'status',
    about: 'Whether it was read in a source (found), is from memory, or is invented.',
    takes: { kind: 'word', words: statuses },
    example: 'found',
  },
  { name: 'url', about: 'Where it can be read.', takes: text, example: 'https://millrace.example/sheet-4' },
];

const days: Takes = { kind: 'list', of: date, least: 0, mayStandAlone: true };

/** Fields of the holidays. */
export const holidayFields: readonly Field[] = [
  { name: 'calendar', about: 'A country, or a part of one.', takes: text, example: 'PT' },
  { name: 'add', about: 'Days that are holidays too.', takes: days, example: '[2026-12-24]' },
  { name: 'drop', about: 'Holidays of the calendar that are none here.', takes: days, example: '[2026-04-25]' },
];

/** Fields of what holds in a period without kWh. */
export const zeroKwhFields: readonly Field[] = [
  { name: 'pf', about: 'What pf(...) is where there is no kWh.', takes: number, example: '1' },
  { name: 'ratio', about: 'What ratio(...) is where there is no kWh.', takes: number, example: '0' },
];

/** One way to divide a bill. */
export const straddle: Takes = { kind: 'word', words: straddles };

/** Fields of how a bill across borders is divided. */
export const straddleFields: readonly Field[] = [
  { name: 'text', about: 'Across two versions of the schedule.', takes: straddle, example: 'days', leftOut: 'days' },
  {
    name: 'season',
    about:
      "Across two seasons of rates; end: the last day's season holds for the whole bill. Windows keep their own days.",
    takes: straddle,
    example: 'end',
    leftOut: 'as text, shared',
  },
  { name: 'month', about: 'Across two months of riders.', takes: straddle, example: 'end', leftOut: 'as text' },
];

/** Fields of a contract input. */
export const contractFields: readonly Field[] = [
  {
    name: 'unit',
    about: 'Its unit; flag for yes or no, date for a date like 20260115.',
    takes: { kind: 'word', words: [...meterUnits, 'flag', 'date'], isOpen: true },
    example: 'kVA',
    leftOut: 'a bare number',
  },
  {
    name: 'default',
    about: 'Its value where the contract of a site says none.',
    takes: number,
    example: '2000',
    leftOut: 'every site must say it',
  },
  {
    name: 'range',
    about: 'The least and the greatest value it can have.',
    takes: { kind: 'list', of: number, least: 2, most: 2 },
    example: '[100, 50000]',
  },
  label,
  clause,
  before,
];

/** Kinds of a window: hours of days, or all time outside other windows. */
export const windowKinds: readonly Kind[] = [
  {
    name: 'rest',
    about: 'All time outside these windows.',
    fields: [
      {
        name: 'rest',
        about: 'The windows above it is the rest of.',
        takes: { kind: 'list', of: { kind: 'name', of: 'window' }, mayStandAlone: true },
        example: 'peak',
        isRequired: true,
      },
    ],
  },
  {
    name: 'days',
    about: 'Hours of certain days.',
    fields: [
      {
        name: 'days',
        about: 'Kinds of days; mon to sun and weekdays are no holidays.',
        takes: { kind: 'list', of: { kind: 'word', words: dayWords }, mayStandAlone: true },
        example: 'weekdays',
        isRequired: true,
      },
      {
        name: 'hours',
        about: 'Spans of the local clock; 22:00-06:00 runs over midnight.',
        takes: {
          kind: 'list',
          of: {
            kind: 'written',
            pattern: '^\\d{2}:\\d{2}-\\d{2}:\\d{2}$',
            forms: ['08:00-20:00', '22:00-06:00'],
          },
          mayStandAlone: true,
        },
        example: '[08:00-11:00, 17:00-22:00]',
        isRequired: true,
      },
      {
        name: 'season',
        about: 'The seasons it holds in.',
        takes: { kind: 'list', of: { kind: 'name', of: 'season' }, mayStandAlone: true },
        example: 'summer',
        leftOut: 'all seasons',
      },
    ],
  },
];
