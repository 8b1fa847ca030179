import type { ChannelWords, FunctionWords } from './types';

/** Functions of formulas. Values are separated by `;`. */
export const functionTable = [
  { name: 'min', form: 'min(a; b)', about: 'The least of its values.', least: 1, most: 40 },
  { name: 'max', form: 'max(a; b)', about: 'The greatest of its values.', least: 1, most: 40 },
  { name: 'abs', form: 'abs(a)', about: 'The value without its sign.', least: 1, most: 1 },
  { name: 'sqrt', form: 'sqrt(a)', about: 'The square root.', least: 1, most: 1 },
  {
    name: 'hypot',
    form: 'hypot(a; b)',
    about: 'The root of the sum of squares: apparent from active and reactive.',
    least: 1,
    most: 40,
  },
  { name: 'excess', form: 'excess(a; b)', about: 'What a exceeds b by, never below 0.', least: 2, most: 2 },
  { name: 'between', form: 'between(q; a; b)', about: 'The part of q that lies from a to b.', least: 3, most: 3 },
  { name: 'tanOf', form: 'tanOf(pf)', about: 'kvarh per kWh at a power factor.', least: 1, most: 1 },
  {
    name: 'pf',
    form: 'pf(active; reactive)',
    about: 'The power factor of active and reactive energy or power.',
    least: 2,
    most: 2,
  },
  { name: 'ratio', form: 'ratio(reactive; active)', about: 'kvarh per kWh as metered.', least: 2, most: 2 },
  { name: 'if', form: 'if(condition; a; b)', about: 'a where the condition holds, else b.', least: 3, most: 3 },
  {
    name: 'daysSince',
    form: 'daysSince(date)',
    about: "Days from a contract input with unit: date to the period's first day.",
    least: 1,
    most: 1,
  },
  {
    name: 'total',
    form: 'total(family)',
    about: 'The sum over the windows of a quantity that has one value per window.',
    least: 1,
    most: 1,
  },
] as const satisfies readonly FunctionWords[];

/** Facts of the period that formulas may read. */
export const factTable = [
  { name: 'days', unit: 'd', about: 'Days of the period.' },
  { name: 'hours', unit: 'h', about: 'Hours of the period; a day of a clock change has 23 or 25.' },
] as const satisfies readonly ChannelWords[];

/** Channels of the meter that measures may read. A power is the energy of a cell over its hours. */
export const channelTable = [
  { name: 'kwh', unit: 'kWh', about: 'Active energy drawn.' },
  { name: 'kvarhLagging', unit: 'kvarh', about: 'Reactive energy drawn (lagging).' },
  { name: 'kvarhLeading', unit: 'kvarh', about: 'Reactive energy delivered (leading).' },
  { name: 'kvarhNet', unit: 'kvarh', about: 'Reactive energy drawn less delivered, inside each cell.' },
  { name: 'kvah', unit: 'kVAh', about: 'Apparent energy: root of the squares of active and net reactive energy.' },
  { name: 'kw', unit: 'kW', about: 'Active power drawn.' },
  { name: 'kvarLagging', unit: 'kvar', about: 'Reactive power drawn (lagging).' },
  { name: 'kvarLeading', unit: 'kvar', about: 'Reactive power delivered (leading).' },
  { name: 'kvarNet', unit: 'kvar', about: 'Reactive power drawn less delivered.' },
  { name: 'kva', unit: 'kVA', about: 'Apparent power, of active and net reactive power.' },
] as const satisfies readonly ChannelWords[];

/** Name of a channel. */
export type ChannelName = (typeof channelTable)[number]['name'];
