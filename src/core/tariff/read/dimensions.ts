/**
 * Of what kind a value is: exponents of energy, power and money, and of the thousand between kWh and MWh. A time is energy over power; a
 * bare number has none. Active, reactive and apparent share their kind: tariffs compare them.
 */
export interface Dimension {
  energy: number;
  power: number;
  money: number;
  thousand: number;
  /** A number as written had a part in it, and such a number may carry a unit of its own. */
  isScaled: boolean;
}

/** What is known of a value: a number as written, its kind, or nothing. */
export type Found = { literal: number } | Dimension | undefined;

/** A bare number. */
export const bare: Dimension = { energy: 0, power: 0, money: 0, thousand: 0, isScaled: false };
/** Hours. */
export const time: Dimension = { ...bare, energy: 1, power: -1 };
/** An amount of the schedule's currency. */
export const money: Dimension = { ...bare, money: 1 };

const prefixes: Record<string, number> = { '': -1, k: 0, M: 1 };

/** Kind of a unit as written; nothing where it says nothing here, as `points` or `%`. */
export function dimensionOfUnit(unit: string, currency: string): Dimension | undefined {
  if (unit === 'flag') return bare;
  if (unit === 'h') return time;
  if (unit === currency) return money;
  const [, above, below] = /^([^/]+)\/([^/]+)$/.exec(unit) ?? [];
  if (above !== undefined && below !== undefined) {
    const [a, b] = [dimensionOfUnit(above, currency), dimensionOfUnit(below, currency)];
    return a && b && combine(a, b, -1);
  }
  const [, prefix, hour] = /^(k|M|)(?:W|var|VA)(h?)$/.exec(unit) ?? [];
  if (prefix === undefined) return undefined;
  return { ...bare, [hour === 'h' ? 'energy' : 'power']: 1, thousand: prefixes[prefix]! };
}

function combine(a: Dimension, b: Dimension, sign: 1 | -1): Dimension {
  return {
    energy: a.energy + sign * b.energy,
    power: a.power + sign * b.power,
    money: a.money + sign * b.money,
    thousand: a.thousand + sign * b.thousand,
    isScaled: a.isScaled || b.isScaled,
  };
}

/** Kind of a product. A factor above 2 may be hours of use or a price: what it makes is not known. */
export function productOf(a: Found, b: Found): Found {
  if (!a || !b) return undefined;
  if ('literal' in a) return 'literal' in b ? { literal: a.literal * b.literal } : scaled(b, Math.abs(a.literal) <= 2);
  return 'literal' in b ? scaled(a, Math.abs(b.literal) <= 2) : combine(a, b, 1);
}

/** Kind of a quotient. */
export function quotientOf(a: Found, b: Found): Found {
  if (!a || !b) return undefined;
  if ('literal' in b) {
    if ('literal' in a) return { literal: a.literal / b.literal };
    return scaled(a, Math.abs(b.literal) >= 0.5 && Math.abs(b.literal) <= 2);
  }
  if ('literal' in a) return scaled(combine(bare, b, -1), Math.abs(a.literal) <= 2);
  return combine(a, b, -1);
}

function scaled(dimension: Dimension, isFraction: boolean): Dimension | undefined {
  return isFraction ? { ...dimension, isScaled: true } : undefined;
}

/** Kind of a power or root. */
export function powerOf(a: Found, exponent: Found): Found {
  if (!a || 'literal' in a || !exponent || !('literal' in exponent)) return undefined;
  const by = (value: number): number => value * exponent.literal;
  const { energy, power, money: amount, thousand, isScaled } = a;
  return { energy: by(energy), power: by(power), money: by(amount), thousand: by(thousand), isScaled };
}

/** How two values of different kinds clash, if they surely do. */
export function clashOf(a: Dimension, b: Dimension): 'kind' | 'thousand' | undefined {
  const isScaled = a.isScaled || b.isScaled;
  if (a.money !== b.money) return isScaled ? undefined : 'kind';
  if (a.energy !== b.energy || a.power !== b.power) {
    if (a.isScaled && b.isScaled) return undefined;
    return isBare(a.isScaled ? a : b) && isScaled ? undefined : 'kind';
  }
  return a.thousand !== b.thousand && !isScaled ? 'thousand' : undefined;
}

function isBare({ energy, power, money: amount }: Dimension): boolean {
  return energy === 0 && power === 0 && amount === 0;
}

/** Whether a kind is plain energy or power. */
export function isEnergyOrPower({ energy, power, money: amount }: Dimension): boolean {
  return amount === 0 && ((energy === 1 && power === 0) || (energy === 0 && power === 1));
}

/** A kind in words, with its unit where that is known. */
export function wordDimension(dimension: Dimension, unit: string): string {
  const { energy, power, money: amount } = dimension;
  const words: Record<string, string> = {
    '0,0,0': 'a bare number',
    '1,0,0': 'an energy',
    '0,1,0': 'a power',
    '0,0,1': 'an amount of money',
    '1,-1,0': 'a time',
    '-1,0,1': 'a price of energy',
    '0,-1,1': 'a price of power',
  };
  const word = words[[energy, power, amount].join()] ?? 'another kind of value';
  return unit === '' ? word : `${word} (${unit})`;
}
