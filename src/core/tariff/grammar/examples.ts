import { stepLengthsMinutes } from '../../load';
import { date, number, text } from './shared';
import type { Field, Takes } from './types';

/** Most examples in a file, readings of one, months of its history. */
export const mostExamples = 50;
export const mostReadings = 3000;
export const mostMonths = 120;

const readings: Takes = { kind: 'list', of: number, most: mostReadings };

/** Fields of an example's readings. */
export const readingFields: readonly Field[] = [
  {
    name: 'begin',
    about: 'When the first reading begins, by the local clock.',
    takes: {
      kind: 'written',
      pattern: '^\\d{4}-\\d{2}-\\d{2} \\d{2}:\\d{2}$',
      forms: ['2026-07-14 18:00'],
    },
    example: '2026-07-14 18:00',
    isRequired: true,
  },
  {
    name: 'step',
    about: 'The length of a reading.',
    takes: { kind: 'word', words: stepLengthsMinutes.map((minutes) => `${minutes} min`) },
    example: '60 min',
    isRequired: true,
  },
  { name: 'kwh', about: 'Active energy of each reading.', takes: readings, example: '[100, 120]', isRequired: true },
  {
    name: 'kvarhLagging',
    about: 'Reactive energy drawn.',
    takes: readings,
    example: '[60, 70]',
    leftOut: 'zeros',
  },
  {
    name: 'kvarhLeading',
    about: 'Reactive energy delivered.',
    takes: readings,
    example: '[0, 5]',
    leftOut: 'zeros',
  },
];

/** Fields of an example. */
export const exampleFields: readonly Field[] = [
  { name: 'title', about: 'What bill it is.', takes: text, example: 'July 2026, worked by hand', isRequired: true },
  { name: 'source', about: 'Where its figures come from.', takes: text, example: 'Sheet 4, worked example' },
  { name: 'from', about: 'The first day of the period.', takes: date, example: '2026-07-01', isRequired: true },
  { name: 'to', about: 'The day after its last.', takes: date, example: '2026-08-01', isRequired: true },
  {
    name: 'contract',
    about: 'Contract inputs of the bill.',
    takes: { kind: 'entries', key: 'contract', of: number },
    example: '{ contractKva: 2000 }',
    leftOut: 'their defaults',
  },
  {
    name: 'history',
    about: 'Quantities or lines of the months before, the oldest first.',
    takes: { kind: 'entries', key: 'history', of: { kind: 'list', of: number, most: mostMonths } },
    example: '{ maxKva: [2900, 3000] }',
  },
  {
    name: 'quantities',
    about: 'Quantities as the bill prints them; beside readings only those given by the bill.',
    takes: { kind: 'entries', key: 'quantity', of: number },
    example: '{ kwh: 300000, kvarh: 400000 }',
  },
  {
    name: 'readings',
    about: 'A stretch of meter readings; the rest of the period counts as missing.',
    takes: { kind: 'set', fields: readingFields },
    example: '{ begin: 2026-07-14 18:00, step: 60 min, kwh: [100, 120] }',
  },
  {
    name: 'expect',
    about: 'What must come out: quantities, lines, total, reactiveCost.',
    takes: { kind: 'entries', key: 'figure', of: number },
    example: '{ total: 126874.37 }',
    isRequired: true,
  },
  {
    name: 'within',
    about: 'How far a figure may be off.',
    takes: number,
    example: '0.005',
    leftOut: "half the currency's minor unit, or half a unit of the last digit written",
  },
];
