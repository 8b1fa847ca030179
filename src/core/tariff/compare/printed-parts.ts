import type { BillingPeriod } from '../../load';
import type { Formula } from '../formula/ast';
import type { QuantityEntry, Schedule } from '../model';
import { planPeriods } from '../price/period-plan';
import type { Rounding } from '../../units';

/** A power factor a bill prints in place of the reactive energy it is worked out from. */
export interface PrintedFactor {
  /** The printed quantity, and how it is rounded. */
  name: string;
  rounding?: Rounding;
  /** Whether it is kvarh per kWh. */
  isRatio: boolean;
  active: string;
  reactive: string;
}

/** What becomes of the quantities a bill prints where what is metered changes. */
export interface PrintedParts {
  /** Worked out anew from parts that are known. */
  workedOut: string[];
  /** Look backs the bill prints. */
  past: string[];
  /** Not measured, and not to be worked out from what is printed: they keep their figure. */
  kept: string[];
  /** Reactive quantities that a printed power factor tells. */
  factors: PrintedFactor[];
}

/** Sorts a bill's printed quantities by what they rest on, under the period's last text. */
export function printedParts(schedule: Schedule, period: BillingPeriod, printed: ReadonlySet<string>): PrintedParts {
  const [plan] = planPeriods(schedule, [period]);
  const { text } = plan!.pieces[plan!.pieces.length - 1]!;
  const bySlot = text.quantityOfSlot;
  const factors = text.quantities.flatMap(({ quantity }) => factorOf(quantity, printed, text.text.quantities));
  const told = new Set([...printed, ...factors.map(({ reactive }) => reactive)]);
  const known = new Set<string>();
  const parts: PrintedParts = { workedOut: [], past: [], kept: [], factors };
  for (const { quantity, needs } of text.quantities) {
    const { name, definition } = quantity;
    const isPrinted = printed.has(name);
    const isKnown = needs.every((slot) => !bySlot.has(slot) || known.has(bySlot.get(slot)!.name));
    if (definition.kind === 'measure' || definition.kind === 'value') {
      if (told.has(name)) known.add(name);
    } else if (definition.kind === 'given') {
      if (isPrinted || definition.default !== undefined) known.add(name);
    } else if (definition.kind === 'past') {
      known.add(name);
      if (isPrinted) parts.past.push(name);
    } else if (isKnown || isPrinted) {
      known.add(name);
      if (isPrinted) (isKnown ? parts.workedOut : parts.kept).push(name);
    }
  }
  return parts;
}

function factorOf(
  { name, definition, rounding }: QuantityEntry,
  printed: ReadonlySet<string>,
  quantities: QuantityEntry[],
): PrintedFactor[] {
  if (definition.kind !== 'formula' || !printed.has(name)) return [];
  const { formula } = definition.expression;
  if (formula.kind !== 'call' || (formula.fn !== 'pf' && formula.fn !== 'ratio')) return [];
  const [first, second] = formula.args.map(nameOf);
  const [active, reactive] = formula.fn === 'pf' ? [first, second] : [second, first];
  const measured = quantities.find((one) => one.name === reactive);
  if (active === undefined || reactive === undefined || measured?.definition.kind !== 'measure') return [];
  if (printed.has(reactive) || measured.definition.operation !== 'sum') return [];
  return [{ name, isRatio: formula.fn === 'ratio', active, reactive, ...(rounding ? { rounding } : {}) }];
}

function nameOf(formula: Formula): string | undefined {
  return formula.kind === 'name' ? formula.name : undefined;
}
