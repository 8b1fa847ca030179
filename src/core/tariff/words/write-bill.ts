import { addDays } from '../../load';
import { unlessFault } from '../formula/compile';
import type { QuantityEntry } from '../model';
import type { BillState } from '../price/bill-state';
import { isCharged, lastCharge, placeValue } from '../price/evaluate-charges';
import { seasonOfDate } from '../price/period-plan';
import type { IntervalSource } from '../price/interval-source';
import { expressionsOf, expressionsOfQuantity } from '../price/text-plan';
import { evaluateIn, withPlace, type Run } from '../price/run';
import type { PricedBill, PricedLine, PricedQuantity } from '../types';
import { explainLine } from './charge-words';
import { writeInputs } from './input-words';
import { estimatedSlots, noteEstimatedExtremes } from './estimated';
import { explainQuantity } from './quantity-words';
import type { Speech } from './speak';

/** Writes the bills of a run, beside the run at unity power factor. */
export function writeBills(run: Run, unity: Run, source: IntervalSource | undefined): PricedBill[] {
  return run.bills.map((bill, index) => withPlace(run, bill, () => writeBill(run, bill, unity.bills[index]!, source)));
}

function writeBill(run: Run, bill: BillState, unity: BillState, source: IntervalSource | undefined): PricedBill {
  const state = bill.pieces[bill.pieces.length - 1]!;
  const speech: Speech = { run, bill, state, source };
  const estimated = source ? estimatedSlots(speech) : new Set<number>();
  const { from, to } = bill.plan.period;
  noteStraddle(bill, run);
  noteEstimatedExtremes(speech);
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

function noteStraddle({ pieces, notes, plan }: BillState, { schedule }: Run): void {
  noteRulingSeason(plan, pieces, schedule, (note) => notes?.add(note));
  const texts = [...new Set(pieces.map(({ piece }) => piece.text.text))];
  if (texts.length > 1)
    notes?.add(
      `The period lies under ${texts.length} versions of the schedule (from ${texts
        .slice(1)
        .map((text) => text.from)
        .join(', ')} on): divided by ${schedule.division}.`,
    );
  else if (pieces.length > 1)
    notes?.add(`The period lies in ${pieces.length} seasons or rider months: divided by ${schedule.division}.`);
}

/** Where one day's season holds for the whole bill, and another day of it lies in another season. */
function noteRulingSeason(
  { period }: BillState['plan'],
  pieces: BillState['pieces'],
  { ruledBy }: Run['schedule'],
  note: (text: string) => void,
): void {
  const { text, season } = pieces[pieces.length - 1]!.piece;
  const { seasons, dependsOnSeason } = text.text;
  if (ruledBy.season === null || !dependsOnSeason || !seasons) return;
  const ends = [period.from, addDays(period.to, -1)].map((date) => seasonOfDate(seasons, date));
  if (ends[0] === ends[1]) return;
  const day = ruledBy.season === 'start' ? 'first' : 'last';
  note(`The period lies in two seasons: that of its ${day} day, ${seasons.names[season]}, holds for the whole bill.`);
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

function writeLine(speech: Speech, line: number, reactivePart: number, estimated: ReadonlySet<number>): PricedLine {
  const { bill, run } = speech;
  const plan = lastCharge(bill, line)!;
  const { charge } = plan;
  const state = bill.pieces.findLast(({ piece }) => piece.text.chargeOfLine[line] === plan)!;
  const { definition } = charge;
  const expressions = [...expressionsOf(definition), ...(charge.when ? [charge.when] : [])];
  const slots = expressions.flatMap((expression) => expression.slots);
  const lines = plan.ofLines.map((of) => run.schedule.lineOrder[of]!);
  const isOn = isCharged(run, bill, state, plan);
  const rate =
    isOn && 'price' in definition && definition.price.length === 1 && bill.pieces.length === 1
      ? unlessFault(() => placeValue(run, state, definition.price[0]!.rate))
      : undefined;
  const isKnown = 'per' in definition && definition.per?.slots.every((slot) => state.known[slot] === 1);
  const per = isKnown && definition.per ? evaluateIn(run, state, definition.per) : undefined;
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
