import { printFormula } from '../formula/print';
import type { ChargeDefinition } from '../model';
import { isCharged, lastCharge, partsOfLines, placeValue } from '../price/evaluate-charges';
import { evaluateIn } from '../price/run';
import type { ChargePlan } from '../price/text-plan';
import { amountWords, expressionIn, percentageWords, percentWords, priceWords, tierEnds } from './price-words';
import { bareMoney, money, wordName, wordWorking, type Speech } from './speak';

interface Part {
  here: Speech;
  plan: ChargePlan;
}

/** How a line's amount came about, in one sentence. */
export function explainLine(speech: Speech, line: number): string {
  const { charge } = lastCharge(speech.bill, line)!;
  const clause = charge.clause === undefined ? '' : ` (clause ${charge.clause})`;
  return `${charge.label ?? charge.name}: ${bodyWords(speech, line, charge.definition.kind)}${clause}.`;
}

function bodyWords(speech: Speech, line: number, kind: ChargeDefinition['kind']): string {
  const { bill, run } = speech;
  const amount = bill.amounts[line]!;
  if (kind === 'topUp' || kind === 'cap') return limitWords(speech, line, kind, amount);
  const parts = bill.pieces.flatMap((state): Part[] => {
    const plan = state.piece.text.chargeOfLine[line];
    return plan ? [{ here: { ...speech, state }, plan }] : [];
  });
  const [first] = parts;
  const isSame = parts.length === bill.pieces.length && parts.every((part) => sameKey(part) === sameKey(first!));
  if (isSame) return wholeWords(parts, amount);
  const words = parts.map(({ here, plan }) => `${wordPiece(here)}: ${partWords(here, plan)}`);
  return `${words.join('; ')}; together ${money(amount, run.schedule)}`;
}

/** What a part says apart from its share: where all parts say the same, the line need not be said piece by piece. */
function sameKey({ here, plan }: Part): string {
  const { definition } = plan.charge;
  if (!isCharged(here.run, here.bill, here.state, plan)) return whenWords(here, plan);
  if (definition.kind !== 'percent') return partWords({ ...here, isWhole: true }, plan);
  return `${percentageWords(here, definition)} ${plan.ofLines.join()}`;
}

function wholeWords(parts: Part[], amount: number): string {
  const { here, plan } = parts[parts.length - 1]!;
  const { run, bill, state } = here;
  if (!isCharged(run, bill, state, plan)) return whenWords(here, plan);
  const { definition } = plan.charge;
  const none = noneWords(here, definition);
  if (none) return `none, ${none}`;
  if (definition.kind === 'percent' && parts.length > 1) {
    const base = parts.reduce((sum, part) => sum + partsOfLines(bill, part.here.state, part.plan), 0);
    return `${percentageWords(here, definition)} of ${money(base, run.schedule)} = ${money(amount, run.schedule)}`;
  }
  const words = partWords({ ...here, isWhole: true }, plan);
  if (words === bareMoney(amount, run.schedule)) return money(amount, run.schedule);
  return `${words} = ${money(amount, run.schedule)}${tierEnds(here, definition)}`;
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

/** Beginning of a piece's part: its days, and its text and season as far as they differ. */
function wordPiece({ bill, state, run }: Speech): string {
  const { piece } = state;
  const { text } = piece.text;
  const others = bill.pieces.map((other) => other.piece);
  const isOtherText = others.some((other) => other.text !== piece.text);
  const isOtherSeason = others.some((other) => other.season !== piece.season);
  const isFirst = text === run.schedule.texts[0];
  const title = text.note ?? (isFirst ? (run.schedule.source.title ?? 'the first text') : `the text of ${text.from}`);
  const words = [`${piece.days} of ${bill.plan.days} days`];
  if (isOtherText) words.push(`under ${title}`);
  if (isOtherSeason && text.seasons) words.push(`in ${text.seasons.names[piece.season]}`);
  return words.join(' ');
}

function partWords(speech: Speech, plan: ChargePlan): string {
  const { run, bill, state } = speech;
  if (!isCharged(run, bill, state, plan)) return whenWords(speech, plan);
  const { definition } = plan.charge;
  switch (definition.kind) {
    case 'amount':
      return amountWords(speech, definition.amount);
    case 'per':
      return priceWords(speech, plan, definition);
    case 'percent':
      return percentWords(speech, plan, definition);
    default:
      return '';
  }
}

function limitWords(speech: Speech, line: number, kind: 'topUp' | 'cap', amount: number): string {
  const { bill, run } = speech;
  let base = 0;
  let limit = 0;
  let working = '';
  let off: string | undefined;
  for (const state of bill.pieces) {
    const plan = state.piece.text.chargeOfLine[line];
    const here = { ...speech, state };
    if (!plan) continue;
    if (!isCharged(run, bill, state, plan)) {
      off ??= whenWords(here, plan);
      continue;
    }
    const definition = plan.charge.definition as ChargeDefinition & { kind: 'topUp' | 'cap' };
    base += partsOfLines(bill, state, plan);
    limit += placeValue(run, state, definition.to) * state.piece.share;
    const expression = expressionIn(here, definition.to);
    if (expression && expression.names.length > 0) working = ` (${wordWorking(here, expression)})`;
  }
  if (off !== undefined && limit === 0) return off;
  const { schedule } = run;
  const [baseWords, limitText] = [bareMoney(base, schedule), bareMoney(limit, schedule)];
  if (amount !== 0)
    return `${kind === 'topUp' ? 'raises' : 'lowers'} ${baseWords} to ${limitText}${working}: ${money(amount, schedule)}`;
  const side = base === limit ? 'just' : kind === 'topUp' ? 'above' : 'below';
  return `not needed, ${baseWords} is ${side} ${limitText}${working}`;
}
