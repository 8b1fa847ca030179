import type { QuantityEntry } from '../model';
import { wordNumber } from '../../units';
import type { BillState } from '../price/bill-state';
import { lastCharge, placeValue } from '../price/evaluate-charges';
import type { IntervalSource } from '../price/interval-source';
import { inPlace, expressionsOf, expressionsOfQuantity } from '../price/text-plan';
import { evaluateIn, type Run } from '../price/run';
import type { PricedBill, PricedInput, PricedLine, PricedQuantity } from '../types';
import { explainLine } from './charge-words';
import { expressionWords } from './price-words';
import { estimatedSlots } from './estimated';
import { explainQuantity } from './quantity-words';
import { withUnit, type Speech } from './speak';

/** Writes the bills of a run, beside the run at unity power factor. */
export function writeBills(run: Run, unity: Run, source: IntervalSource | undefined): PricedBill[] {
  return run.bills.map((bill, index) => writeBill(run, bill, unity.bills[index]!, source));
}

function writeBill(run: Run, bill: BillState, unity: BillState, source: IntervalSource | undefined): PricedBill {
  const state = bill.pieces[bill.pieces.length - 1]!;
  const speech: Speech = { run, bill, state, source };
  const estimated = source ? estimatedSlots(speech) : new Set<number>();
  const { from, to } = bill.plan.period;
  noteStraddle(bill, run);
  if (run.told.length > 0 && state.piece.text.text.quantities.some(({ definition }) => definition.kind === 'past')) {
    bill.notes?.add('The history given serves the run at unity power factor too.');
  }
  const lines = run.schedule.lineOrder.flatMap((_, line) =>
    lastCharge(bill, line) ? [writeLine(speech, line, bill.amounts[line]! - unity.amounts[line]!, estimated)] : [],
  );
  const notes = [...(bill.notes ?? []), ...(unity.notes ?? [])];
  return {
    period: { from, to },
    currency: run.schedule.currency,
    total: bill.total,
    quantities: writeQuantities(speech, estimated),
    inputs: writeInputs(speech),
    lines,
    reactiveCost: clean(bill.total - unity.total),
    notes: [...new Set(notes)],
  };
}

/** A difference of rounded amounts without the crumbs of binary arithmetic. */
function clean(difference: number): number {
  return Math.round(difference * 1e6) / 1e6 + 0;
}

function noteStraddle({ plan, pieces, notes }: BillState, { schedule }: Run): void {
  const texts = [...new Set(pieces.map(({ piece }) => piece.text.text))];
  if (texts.length > 1)
    notes?.add(
      `The period lies under ${texts.length} versions of the schedule (from ${texts
        .slice(1)
        .map((text) => text.from)
        .join(', ')} on): divided by ${schedule.straddle}.`,
    );
  else if (pieces.length > 1)
    notes?.add(
      `The period lies in ${pieces.length} seasons or rider months: divided by ${schedule.straddle === 'intervals' ? 'intervals' : 'days'}.`,
    );
  if (plan.period.from < (schedule.inForce ?? '')) notes?.add('The period begins before the schedule is in force.');
}

function writeQuantities(speech: Speech, estimated: ReadonlySet<number>): Record<string, PricedQuantity> {
  const { state, bill } = speech;
  const written: [string, PricedQuantity][] = [];
  for (const quantity of state.piece.text.text.quantities) {
    if (state.known[quantity.slot] !== 1) continue;
    written.push([quantity.name, writeQuantity(speech, quantity, bill.printed[quantity.slot] === 1, estimated)]);
  }
  return Object.fromEntries(written);
}

function writeQuantity(
  speech: Speech,
  quantity: QuantityEntry,
  isPrinted: boolean,
  estimated: ReadonlySet<number>,
): PricedQuantity {
  const { slot, unit, label, clause, definition } = quantity;
  const atMs = speech.state.atMs[slot]!;
  return {
    value: speech.state.values[slot]!,
    unit,
    ...(definition.kind === 'measure' && !Number.isNaN(atMs) && { at: new Date(atMs).toISOString() }),
    ...(label !== undefined && { label }),
    ...(clause !== undefined && { clause }),
    explanation: explainQuantity(speech, quantity),
    uses: isPrinted ? [] : usesOf(quantity),
    ...(estimated.has(slot) && { isEstimated: true }),
  };
}

function usesOf(quantity: QuantityEntry): string[] {
  const names = expressionsOfQuantity(quantity).flatMap((expression) => expression.names);
  return [...new Set(quantity.definition.kind === 'value' ? [quantity.definition.at, ...names] : names)];
}

function writeInputs(speech: Speech): Record<string, PricedInput> {
  const { state } = speech;
  const { contract, rates } = state.piece.text.text;
  const written: [string, PricedInput][] = [];
  for (const { name, slot, unit, label, clause } of contract) {
    if (state.known[slot] !== 1) continue;
    const value = state.values[slot]!;
    const words =
      unit === 'date'
        ? String(value).replace(/(\d{4})(\d{2})(\d{2})/, '$1-$2-$3')
        : withUnit(wordNumber(value), unit === 'flag' ? '' : unit);
    written.push([
      name,
      {
        value,
        unit,
        ...(label !== undefined && { label }),
        ...(clause !== undefined && { clause }),
        explanation: `${name} = ${words}, from the contract.`,
        uses: [],
      },
    ]);
  }
  for (const { name, slot, place } of rates) {
    if (state.known[slot] !== 1) continue;
    const expression =
      place.kind === 'same'
        ? place.expression
        : place.kind === 'seasons'
          ? place.bySeason[state.piece.season]!
          : place.byMonth.get(state.piece.month)!;
    const when =
      place.kind === 'months'
        ? `, the rider of ${state.piece.month}`
        : place.kind === 'seasons'
          ? `, in ${state.piece.text.text.seasons?.names[state.piece.season]}`
          : ', a rate of the schedule';
    const uses = [...new Set(inPlace(place).flatMap((one) => one.names))];
    written.push([
      name,
      {
        value: state.values[slot]!,
        unit: '',
        explanation: `${name} = ${expressionWords(speech, expression)}${when}.`,
        uses,
      },
    ]);
  }
  return Object.fromEntries(written);
}

function writeLine(speech: Speech, line: number, reactivePart: number, estimated: ReadonlySet<number>): PricedLine {
  const { bill, run } = speech;
  const plan = lastCharge(bill, line)!;
  const { charge } = plan;
  const state = bill.pieces.findLast(({ piece }) => piece.text.chargeOfLine[line] === plan)!;
  const { definition } = charge;
  const expressions = [...expressionsOf(definition), ...(charge.when ? [charge.when] : [])];
  const slots = expressions.flatMap((expression) => expression.slots);
  const lines = plan.ofLines.map((of) => run.schedule.lineOrder[of]!);
  const rate =
    'price' in definition && definition.price.length === 1 && bill.pieces.length === 1
      ? placeValue(run, state, definition.price[0]!.rate)
      : undefined;
  const per = 'per' in definition && definition.per ? evaluateIn(run, state, definition.per) : undefined;
  return {
    id: charge.name,
    label: charge.label ?? charge.name,
    group: charge.group,
    ...(per !== undefined && { quantity: per, unit: ('unit' in definition && definition.unit) || '' }),
    ...(rate !== undefined && { rate }),
    amount: bill.amounts[line]!,
    explanation: explainLine(speech, line),
    ...(charge.clause !== undefined && { clause: charge.clause }),
    reactivePart: clean(reactivePart),
    uses: [...new Set([...expressions.flatMap((expression) => expression.names), ...lines])],
    ...([...slots, ...lines.map((name) => run.schedule.slots.get(name)!)].some((slot) => estimated.has(slot)) && {
      isEstimated: true,
    }),
  };
}
