import { namesIn } from '../formula/ast';
import { unlessFault } from '../formula/compile';
import { printFormula } from '../formula/print';
import type { ChargeDefinition, Expression, NumberPlace, ScheduleText, Tier } from '../model';
import { wordNumber } from '../../units';
import { partsOfLines, placeValue, shareOf } from '../price/evaluate-charges';
import { evaluateIn } from '../price/run';
import type { ChargePlan } from '../price/text-plan';
import { bareMoney, money, withUnit, wordName, wordWorking, type Speech } from './speak';

type Priced = ChargeDefinition & { kind: 'per' };
type Percent = ChargeDefinition & { kind: 'percent' };

/** The formula in force of a place of numbers. */
export function expressionIn({ state }: Speech, place: NumberPlace): Expression | undefined {
  const { season, month } = state.piece;
  if (place.kind === 'same') return place.expression;
  return place.kind === 'seasons' ? place.bySeason[season] : place.byMonth.get(month);
}

/** An amount: its formula with the numbers put in. */
export function amountWords(speech: Speech, place: NumberPlace): string {
  const expression = expressionIn(speech, place);
  if (!expression) return '';
  const value = placeValue(speech.run, speech.state, place);
  if (namesIn(expression.formula).length === 0) return bareMoney(value, speech.run.schedule);
  const working = wordWorking(speech, expression);
  return expression.formula.kind === 'name' ? `${working} = ${wordNumber(value)}` : working;
}

/** A rate as the file writes it; worked out, its value with the working. */
export function rateWords(speech: Speech, place: NumberPlace): string {
  const expression = expressionIn(speech, place);
  if (!expression) return '';
  const { formula } = expression;
  if (namesIn(formula).length === 0) return printFormula(formula);
  const rate = unlessFault(() => placeValue(speech.run, speech.state, place));
  if (rate === undefined) return printFormula(formula);
  const value = wordNumber(rate);
  return formula.kind === 'name' ? value : `${value} (${wordWorking(speech, expression)})`;
}

/** A quantity times its rate, or tier by tier; in a divided bill with the part that fell into the piece. */
export function priceWords(speech: Speech, plan: ChargePlan, definition: Priced): string {
  const { run, bill, state } = speech;
  const { per, perName, unit, price } = definition;
  const quantity = evaluateIn(run, state, per);
  const words = withUnit(perName === '' ? wordNumber(quantity) : wordName(speech, perName), unit);
  const share = speech.isWhole ? state.piece.share : shareOf(run, bill, state, plan);
  const isShared = bill.pieces.length > 1 && Math.abs(share - state.piece.share) > 1e-12;
  const part = isShared ? `${wordNumber(quantity * share)} of ${words}` : words;
  const perUnit = `${run.schedule.currency}${unit === '' ? '' : ` per ${unit}`}`;
  if (price.length === 1) return `${part} x ${rateWords(speech, price[0]!.rate)} ${perUnit}`;
  const tiers = tierParts(speech, price, quantity)
    .map(({ inTier, tier }) => `${withUnit(wordNumber(inTier), unit)} x ${rateWords(speech, tier.rate)}`)
    .join(' + ');
  return isShared ? `${wordNumber(share * 100)} % of (${tiers})` : tiers;
}

function tierParts(speech: Speech, price: Tier[], quantity: number): { inTier: number; tier: Tier }[] {
  let below = 0;
  const parts: { inTier: number; tier: Tier }[] = [];
  for (const tier of price) {
    const limit = tier.to ? Math.max(below, evaluateIn(speech.run, speech.state, tier.to)) : Infinity;
    parts.push({ inTier: quantity < 0 ? quantity : Math.max(0, Math.min(quantity, limit) - below), tier });
    if (quantity <= limit) break;
    below = limit;
  }
  return parts;
}

const ordinals = ['first', 'second', 'third', 'fourth', 'fifth', 'sixth', 'seventh', 'eighth'];

/** Where the tiers that were reached end, if that is worked out. */
export function tierEnds(speech: Speech, definition: ChargeDefinition): string {
  if (definition.kind !== 'per' || definition.price.length === 1) return '';
  const reached = tierParts(speech, definition.price, evaluateIn(speech.run, speech.state, definition.per));
  const ends = reached.flatMap(({ tier: { to } }, i) => {
    if (!to || to.names.length === 0) return [];
    const end = withUnit(wordNumber(evaluateIn(speech.run, speech.state, to)), definition.unit);
    return [`the ${ordinals[i] ?? 'next'} tier ends at ${printFormula(to.formula)} = ${end}`];
  });
  return ends.length === 0 ? '' : `; ${ends.join(', ')}`;
}

/** A percentage of lines, with the lines or their number. */
export function percentWords(speech: Speech, plan: ChargePlan, definition: Percent): string {
  const { run, bill, state } = speech;
  const sum = money(partsOfLines(bill, state, plan), run.schedule);
  return `${percentageWords(speech, definition)} of ${sum} (${linesWords(speech, plan, definition.isAllAbove)})`;
}

/** The percentage itself, with the points it goes by. */
export function percentageWords(speech: Speech, { per, perName, unit, price }: Percent): string {
  const { run, state } = speech;
  if (!per) return `${rateWords(speech, price[0]!.rate)} %`;
  const quantity = withUnit(wordName(speech, perName ?? ''), unit ?? '');
  const reached = tierParts(speech, price, evaluateIn(run, state, per));
  if (reached.length === 1) return `${quantity} x ${rateWords(speech, reached[0]!.tier.rate)} %`;
  const words = reached.map(
    ({ inTier, tier }) => `${withUnit(wordNumber(inTier), unit ?? '')} x ${rateWords(speech, tier.rate)} %`,
  );
  return `(${words.join(' + ')})`;
}

function linesWords({ bill, run, state }: Speech, plan: ChargePlan, isAllAbove: boolean): string {
  const count = plan.ofLines.length;
  if (count > 4) return isAllAbove ? `all ${count} lines above` : `${count} lines`;
  const pieces = bill.pieces.length;
  const sums = new Map<string, number>();
  const names = plan.ofLines.map((line) => run.schedule.lineOrder[line]!);
  for (const [i, line] of plan.ofLines.entries()) {
    const name = familyOf(names[i]!, names, state.piece.text.text.families);
    sums.set(name, (sums.get(name) ?? 0) + bill.parts[line * pieces + state.index]!);
  }
  return [...sums].map(([name, sum]) => `${name} ${bareMoney(sum, run.schedule)}`).join(' + ');
}

/** The family a line belongs to if all its lines are among those named; else the line. */
function familyOf(line: string, among: readonly string[], families: ScheduleText['families']): string {
  for (const [name, { members }] of families)
    if (members.includes(line) && members.every((member) => among.includes(member))) return name;
  return line;
}

/** Words of a formula with its value. */
export function expressionWords(speech: Speech, expression: Expression): string {
  if (namesIn(expression.formula).length === 0) return printFormula(expression.formula);
  return `${wordWorking(speech, expression)} = ${wordNumber(evaluateIn(speech.run, speech.state, expression))}`;
}
