import { formatBillName } from '../../components/ui/format';
import type { ChargeGroup, Schedule } from '../../core/tariff';
import { fromMinorUnits, toMinorUnits } from '../../core/units';
import type { BillView } from '../../schemas/bill';
import type {
  CompareColumn,
  ComparedBill,
  CompareResult,
  CompareSweep,
  CompareView,
  SweepView,
} from '../../schemas/compare';
import type { PricingRoute } from '../../schemas/pricing';
import { shareWords, factorWords } from './compare-words';
import { namesApart } from './compare-names';
import { historyFields } from './schedule';

/** What a comparison stands on. */
interface About {
  schedule: Schedule;
  route: PricingRoute;
  bills: BillView[];
  /** The library's schedules that may be compared. */
  others: Schedule[];
}

/** The year under several schedules as its page shows it; null where the standing schedule itself is not priced. */
export function presentComparison(result: CompareResult, about: About): CompareView | null {
  const { schedule, route, bills } = about;
  const { currency } = schedule;
  const names = namesApart(result.schedules.map(({ id }, index) => (index === 0 ? schedule : scheduleOf(id, about))));
  const priced = result.schedules.flatMap((one, index) => ('bills' in one ? [{ ...one, index }] : []));
  const [standing] = priced;
  if (!standing || standing.index !== 0) return null;
  const { kwh } = result;
  const columns = priced.map(({ id, bills: own, notes, index, isHistoryTold }): CompareColumn => {
    const amounts = amountsOf(own, currency);
    const text = index === 0 ? schedule : scheduleOf(id, about);
    return {
      id,
      name: names[index]!,
      title: text.title,
      isStanding: index === 0,
      ...amounts,
      differenceMinor: amounts.totalMinor - amountsOf(standing.bills, currency).totalMinor,
      perKwh: kwh ? fromMinorUnits(amounts.totalMinor, currency) / kwh : null,
      untold: isHistoryTold ? [] : historyFields(text).map(({ label }) => label),
      notes,
    };
  });
  const nameOf = (id: string) => columns.find((column) => column.id === id)?.name ?? id;
  return {
    currency,
    route,
    months: bills.map(({ from, to }) => ({ name: formatBillName({ from, to }), from, to })),
    columns,
    kwh,
    powerFactor: result.powerFactor,
    byShare: presentSweep(result.byShare, nameOf, (sweep, id) => shareWords(sweep, id, nameOf)),
    byFactor: presentSweep(result.byFactor, nameOf, (sweep, id) => factorWords(sweep, id, nameOf, kwh ?? 0)),
    noBreakEvens: noBreakEvens(result, route),
  };
}

function scheduleOf(id: string, { others, schedule }: About): Schedule {
  return others.find((one) => one.id === id) ?? schedule;
}

function amountsOf(bills: ComparedBill[], currency: string) {
  const minor = (amount: number) => toMinorUnits(amount, currency);
  const sum = (of: (bill: ComparedBill) => number) => bills.reduce((total, bill) => total + minor(of(bill)), 0);
  const groups: ChargeGroup[] = ['energy', 'demand', 'reactive', 'fixed', 'adjustment', 'tax'];
  return {
    months: bills.map(({ total, reactiveCost }) => ({ totalMinor: minor(total), reactiveMinor: minor(reactiveCost) })),
    totalMinor: sum(({ total }) => total),
    reactiveMinor: sum(({ reactiveCost }) => reactiveCost),
    groups: Object.fromEntries(groups.map((group) => [group, sum((bill) => bill.groups[group])])) as Record<
      ChargeGroup,
      number
    >,
  };
}

function presentSweep(
  sweep: CompareResult['byShare'],
  nameOf: (id: string) => string,
  wordsOf: (sweep: CompareSweep, id: string) => string,
): SweepView | null {
  if (!sweep || 'refused' in sweep) return null;
  const { ids, points, pairs } = sweep;
  return {
    ids,
    points,
    words: pairs.map(({ id }) => ({ id, name: nameOf(id), finding: wordsOf(sweep, id) })),
    marks: pairs.flatMap(({ id, found }) =>
      found.breakEvens.map(({ at }) => ({ id, place: at, cost: costAt(sweep, id, at) })),
    ),
  };
}

/** Cost of a schedule between the points of the grid. */
function costAt({ ids, points }: CompareSweep, id: string, place: number): number {
  const line = ids.indexOf(id);
  const next = Math.max(
    1,
    points.findIndex((point) => point.place >= place),
  );
  const [from, to] = [points[next - 1]!, points[next]!];
  const share = (place - from.place) / (to.place - from.place);
  return from.costs[line]! + share * (to.costs[line]! - from.costs[line]!);
}

function noBreakEvens({ byShare, byFactor }: CompareResult, route: PricingRoute): string | null {
  if (route === 'printed') {
    return 'Break-evens need the load itself: bring in meter intervals at the station Intervals. Printed quantities price one load only.';
  }
  const refused = [byShare, byFactor].find((sweep) => sweep && 'refused' in sweep);
  if (refused && 'refused' in refused) return `Break-evens are not found: ${refused.refused}`;
  return byShare ? null : 'The year has no lagging kvarh, so no share of it can be taken away.';
}
