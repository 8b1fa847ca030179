import { someInterval } from '../calendar/cells';
import { extremeCells } from '../price/cell-loops';
import type { MeasurePlan } from '../price/reduction';
import type { QuantityEntry } from '../model';
import { expressionsOf, expressionsOfQuantity } from '../price/text-plan';
import { wordInstant, type Speech } from './speak';

/** Places of the quantities and lines that an estimated interval has a part in, carried through formulas and percentages. */
export function estimatedSlots(speech: Speech): Set<number> {
  const { state, run } = speech;
  const { text } = state.piece.text;
  const estimated = new Set<number>();
  for (const quantity of text.quantities) {
    const names = expressionsOfQuantity(quantity).flatMap((expression) => expression.slots);
    const at = quantity.definition.kind === 'value' ? [run.schedule.slots.get(quantity.definition.at)!] : [];
    if (isMeasuredFromEstimates(speech, quantity) || [...names, ...at].some((slot) => estimated.has(slot)))
      estimated.add(quantity.slot);
  }
  for (const { definition, slot, when } of text.charges) {
    const lines = 'of' in definition ? definition.of.map((name) => run.schedule.slots.get(name)!) : [];
    const parts = [...expressionsOf(definition), ...(when ? [when] : [])].flatMap((expression) => expression.slots);
    if ([...parts, ...lines].some((part) => estimated.has(part))) estimated.add(slot);
  }
  return estimated;
}

/** Names the highest or lowest values that an estimated interval alone has set: what they are charged by was never measured. */
export function noteEstimatedExtremes(speech: Speech): void {
  const { source, bill, state, run } = speech;
  if (!source) return;
  for (const { name, slot, definition } of state.piece.text.text.quantities) {
    if (definition.kind !== 'measure' || definition.operation === 'sum' || definition.count > 1) continue;
    const { plan } = source.planOf(bill, state, slot);
    if (state.known[slot] !== 1 || !isCellEstimated(plan, source.load.quality, state.atCell[slot]!)) continue;
    const when = wordInstant(state.atMs[slot]!, run.schedule.timeZone);
    bill.notes?.add(`"${name}" is set by an estimated interval, ${when}: it was not measured.`);
  }
}

function isMeasuredFromEstimates({ source, bill, state }: Speech, { definition, slot }: QuantityEntry): boolean {
  if (!source || definition.kind !== 'measure') return false;
  const { plan, reduction } = source.planOf(bill, state, slot);
  const { quality } = source.load;
  if (plan.kind === 'sum') {
    const { runFirst, runEnd, runClass } = reduction.classes;
    return runFirst.some(
      (first, run) => plan.classes[runClass[run]!] === 1 && holdsEstimate(quality, first, runEnd[run]!),
    );
  }
  if (plan.kind === 'cells' && definition.operation !== 'sum' && definition.count > 1) {
    const best = extremeCells(plan.cells, source.load, plan.formula, state.values);
    return best.some(({ cell }) => isCellEstimated(plan, quality, cell));
  }
  if (definition.operation !== 'sum') return isCellEstimated(plan, quality, state.atCell[slot]!);
  if (plan.kind !== 'cells') return false;
  for (let cell = 0; cell < plan.cells.count; cell++) if (isCellEstimated(plan, quality, cell)) return true;
  return false;
}

function holdsEstimate(quality: Uint8Array, first: number, end: number): boolean {
  for (let i = first; i < end; i++) if (quality[i] === 1) return true;
  return false;
}

function isCellEstimated(plan: MeasurePlan, quality: Uint8Array, cell: number): boolean {
  if (cell < 0) return false;
  if (plan.kind !== 'cells') return quality[cell] === 1;
  return someInterval(plan.cells, cell, (interval) => quality[interval] === 1);
}
