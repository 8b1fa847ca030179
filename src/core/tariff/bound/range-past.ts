import type { BillingPeriod } from '../../load';
import type { PastDefinition, SeasonTable } from '../model';
import { completeTold, recordsAsked } from '../price/history';
import { hull, plus, point, truthOf, type Range } from './range';
import { rangeOf, type RangeValues } from './range-formula';
import type { RangeBill, RangeRun, RangeState } from './range-state';

/** Values of an earlier period as they were then. */
interface RangeRecord {
  period: BillingPeriod;
  values: RangeValues;
  known: Uint8Array;
}

/** A look back over billing periods: earlier ones of the run with their ranges, told months as told. */
export function rangePast(run: RangeRun, bill: RangeBill, state: RangeState, definition: PastDefinition): Range {
  const records = recordsBefore(run, bill, state, definition.expression.slots);
  const { period } = bill.bill.plan;
  if (definition.over.includesThis) records.push({ period, values: state.values, known: state.point.known });
  return evaluate(definition, records, period, state.point.piece.text.text.seasons);
}

function recordsBefore(
  { run, bills }: RangeRun,
  { bill }: RangeBill,
  { point }: RangeState,
  slots: readonly number[],
): RangeRecord[] {
  const told = run.told.map((record) => {
    const isKnown = slots.every((slot) => record.known[slot] === 1);
    const { period, values, known } = isKnown ? record : completeTold(record, point.piece.text.text, point);
    return { period, values: { low: values, high: values }, known };
  });
  const priced = bills.slice(0, bill.plan.index).map((earlier) => {
    const last = earlier.states[earlier.states.length - 1]!;
    return { period: earlier.bill.plan.period, values: last.values, known: last.point.known };
  });
  return [...told, ...priced];
}

function evaluate(
  definition: PastDefinition,
  records: RangeRecord[],
  present: BillingPeriod,
  seasons: SeasonTable | undefined,
): Range {
  const { expression, take } = definition;
  if (take.kind === 'streak') return streak(definition, records);
  const { kept } = recordsAsked(definition, records, present, seasons);
  return takeOf(
    take,
    kept.map((record) => rangeOf(expression, record.values)),
  );
}

/** Each of these takes never falls where a value rises, so its ends are those of the values' ends. */
function takeOf(take: PastDefinition['take'], values: Range[]): Range {
  if (values.length === 0) return point(0);
  const ends = (of: (values: number[]) => number): Range => ({
    low: of(values.map(({ low }) => low)),
    high: of(values.map(({ high }) => high)),
  });
  switch (take.kind) {
    case 'highest':
      return ends((all) => Math.max(...all));
    case 'lowest':
      return ends((all) => Math.min(...all));
    case 'mean':
      return ends((all) => {
        const some = take.highest === undefined ? all : [...all].sort((a, b) => b - a).slice(0, take.highest);
        return some.reduce((sum, value) => sum + value, 0) / some.length;
      });
    case 'sum':
      return ends((all) => all.reduce((sum, value) => sum + value, 0));
    default:
      return values.reduce((count, value) => plus(count, counted(value)), point(0));
  }
}

function counted(value: Range): Range {
  const truth = truthOf(value);
  return { low: truth === 'holds' ? 1 : 0, high: truth === 'fails' ? 0 : 1 };
}

function streak({ expression }: PastDefinition, records: RangeRecord[]): Range {
  let least: number | undefined;
  let length = 0;
  for (let i = records.length - 1; i >= 0; i--) {
    const record = records[i]!;
    if (!expression.slots.every((slot) => record.known[slot] === 1)) break;
    const truth = truthOf(rangeOf(expression, record.values));
    if (truth === 'fails') break;
    if (truth === 'open') least ??= length;
    length++;
  }
  return hull(point(least ?? length), point(length));
}
