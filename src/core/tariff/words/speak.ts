import { zoneOffsetMs } from '../../load';
import type { Expression, Schedule } from '../model';
import { namesIn } from '../formula/ast';
import { printFormula } from '../formula/print';
import { wordMoney, wordNumber } from '../../units';
import type { BillState, PieceState } from '../price/bill-state';
import type { IntervalSource } from '../price/interval-source';
import { months } from '../price/period-plan';
import type { Run } from '../price/run';

/** What sentences are made from: one bill, one piece. */
export interface Speech {
  run: Run;
  bill: BillState;
  state: PieceState;
  /** Present when priced from intervals; its cells hold this run's load. */
  source: IntervalSource | undefined;
  /** Speaks of the piece as if it were the whole period. */
  isWhole?: boolean;
}

/** Value of a name as its rounding writes it; of a line, in minor units. */
export function wordName({ run, state, bill }: Speech, name: string): string {
  if (name === 'days') return String(bill.plan.days);
  if (name === 'hours') return wordNumber(bill.plan.hours);
  const slot = run.schedule.slots.get(name);
  if (slot === undefined || state.known[slot] !== 1) return 'unknown';
  const { text } = state.piece.text;
  const value = state.values[slot]!;
  if (text.charges.some((charge) => charge.name === name)) return bareMoney(value, run.schedule);
  const quantity = text.quantities.find((entry) => entry.name === name);
  return wordNumber(value, quantity?.rounding?.step);
}

/** A number with its unit, if it has one. */
export function withUnit(words: string, unit: string): string {
  if (unit === '') return words;
  const isPlural = /^[a-z]+s$/.test(unit);
  return `${words} ${isPlural && words === '1' ? unit.slice(0, -1) : unit}`;
}

/** An amount in the schedule's currency. */
export function money(amount: number, { currency }: Schedule): string {
  return wordMoney(amount, currency);
}

/** An amount in minor units without its currency. */
export function bareMoney(amount: number, { currency }: Schedule): string {
  return wordMoney(amount, currency).slice(0, -currency.length - 1);
}

/** `formula = formula with the numbers put in`; one part where both are the same. */
export function wordWorking(speech: Speech, expression: Expression): string {
  const plain = printFormula(expression.formula);
  if (namesIn(expression.formula).length === 0) return plain;
  const filled = printFormula(expression.formula, (name) => wordName(speech, name));
  return expression.formula.kind === 'name' ? plain : `${plain} = ${filled}`;
}

const weekdays = ['Sunday', 'Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday'];

/** Local day and time of an instant: `Tuesday 14 July 2026 15:00`. */
export function wordInstant(ms: number, timeZone: string): string {
  const local = new Date(ms + zoneOffsetMs(ms, timeZone));
  const date = `${weekdays[local.getUTCDay()]} ${local.getUTCDate()} ${months[local.getUTCMonth()]} ${local.getUTCFullYear()}`;
  return `${date} ${wordClock(ms, timeZone)}`;
}

/** Local time of an instant: `15:00`. */
export function wordClock(ms: number, timeZone: string): string {
  return new Date(ms + zoneOffsetMs(ms, timeZone)).toISOString().slice(11, 16);
}
