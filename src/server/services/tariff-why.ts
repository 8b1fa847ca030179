import { formatMonth } from '../../components/ui/format';
import { addMonths, localDateOf, localDateStartMs, addDays, type LoadSeries } from '../../core/load';
import type { PricedLine, PricedQuantity } from '../../core/tariff';
import type { PricedYear, ReconciledBill } from '../../schemas/pricing';
import type { DayPicture, LookBackBar, LookBackPicture, WhyQuery, WhyView } from '../../schemas/tariff-why';
import { notFound } from '../errors';
import type { Actor } from '../policies/actor';
import { wordsOfName } from '../presenters/schedule';
import {
  namedOf,
  namesBehind,
  whyBilled,
  whyDifference,
  whyLine,
  whyName,
  whySum,
  type WhyWords,
} from '../presenters/why';
import { openEngagement } from './engagements';
import { pricedYear, pricingBasis, type PricingBasis } from './pricing';
import { textOn } from './schedule-variants';

const minuteMs = 60_000;

/**
 * What stands behind one figure of the tariff sheet.
 *
 * @throws {ServiceError} 404 for a bill or figure that is not on the sheet, 409 where the year cannot be priced
 */
export async function explainFigure(actor: Actor, code: string, query: WhyQuery): Promise<WhyView> {
  const opened = await openEngagement(actor, code);
  const year = await pricedYear(opened);
  const basis = await pricingBasis(opened);
  const index = year.bills.findIndex(({ bill }) => bill.id === query.bill);
  const bill = year.bills[index];
  if (!bill) throw notFound();
  const { words, uses } = wordsOf(year, bill, query.figure, code);
  const names = namesBehind(bill.priced, uses);
  return { ...words, day: dayPicture(basis, bill, names), lookBack: lookBackPicture(basis, year, index, names) };
}

function wordsOf(
  year: PricedYear,
  bill: ReconciledBill,
  figure: string,
  code: string,
): { words: WhyWords; uses: string[] } {
  const [kind, name = ''] = figure.split(':');
  const { lines } = bill.priced;
  if (kind === 'billed') return { words: whyBilled(bill, code), uses: [] };
  if (kind === 'difference') return { words: whyDifference(bill, year.findings, code), uses: [] };
  if (kind === 'total') return { words: whySum(bill, lines, 'priced', code), uses: [] };
  if (kind === 'line')
    return lineWords(
      year,
      bill,
      lines.find((line) => line.id === name),
      code,
    );
  if (kind === 'group') {
    const group = groupLines(lines, name);
    if (group.length === 1) return lineWords(year, bill, group[0], code);
    if (group.length === 0) throw notFound();
    return {
      words: whySum(bill, group, wordsOfName(name).toLowerCase(), code),
      uses: group.flatMap((line) => line.uses),
    };
  }
  const named = namedOf(bill.priced, name);
  if (!named) throw notFound();
  return { words: whyName(bill, name, named, code), uses: [name] };
}

function lineWords(year: PricedYear, bill: ReconciledBill, line: PricedLine | undefined, code: string) {
  if (!line) throw notFound();
  return { words: whyLine(bill, line, year.findings, code), uses: line.uses };
}

/** Lines of a group as the sheet's columns make them: what is neither energy, demand nor reactive is "other". */
function groupLines(lines: PricedLine[], group: string): PricedLine[] {
  const named = ['energy', 'demand', 'reactive'];
  return lines.filter((line) => (named.includes(group) ? line.group === group : !named.includes(line.group)));
}

/** The day of the first peak among the names, as metered. */
function dayPicture({ load, schedule }: PricingBasis, bill: ReconciledBill, names: string[]): DayPicture | null {
  const name = names.find((one) => bill.priced.quantities[one]?.at !== undefined);
  const quantity = name === undefined ? undefined : bill.priced.quantities[name];
  if (!load || name === undefined || quantity?.at === undefined) return null;
  const window = textOn(schedule, bill.bill.from).demandWindow;
  const isBlock = window && window.everyMinutes === undefined && window.minutes % load.stepMinutes === 0;
  return {
    ...dayPowers(load, Date.parse(quantity.at), schedule.timeZone, isBlock ? window.minutes : load.stepMinutes),
    quantity: quantity.label ?? wordsOfName(name),
    value: quantity.value,
    unit: quantity.unit,
  };
}

/** Means of a local day in cells of so many minutes, and the cell that begins at the peak. */
function dayPowers(load: LoadSeries, peakMs: number, timeZone: string, cellMinutes: number) {
  const date = localDateOf(peakMs, timeZone);
  const stepMs = load.stepMinutes * minuteMs;
  const startMs = localDateStartMs(date, timeZone);
  const steps = cellMinutes / load.stepMinutes;
  const first = Math.round((startMs - load.startMs) / stepMs);
  const cells = Math.floor((localDateStartMs(addDays(date, 1), timeZone) - startMs) / (cellMinutes * minuteMs));
  const mean = (channel: Float64Array, cell: number) => {
    const values = Array.from({ length: steps }, (_, at) => channel[first + cell * steps + at] ?? NaN);
    const power = values.reduce((sum, value) => sum + value, 0) / (cellMinutes / 60);
    return Number.isFinite(power) ? Math.round(power * 10) / 10 : null;
  };
  const points = Array.from({ length: cells }, (_, cell) => ({
    minute: cell * cellMinutes,
    kw: mean(load.kwh, cell),
    kvarLagging: mean(load.kvarhLagging, cell),
    kvarLeading: mean(load.kvarhLeading, cell),
  }));
  const at = points.find((point) => startMs + point.minute * minuteMs === peakMs);
  const peak =
    at?.kw == null
      ? null
      : {
          minute: at.minute,
          kw: at.kw,
          kvarLagging: at.kvarLagging ?? 0,
          powerFactor: factorOf(at.kw, at.kvarLagging ?? 0),
        };
  return { date, stepMinutes: cellMinutes, points, peak };
}

const factorOf = (kw: number, kvar: number) => (kw === 0 ? 1 : Math.abs(kw) / Math.hypot(kw, kvar));

/** Earlier values of what the first ratchet among the names looks back at. */
function lookBackPicture(
  basis: PricingBasis,
  year: PricedYear,
  index: number,
  names: string[],
): LookBackPicture | null {
  const bill = year.bills[index]!;
  const text = textOn(basis.schedule, bill.bill.from);
  const past = text.quantities.find(({ name, definition }) => definition.kind === 'past' && names.includes(name));
  if (!past || past.definition.kind !== 'past') return null;
  const [looked, ...more] = past.definition.expression.names;
  const entry = text.quantities.find(({ name }) => name === looked);
  const used = bill.priced.quantities[past.name];
  if (looked === undefined || more.length > 0 || !entry || !used) return null;
  const { over } = past.definition;
  const reach = over.kind === 'last' ? over.count : index;
  const bars = knownBars(basis, year, index, looked, entry.unit).map(({ back, ...bar }): LookBackBar => {
    const counted = back === 0 ? over.includesThis : back <= reach;
    return { ...bar, counted, current: back === 0, used: counted && bar.value === used.value };
  });
  if (bars.length < 2) return null;
  return {
    title: `${entry.label ?? wordsOfName(looked)}, ${over.words}`,
    unit: entry.unit,
    bars,
    usedValue: used.value,
  };
}

function knownBars(basis: PricingBasis, year: PricedYear, index: number, name: string, unit: string) {
  const told = basis.history?.[name] ?? [];
  const first = basis.periods[0]!.from;
  const before = told.map((value, at) => {
    const monthsBack = told.length - at;
    return { name: formatMonth(addMonths(first, -monthsBack)), value, unit, back: index + monthsBack };
  });
  const bills = year.bills.slice(0, index + 1).flatMap((bill, at) => {
    const quantity: PricedQuantity | undefined = bill.priced.quantities[name];
    return quantity ? [{ name: bill.name, value: quantity.value, unit, back: index - at }] : [];
  });
  return [...before, ...bills].slice(-24);
}
