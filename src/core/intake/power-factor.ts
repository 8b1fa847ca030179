import { mentions } from './words';

/** Lagging is 1, leading -1. */
export type Sense = 1 | -1;

/** Sense that a word or letter names: lag, ind, i are lagging, lead, cap, c are leading; null if it names none. */
export function senseOf(word: string): Sense | null {
  const text = word.trim().toLowerCase();
  if (text === 'i' || mentions(text, 'lagging')) return 1;
  return text === 'c' || mentions(text, 'leading') ? -1 : null;
}

/** A power factor with its sense behind it, such as `0.93 lag`: where the figure ends, and the sense; null if it has none. */
export function sensedFactor(text: string): { figure: string; sense: Sense } | null {
  const found = /^([-+]?[\d.,]+\s?%?)\s*\(?(\p{L}+)\.?\)?$/u.exec(text.trim());
  const sense = found && senseOf(found[2] ?? '');
  return found && sense ? { figure: found[1] ?? '', sense } : null;
}
