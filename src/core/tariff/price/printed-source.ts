import { place } from '../formula/compile';
import { isSame } from '../formula/functions';
import { channelOf } from '../channels';
import { printFormula } from '../formula/print';
import type { MeasureDefinition, QuantityDefinition, QuantityEntry, ValueDefinition } from '../model';
import type { BillState, PieceState } from './bill-state';
import { firstMissing, keepPrinted } from './evaluate-quantities';
import { evaluateIn, setRounded, type QuantitySource, type Run } from './run';
import type { PrintedRow } from '../types';

/** Three different amounts that stand for an active energy or power nobody knows: what comes out the same for all is certain. */
const someActive = [1009.7, 313_000.3, 0.0137] as const;

type Measured = MeasureDefinition | ValueDefinition;

/**
 * Quantities as the bills print them.
 *
 * At unity power factor a reactive measure is 0; a measure whose formula then is a multiple of the cell's active energy or power is that
 * multiple of the printed measure of the same kind, window and cell; what is the same for any active amount is certain; what cannot be
 * told keeps its printed value, with a note.
 */
export class PrintedSource implements QuantitySource {
  readonly hasIntervals = false;

  constructor(private readonly rows: readonly PrintedRow[]) {}

  printed(bill: BillState, { name }: QuantityEntry): number | undefined {
    const { quantities } = this.rows[bill.plan.index]!;
    const value = Object.hasOwn(quantities, name) ? quantities[name] : undefined;
    return value !== undefined && Number.isFinite(value) ? value : undefined;
  }

  measure(run: Run, bill: BillState, state: PieceState, quantity: QuantityEntry): void {
    const missing = { name: quantity.name, kind: 'printed', detail: quantity.unit } as const;
    if (!run.isUnity) {
      state.missing[quantity.slot] = missing;
      return;
    }
    state.samples ??= someActive.map(() => state.values.slice());
    const definition = quantity.definition as Measured;
    const image = activeImage(run, state, definition);
    const printed = this.printed(bill, quantity);
    if (
      image?.factor === 0 &&
      (image.constant === 0 || definition.kind === 'value' || definition.operation !== 'sum')
    ) {
      setRounded(run, bill, state, quantity, image.constant);
      return;
    }
    const partner = image && image.constant === 0 ? this.partnerOf(bill, state, quantity, image.basis) : undefined;
    if (image && partner !== undefined) {
      setRounded(run, bill, state, quantity, image.factor * partner);
      return;
    }
    if (printed !== undefined) {
      keepPrinted(run, bill, state, quantity, printed);
      return;
    }
    state.missing[quantity.slot] = missing;
    for (const [i, values] of state.samples.entries())
      values[quantity.slot] = someActive[i]! * (image && image.factor !== 0 ? image.factor : 1);
  }

  /** The printed active measure of the same kind, window and cell. */
  private partnerOf(
    bill: BillState,
    state: PieceState,
    quantity: QuantityEntry,
    basis: 'kwh' | 'kw',
  ): number | undefined {
    const measured = quantity.definition as Measured;
    const key = kindKey(measured);
    for (const other of state.piece.text.text.quantities) {
      const { definition } = other;
      // The power of the very cell that set the highest or lowest power is that power itself.
      const isItself = measured.kind === 'value' && measured.at === other.name && isOneExtreme(definition, basis);
      const own = isItself ? this.printed(bill, other) : undefined;
      if (own !== undefined) return own;
      if (definition.kind !== 'measure' && definition.kind !== 'value') continue;
      if (definition.channel !== basis || kindKey(definition) !== key) continue;
      const value = this.printed(bill, other);
      if (value !== undefined) return value;
    }
    return undefined;
  }
}

function isOneExtreme(definition: QuantityDefinition, basis: 'kwh' | 'kw'): boolean {
  return (
    definition.kind === 'measure' &&
    definition.operation !== 'sum' &&
    definition.count === 1 &&
    definition.channel === basis
  );
}

function kindKey(definition: Measured): string {
  if (definition.kind === 'value') return `value ${definition.at}`;
  const { operation, each, window, where, count, isDistinctDays } = definition;
  const cell = operation === 'sum' ? '' : each;
  return [operation, cell, window, where && printFormula(where.formula), count, isDistinctDays].join('|');
}

interface Image {
  /** Value of the formula at unity: factor x active + constant, one of the two being 0. */
  factor: number;
  constant: number;
  basis: 'kwh' | 'kw';
}

/** What a measure's formula becomes in a cell without reactive energy, if that can be told for any active energy. */
function activeImage(run: Run, state: PieceState, { expression, channel }: Measured): Image | undefined {
  if (firstMissing(state, expression.slots)) return undefined;
  const basis = expression.channels.some((name) => channelOf(name).isPower) ? 'kw' : 'kwh';
  if (channel && !channelOf(channel).isActive) return { factor: 0, constant: 0, basis };
  const results = someActive.map((active) => {
    state.values.set([active, 0, 0, 1], place.cellKwh);
    return evaluateIn(run, state, expression);
  });
  if (results.every((result) => isSame(result, results[0]!))) return { factor: 0, constant: results[0]!, basis };
  const factors = results.map((result, i) => result / someActive[i]!);
  return factors.every((factor) => isSame(factor, factors[0]!))
    ? { factor: factors[0]!, constant: 0, basis }
    : undefined;
}
