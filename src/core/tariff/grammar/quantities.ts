import { before, clause, formula, label, number, rounding } from './shared';
import type { Field, Kind, Takes } from './types';
import { cells, meterUnits, overs, takes } from './words';

const cell: Takes = { kind: 'formula', reads: 'channels' };

const each: Field = {
  name: 'each',
  about: 'Over what it is settled; inside it reactive energy is netted, never beyond it.',
  takes: { kind: 'word', words: cells },
  example: 'hour',
  leftOut: 'the demand window; a plain sum needs none',
};
const inWindow: Field = {
  name: 'in',
  about: 'The window it is measured in.',
  takes: { kind: 'name', of: 'window' },
  example: 'peak',
  leftOut: 'all time',
};
const inEach: Field = {
  name: 'inEach',
  about: 'Windows that each get a value of their own: kwhPeak, kwhOffPeak.',
  takes: { kind: 'list', of: { kind: 'name', of: 'window' }, mayStandAlone: true },
  example: '[peak, offPeak]',
};
const where: Field = {
  name: 'where',
  about: 'A condition a cell must meet to count.',
  takes: cell,
  example: 'kw > 100',
};
const count: Field = {
  name: 'count',
  about: 'How many of the highest or lowest it is the mean of.',
  takes: number,
  example: '3',
  leftOut: '1',
};
const days: Field = {
  name: 'days',
  about: 'Whether these lie on distinct days.',
  takes: { kind: 'word', words: ['distinct'] },
  example: 'distinct',
};

function measure(name: string, about: string, example: string): Kind {
  const own: Field = { name, about, takes: cell, example, isRequired: true };
  // A condition on a sum leaves open over what it is judged; a highest or lowest has the demand window.
  const more: Field[] = name === 'sum' ? [{ ...where, needs: 'each' }] : [where, count, days];
  return { name, about, fields: [own, each, inWindow, inEach, ...more] };
}

function kind(own: Omit<Field, 'isRequired'>, ...fields: Field[]): Kind {
  return { name: own.name, about: own.about, fields: [{ ...own, isRequired: true }, ...fields] };
}

/** Kinds of quantities. */
export const quantityKinds: readonly Kind[] = [
  measure('sum', 'A sum over the period, of a channel or of a formula of channels.', 'kwh'),
  measure('highest', 'The highest value of a channel or formula, with its instant.', 'kva'),
  measure('lowest', 'The lowest value of a channel or formula, with its instant.', 'kw'),
  kind(
    { name: 'value', about: 'A channel at the instant another measure was set.', takes: cell, example: 'kvarLagging' },
    {
      name: 'at',
      about: 'The highest or lowest whose instant is meant.',
      takes: { kind: 'name', of: 'measure' },
      example: 'maxKw',
      isRequired: true,
    },
  ),
  kind({ name: 'formula', about: 'Worked out from what stands above.', takes: formula, example: 'max(maxKw; 500)' }),
  kind(
    { name: 'pick', about: 'A value by steps of this quantity.', takes: formula, example: 'cos' },
    {
      name: 'from',
      about: 'The steps: each value holds from its number on.',
      takes: { kind: 'entries', key: 'step', of: formula },
      example: '{ 0.95: 0, 0.80: 0.041554 }',
      isRequired: true,
    },
    {
      name: 'otherwise',
      about: 'What holds below the lowest step.',
      takes: formula,
      example: '0.062332',
      isRequired: true,
    },
  ),
  kind(
    {
      name: 'past',
      about: 'Looks back over billing periods at a formula of quantities and lines as they were then.',
      takes: { kind: 'formula', reads: 'past' },
      example: 'maxKw',
    },
    {
      name: 'take',
      about: 'What is taken of them; streak: how many in a row, ending with this one.',
      takes: { kind: 'either', of: [{ kind: 'word', words: takes }, meanOfHighest()] },
      example: 'highest',
      isRequired: true,
    },
    {
      name: 'over',
      about: 'Over which periods; not said of a streak.',
      takes: {
        kind: 'written',
        pattern: '^(this and )?(last \\d+ periods?|earlier periods of this year)$',
        forms: overs,
      },
      example: 'last 11 periods',
    },
    {
      name: 'season',
      about: 'Keeps periods whose days lie wholly or mostly in a season.',
      takes: { kind: 'written', pattern: '^(wholly|mostly)\\s+\\S+$', forms: ['wholly winter', 'mostly winter'] },
      example: 'mostly winter',
    },
  ),
  kind(
    {
      name: 'given',
      about: 'Said by the bill, not by the meter; its unit, or flag for yes or no.',
      takes: { kind: 'word', words: ['flag', ...meterUnits], isOpen: true },
      example: 'flag',
    },
    {
      name: 'default',
      about: 'Its value where the bill says none.',
      takes: number,
      example: '0',
      leftOut: 'the bill must say it',
    },
    {
      name: 'unity',
      about: 'Its value at unity power factor.',
      takes: number,
      example: '0',
      leftOut: 'as the bill says',
    },
  ),
];

function meanOfHighest(): Takes {
  return { kind: 'written', pattern: '^mean of [1-9]\\d* highest$', forms: ['mean of 2 highest', 'mean of 3 highest'] };
}

/** Fields of every quantity. */
export const quantityFields: readonly Field[] = [
  {
    name: 'unit',
    about: 'Its unit; needed where a charge is per a formula or a pick.',
    takes: { kind: 'word', words: meterUnits, isOpen: true },
    example: 'kVA',
    leftOut: "the meter's unit; of a formula or pick a bare number",
  },
  { name: 'round', about: 'Rounds it to a step, half away from zero.', takes: rounding, example: '0.01' },
  label,
  clause,
  before,
];
