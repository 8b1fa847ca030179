import type { Measure } from './column-map';
import { headerWords, mentions } from './words';

/** A unit as it is written in files, and what it is worth in the unit the core uses. */
export interface UnitMeaning {
  unit: string;
  quantity: 'active' | 'reactive' | 'apparent' | 'other';
  measure: Measure;
  /** Multiplies a figure to kWh, kvarh, kVAh (or kW, kvar, kVA). */
  factor: number;
}

const unitRows: [string[], string, UnitMeaning['quantity'], Measure, number][] = [
  [['wh'], 'Wh', 'active', 'energy', 0.001],
  [['kwh', 'kwhs', 'kwatth'], 'kWh', 'active', 'energy', 1],
  [['mwh'], 'MWh', 'active', 'energy', 1000],
  [['gwh'], 'GWh', 'active', 'energy', 1_000_000],
  [['w', 'watt', 'watts'], 'W', 'active', 'power', 0.001],
  [['kw'], 'kW', 'active', 'power', 1],
  [['mw'], 'MW', 'active', 'power', 1000],
  [['varh', 'varhr', 'vah r'], 'varh', 'reactive', 'energy', 0.001],
  [['kvarh', 'kvarhr', 'kvahr', 'rkvah', 'kvarhs', 'kvrh'], 'kvarh', 'reactive', 'energy', 1],
  [['mvarh'], 'Mvarh', 'reactive', 'energy', 1000],
  [['var'], 'var', 'reactive', 'power', 0.001],
  [['kvar', 'kvars'], 'kvar', 'reactive', 'power', 1],
  [['mvar'], 'Mvar', 'reactive', 'power', 1000],
  [['vah'], 'VAh', 'apparent', 'energy', 0.001],
  [['kvah'], 'kVAh', 'apparent', 'energy', 1],
  [['mvah'], 'MVAh', 'apparent', 'energy', 1000],
  [['va'], 'VA', 'apparent', 'power', 0.001],
  [['kva'], 'kVA', 'apparent', 'power', 1],
  [['mva'], 'MVA', 'apparent', 'power', 1000],
];

const otherUnits = [
  'v',
  'kv',
  'volt',
  'volts',
  'a',
  'amp',
  'amps',
  'hz',
  'c',
  'degc',
  'degf',
  'co2',
  'tco2',
  'kgco2',
  '$',
  '€',
  '£',
  'usd',
  'eur',
  'gbp',
  'm3',
  'therm',
  'therms',
  'btu',
];

const units = new Map<string, UnitMeaning>();
for (const [spellings, unit, quantity, measure, factor] of unitRows) {
  for (const spelling of spellings) units.set(spelling, { unit, quantity, measure, factor });
}

/** Meaning of a unit by its spelling, whatever its capitals; null if it is none of power or energy. */
export function unitMeaning(spelling: string): UnitMeaning | null {
  return units.get(spelling.toLowerCase().replace(/[^a-z]/g, '')) ?? null;
}

/** The unit named in a header: the last word that is one. One letter counts only in brackets or alone. */
export function unitOfHeader(name: string): UnitMeaning | null {
  const bracketed = /[[(]\s*([^\])]+?)\s*[\])]/g;
  for (const found of name.matchAll(bracketed)) {
    const meaning = unitMeaning((found[1] ?? '').replace(/\s*(\/|per)\s*.*/i, ''));
    if (meaning) return meaning;
  }
  const words = headerWords(name);
  for (const word of [...words].reverse()) {
    if (word.length === 1 && words.length > 1) continue;
    const meaning = units.get(word);
    if (meaning) return meaning;
  }
  // A lone W behind a word of power is watts; behind others it may be a bearing or a name.
  if (/[\s_,;]W$/.test(name.trim()) && mentions(name, 'power')) return units.get('w') ?? null;
  // Names run together: UsagekWh, totalkvarh.
  const glued = words.map((word) => /(kwh|mwh|kvarh|kvah)$/.exec(word)?.[1]).find((unit) => unit !== undefined);
  return glued ? (units.get(glued) ?? null) : null;
}

/** Whether a header names a unit that is no electrical energy or power. */
export function isForeignUnit(name: string): boolean {
  return headerWords(name).some((word) => otherUnits.includes(word) && word.length > 1) || /[$€£°]/.test(name);
}

const tens = new Set([10, 100, 1000, 10_000, 100_000, 1_000_000]);

/**
 * Figures times a factor. A factor that is the inverse of a whole number divides, so that 959 Wh are 0.959 kWh to the bit; a
 * power of ten moves the mark of up to fifteen digits, so that 0.253875 Mvarh are 253.875 kvarh to the bit.
 */
export function scaled(figure: number, factor: number): number {
  if (factor === 1) return figure;
  if (tens.has(factor)) return Number((figure * factor).toPrecision(15));
  const inverse = Math.round(1 / factor);
  return factor < 1 && inverse * factor === 1 ? figure / inverse : figure * factor;
}
