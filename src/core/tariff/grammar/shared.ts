import type { Field, Takes } from './types';

/** A few words. */
export const text: Takes = { kind: 'text' };
/** A plain number. */
export const number: Takes = { kind: 'number' };
/** A date. */
export const date: Takes = { kind: 'date' };
/** A formula of what stands above. */
export const formula: Takes = { kind: 'formula', reads: 'quantities' };
/** A step of rounding and its direction. */
export const rounding: Takes = {
  kind: 'written',
  pattern: '^\\d+(\\.\\d+)?(\\s+(down|up|half down))?$',
  forms: ['0.01', '1 down', '1 up', '1 half down'],
  isNumberToo: true,
};

/** Fields that any contract input, quantity and charge may say. */
export const label: Field = {
  name: 'label',
  about: 'Its words on the bill.',
  takes: text,
  example: 'Billed demand',
  leftOut: 'its name',
};
export const clause: Field = {
  name: 'clause',
  about: 'The clause of the sheet it comes from.',
  takes: text,
  example: '"4.2"',
};
export const before: Field = {
  name: 'before',
  about: 'Where an entry added by a version stands: before this one, or end.',
  takes: {
    kind: 'either',
    of: [
      { kind: 'name', of: 'entry' },
      { kind: 'word', words: ['end'] },
    ],
  },
  example: 'end',
  onlyInVersions: true,
};
