import { printFormula } from '../formula/print';
import type { ChargeDefinition, Expression, NumberPlace, Tier } from '../model';
import { wordNumber } from '../../units';
import { isCharged, lastCharge, partsOfLines, placeValue, shareOf, tieredPrice } from '../price/evaluate-charges';
import { evaluateIn } from '../price/run';
import type { ChargePlan } from '../price/text-plan';
import { bareMoney, money, withUnit, wordExpression, wordName, wordWorking, type Speech } from './speak';

/** How a line's amount came about, in one sentence. */
export function explainLine(speech: Speech, line: number): string {
  const { bill, run } = speech;
  const shown = lastCharge(bill, line)!;
  const label = shown.charge.label ?? shown.charge.name;
  const clause = shown.charge.clause === undefined ? '' : ` (clause ${shown.charge.clause})`;
  const amount = bill.amounts[line]!;
  const { definition } = shown.charge;
  if (definition.kind === 'topUp' || definition.kind === 'cap')
    return `${label}: ${limitWords(speech, line, definition.kind, amount)}${clause}.`;
  const parts = bill.pieces.flatMap((state) => {
    const plan = state.piece.text.chargeOfLine[line];
    return plan ? [{ here: { ...speech, state }, plan }] : [];
  });
  if (bill.pieces.length === 1)
    return `${label}: ${pieceWords({ ...speech, state: bill.pieces[0]! }, shown, amount)}${clause}.`;
  const words = parts.map(({ here, plan }) => `${wordPiece(here, plan)}: ${partWords(here, plan)}`);
  return `${label}: ${words.join('; ')}; together ${money(amount, run.schedule)}${clause}.`;
}

/** Sentence of a line in a bill of one piece. */
function pieceWords(speech: Speech, plan: ChargePlan, amount: number): string {
  const { schedule } = speech.run;
  if (!isCharged(speech.run, speech.bill, speech.state, plan)) return whenWords(speech, plan);
  const none = noneWords(speech, plan.charge.definition);
  if (none) return `none, ${none}`;
  const words = partWords(speech, plan);
  const isWhole =
    plan.charge.definition.kind === 'amount' &&
    plan.charge.definition.amount.kind !== 'months' &&
    words === bareMoney(amount, schedule);
  return isWhole
    ? money(amount, schedule)
    : `${words} = ${money(amount, schedule)}${tierEnds(speech, plan.charge.definition)}`;
}

function whenWords(speech: Speech, { charge }: ChargePlan): string {
  const condition = charge.when!;
  const values = condition.names.map((name) => `${name} is ${wordName(speech, name)}`);
  return `not charged, "${printFormula(condition.formula)}" does not hold${values.length ? `: ${values.join(' and ')}` : ''}`;
}

function noneWords({ run, state }: Speech, definition: ChargeDefinition): string | undefined {
  if (definition.kind !== 'per' && definition.kind !== 'percent') return undefined;
  if (!definition.per || evaluateIn(run, state, definition.per) !== 0) return undefined;
  return `${definition.perName} is 0`;
}

/** Beginning of a piece's part: its days, text, season and month as far as they differ, or its share of the measure. */
function wordPiece(speech: Speech, plan: ChargePlan): string {
  const { bill, state, run } = speech;
  const { piece } = state;
  const others = bill.pieces.map((other) => other.piece);
  const { text } = piece.text;
  const isOtherText = others.some((other) => other.text !== piece.text);
  const isOtherSeason = others.some((other) => other.season !== piece.season);
  const title =
    text.note ??
    (text === run.schedule.texts[0] ? (run.schedule.source.title ?? 'the first text') : `the text of ${text.from}`);
  const where = [
    ...(isOtherText ? [`under ${title}`] : []),
    ...(isOtherSeason && text.seasons ? [`in ${text.seasons.names[piece.season]}`] : []),
  ];
  const share = shareOf(run, bill, state, plan);
  const isByDays = plan.charge.definition.kind !== 'per' || Math.abs(share - piece.share) < 1e-12;
  const days = `${piece.days} of ${bill.plan.days} days`;
  const measured = isByDays
    ? ''
    : `, with ${wordNumber(share * 100)} % of the ${plan.charge.definition.kind === 'per' ? plan.charge.definition.perName : ''}`;
  return `${[days, ...where].join(' ')}${measured}`;
}

function partWords(speech: Speech, plan: ChargePlan): string {
  const { run, bill, state } = speech;
  if (!isCharged(run, bill, state, plan)) return whenWords(speech, plan);
  const { definition } = plan.charge;
  switch (definition.kind) {
    case 'amount':
      return placeWords(speech, definition.amount);
    case 'per':
      return priceWords(speech, definition, run.schedule.currency);
    case 'percent':
      return percentWords(speech, plan, definition);
    default:
      return '';
  }
}

function expressionIn(speech: Speech, place: NumberPlace): Expression | undefined {
  const { season, month } = speech.state.piece;
  return place.kind === 'same'
    ? place.expression
    : place.kind === 'seasons'
      ? place.bySeason[season]
      : place.byMonth.get(month);
}

function placeWords(speech: Speech, place: NumberPlace): string {
  const expression = expressionIn(speech, place);
  if (!expression) return '';
  if (expression.formula.kind === 'number')
    return bareMoney(placeValue(speech.run, speech.state, place), speech.run.schedule);
  const value = placeValue(speech.run, speech.state, place);
  const working = wordWorking(speech, expression);
  return expression.formula.kind === 'name' ? `${working} = ${wordNumber(value)}` : working;
}

function rateWords(speech: Speech, place: NumberPlace): string {
  const expression = expressionIn(speech, place);
  if (!expression) return '';
  const { formula } = expression;
  if (formula.kind === 'number') return formula.raw;
  const value = wordNumber(placeValue(speech.run, speech.state, place));
  return formula.kind === 'name' ? value : `${value} (${wordWorking(speech, expression)})`;
}

type Priced = ChargeDefinition & { kind: 'per' };

function priceWords(speech: Speech, { per, perName, unit, price }: Priced, currency: string): string {
  const quantity = evaluateIn(speech.run, speech.state, per);
  const words = perName === '' ? wordNumber(quantity) : wordName(speech, perName);
  if (price.length === 1)
    return `${withUnit(words, unit)} x ${rateWords(speech, price[0]!.rate)} ${currency}${unit === '' ? '' : ` per ${unit}`}`;
  return tierParts(speech, price, quantity)
    .map(({ inTier, tier }) => `${withUnit(wordNumber(inTier), unit)} x ${rateWords(speech, tier.rate)}`)
    .join(' + ');
}

function tierParts(speech: Speech, price: Tier[], quantity: number): { inTier: number; tier: Tier }[] {
  let below = 0;
  const parts: { inTier: number; tier: Tier }[] = [];
  for (const tier of price) {
    const limit = tier.to ? Math.max(below, evaluateIn(speech.run, speech.state, tier.to)) : Infinity;
    const inTier = quantity < 0 ? quantity : Math.min(quantity, limit) - below;
    parts.push({ inTier: quantity < 0 ? inTier : Math.max(0, inTier), tier });
    if (quantity <= limit) break;
    below = limit;
  }
  return parts;
}

const ordinals = ['first', 'second', 'third', 'fourth', 'fifth', 'sixth', 'seventh', 'eighth'];

/** Where the tiers that were reached end, if that is worked out. */
function tierEnds(speech: Speech, definition: ChargeDefinition): string {
  if (definition.kind !== 'per' || definition.price.length === 1) return '';
  const reached = tierParts(speech, definition.price, evaluateIn(speech.run, speech.state, definition.per));
  const ends = reached.flatMap(({ tier }, i) => {
    if (!tier.to || tier.to.names.length === 0) return [];
    const end = withUnit(wordNumber(evaluateIn(speech.run, speech.state, tier.to)), definition.unit);
    return [`the ${ordinals[i] ?? 'next'} tier ends at ${printFormula(tier.to.formula)} = ${end}`];
  });
  return ends.length === 0 ? '' : `; ${ends.join(', ')}`;
}

function percentWords(speech: Speech, plan: ChargePlan, definition: ChargeDefinition & { kind: 'percent' }): string {
  const { run, bill, state } = speech;
  const base = `${money(partsOfLines(bill, state, plan), run.schedule)} (${linesWords(speech, plan, definition.isAllAbove)})`;
  if (!definition.per) return `${rateWords(speech, definition.price[0]!.rate)} % of ${base}`;
  const quantity = withUnit(wordName(speech, definition.perName ?? ''), definition.unit ?? '');
  if (definition.price.length === 1)
    return `${quantity} x ${rateWords(speech, definition.price[0]!.rate)} % of ${base}`;
  const percent = tieredPrice(run, state, definition.price, evaluateIn(run, state, definition.per));
  return `${wordNumber(percent)} % for ${quantity}, of ${base}`;
}

function linesWords({ bill, run, state }: Speech, plan: ChargePlan, isAllAbove: boolean): string {
  if (plan.ofLines.length > 4)
    return isAllAbove ? `all ${plan.ofLines.length} lines above` : `${plan.ofLines.length} lines`;
  const count = bill.pieces.length;
  return plan.ofLines
    .map(
      (line) => `${run.schedule.lineOrder[line]} ${bareMoney(bill.parts[line * count + state.index]!, run.schedule)}`,
    )
    .join(' + ');
}

function limitWords(speech: Speech, line: number, kind: 'topUp' | 'cap', amount: number): string {
  const { bill, run } = speech;
  let base = 0;
  let limit = 0;
  let working = '';
  let off = '';
  for (const state of bill.pieces) {
    const plan = state.piece.text.chargeOfLine[line];
    const here = { ...speech, state };
    if (!plan) continue;
    if (!isCharged(run, bill, state, plan)) {
      off = whenWords(here, plan);
      continue;
    }
    const definition = plan.charge.definition as ChargeDefinition & { kind: 'topUp' | 'cap' };
    base += partsOfLines(bill, state, plan);
    limit += placeValue(run, state, definition.to) * state.piece.share;
    const expression = expressionIn(here, definition.to);
    if (expression && expression.names.length > 0) working = ` (${wordWorking(here, expression)})`;
  }
  if (off !== '' && limit === 0) return off;
  const { schedule } = run;
  const [baseWords, limitText] = [bareMoney(base, schedule), bareMoney(limit, schedule)];
  if (amount === 0)
    return `not needed, ${baseWords} is ${base === limit ? 'just' : kind === 'topUp' ? 'above' : 'below'} ${limitText}${working}`;
  return `${kind === 'topUp' ? 'raises' : 'lowers'} ${baseWords} to ${limitText}${working}: ${money(amount, schedule)}`;
}

/** Words of a rate or contract input that is one expression. */
export function expressionWords(speech: Speech, expression: Expression): string {
  return expression.formula.kind === 'number'
    ? wordExpression(speech, expression)
    : `${wordWorking(speech, expression)} = ${wordNumber(evaluateIn(speech.run, speech.state, expression))}`;
}
