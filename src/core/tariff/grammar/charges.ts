import { before, clause, formula, label, rounding } from './shared';
import type { Field, Kind, Takes } from './types';
import { groups } from './words';

const price: Takes = { kind: 'place', by: ['window', 'season'] };
const amount: Takes = { kind: 'place', by: ['season'] };
const lines: Takes = {
  kind: 'either',
  of: [
    { kind: 'word', words: ['all above'] },
    { kind: 'list', of: { kind: 'name', of: 'line' }, mayStandAlone: true },
  ],
};

/** Fields of a tier. */
export const tierFields: readonly Field[] = [
  { name: 'to', about: 'Its upper end; the last tier has none.', takes: formula, example: '250 * billedKw' },
  { name: 'rate', about: 'The price of what lies in it.', takes: price, example: '0.081', isRequired: true },
];

const rate: Field = {
  name: 'rate',
  about: "Price per unit in the schedule's currency; of percentOf, percent. One number, or one by window, by season.",
  takes: price,
  example: '12.40',
};
const tiers: Field = {
  name: 'tiers',
  about: 'Prices by slices of the quantity, from the lowest to the highest.',
  takes: { kind: 'list', of: { kind: 'set', fields: tierFields } },
  example: '[ { to: 1000, rate: 0.08 }, { rate: 0.06 } ]',
};
const to: Field = {
  name: 'to',
  about: 'The amount the lines are raised or lowered to.',
  takes: amount,
  example: '900',
  isRequired: true,
};

/** Kinds of charges. */
export const chargeKinds: readonly Kind[] = [
  {
    name: 'amount',
    about: 'An amount.',
    fields: [{ name: 'amount', about: 'The amount.', takes: amount, example: '420.00', isRequired: true }],
  },
  {
    name: 'per',
    about: 'A rate per unit of a quantity; of a family, one line per window.',
    fields: [
      {
        name: 'per',
        about: 'The quantity that is charged.',
        takes: { kind: 'name', of: 'quantity' },
        example: 'billedKw',
        isRequired: true,
      },
      rate,
      tiers,
    ],
    oneOf: ['rate', 'tiers'],
  },
  {
    name: 'percentOf',
    about: 'A percentage of lines above.',
    fields: [
      { name: 'percentOf', about: 'The lines it is taken of.', takes: lines, example: 'all above', isRequired: true },
      {
        name: 'per',
        about: 'A quantity each unit of which brings the percentage once.',
        takes: { kind: 'name', of: 'quantity' },
        example: 'pointsBelow',
      },
      rate,
      { ...tiers, needs: 'per' },
    ],
    oneOf: ['rate', 'tiers'],
  },
  {
    name: 'topUp',
    about: 'Raises lines above together to an amount.',
    fields: [
      { name: 'topUp', about: 'The lines it raises.', takes: lines, example: 'all above', isRequired: true },
      to,
    ],
  },
  {
    name: 'cap',
    about: 'Lowers lines above together to an amount.',
    fields: [{ name: 'cap', about: 'The lines it lowers.', takes: lines, example: 'all above', isRequired: true }, to],
  },
];

/** Fields of every charge. */
export const chargeFields: readonly Field[] = [
  {
    name: 'group',
    about: "The group of the bill's line.",
    takes: { kind: 'word', words: groups },
    example: 'demand',
    isRequired: true,
  },
  {
    name: 'when',
    about: 'A condition; where it fails the line stays on the bill with 0 and says why.',
    takes: formula,
    example: 'pf < 0.9',
  },
  {
    name: 'round',
    about: 'Rounds the line to a step.',
    takes: rounding,
    example: '0.05',
    leftOut: "the schedule's rounding",
  },
  label,
  clause,
  before,
];
