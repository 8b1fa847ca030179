import { IntakeError, intakeError } from './errors';
import { pointFinder } from './espi-channels';
import type { EspiEntry, EspiFeed } from './espi-feed';
import { billOfSummary, summariesOf, type SummaryBill } from './espi-summaries';
import { attempt, headRows, meterGuess } from './preview';
import type { ColumnMap } from './column-map';
import type { BillPreview, BillReading, IntakeNote, IntakeProblem, ReadOptions } from './types';

// Cost of a kWh outside which a feed's amounts are doubted, for currencies of like worth. Real feeds met: 0.10 CAD and
// 0.13 USD; made-up ones 0.56 and 1.42.
const usualCost = { least: 0.02, most: 0.5, currencies: ['USD', 'CAD', 'EUR', 'GBP', 'AUD', 'CHF', 'NZD'] };
const gas = '1';
const water = '2';

/** Whether a feed holds anything for the station of bills. */
export const hasSummaries = (feed: EspiFeed): boolean => summariesOf(feed).length > 0;

interface Metered {
  meter: string;
  entry: EspiEntry;
}

/** Summaries of electricity with the meter each belongs to. */
function meteredSummaries(feed: EspiFeed): { electric: Metered[]; others: number } {
  const pointOf = pointFinder(feed.entries.filter((entry) => entry.kind === 'UsagePoint'));
  const all = summariesOf(feed).map((entry) => ({ entry, point: pointOf(entry) }));
  const electric = all.filter(
    ({ point }) => ![gas, water].includes(point.entry?.fields.get('ServiceCategory.kind') ?? ''),
  );
  return {
    electric: electric.map(({ entry, point }) => ({ entry, meter: point.name })),
    others: all.length - electric.length,
  };
}

const metersOf = (summaries: readonly Metered[]): string[] => [...new Set(summaries.map(({ meter }) => meter))];

/**
 * Reads the usage summaries of an ESPI feed as bills; local dates are those of the zone given.
 * @throws {IntakeError} if there is none, if several meters are there and none is picked, or if their periods overlap.
 */
export function readEspiBills(feed: EspiFeed, options: ReadOptions): BillReading {
  const { electric, others } = meteredSummaries(feed);
  if (electric.length === 0) throw noSummaries(options.fileName);
  const meters = metersOf(electric);
  const meter = options.columnMap?.meter ?? (meters.length === 1 ? meters[0] : undefined);
  if (meter === undefined || !meters.includes(meter)) {
    throw intakeError(
      `The feed holds summaries of ${meters.length} meters: ${meters.slice(0, 20).join(', ')}.`,
      options.fileName,
      'Pick one of them in the column map.',
    );
  }
  const own = electric.filter((one) => one.meter === meter);
  const currencyCode = feed.entries
    .find(({ kind, fields }) => kind === 'ReadingType' && fields.has('currency'))
    ?.fields.get('currency');
  const found = own.flatMap(({ entry }) => billOfSummary(entry, { timeZone: options.timeZone, currencyCode }) ?? []);
  const notes: IntakeNote[] = [];
  const told = withoutRepeats(found, notes);
  if (told.length === 0) throw noSummaries(options.fileName);
  checkPeriods(told, options.fileName);
  if (others > 0)
    notes.push({ code: 'summaries-left-out', message: `${others} summaries of gas or water are left out.` });
  if (found.length < own.length) {
    const empty = own.length - found.length;
    notes.push({ code: 'summaries-empty', message: `${empty} summaries hold no period or nothing billed.` });
  }
  notes.push(...told.flatMap((one) => [...one.notes, ...costNotes(one)]));
  return { bills: told.map(({ bill }) => bill), report: reportOf(told, notes, { kind: 'bills', meter }, options) };
}

/** The summary in which the bill from a day on stands; undefined where there is none. */
export function summaryOfBill(feed: EspiFeed, options: ReadOptions, from: string): EspiEntry | undefined {
  const { bills, report } = readEspiBills(feed, options);
  const line = report.billRows?.[bills.findIndex(({ period }) => period.from === from)];
  return summariesOf(feed).find((entry) => entry.line === line);
}

const noSummaries = (fileName: string) =>
  intakeError(
    'The feed holds intervals, not bills: it has no usage summary with a bill.',
    fileName,
    'Bring it in at the station Intervals; for bills ask for a feed with usage summaries, or for a table.',
  );

/** In order of time; the same summary twice counts once. */
function withoutRepeats(found: readonly SummaryBill[], notes: IntakeNote[]): SummaryBill[] {
  const seen = new Set<string>();
  const told = found.filter(({ bill }) => {
    const key = JSON.stringify(bill);
    const isNew = !seen.has(key);
    seen.add(key);
    return isNew;
  });
  if (told.length < found.length) {
    const count = found.length - told.length;
    notes.push({ code: 'summaries-repeated', message: `${count} summaries repeat another word for word.` });
  }
  return told.sort((a, b) => a.bill.period.from.localeCompare(b.bill.period.from));
}

function checkPeriods(told: readonly SummaryBill[], fileName: string): void {
  const problems: IntakeProblem[] = [];
  told.forEach(({ bill: { period }, line }, at) => {
    if (period.from >= period.to)
      problems.push({
        message: `The period from ${period.from} to ${period.to} has no day.`,
        where: `${fileName}, line ${line}`,
        remedy: 'Check the zone of the site, or type this bill from paper.',
      });
    const next = told[at + 1];
    if (next && next.bill.period.from < period.to)
      problems.push({
        message: `The bills of ${period.from} to ${period.to} and from ${next.bill.period.from} overlap.`,
        where: `${fileName}, lines ${line} and ${next.line}`,
        remedy: 'Ask which of them stands: an estimated bill and its correction cannot both.',
      });
  });
  if (problems.length > 0) throw new IntakeError(problems.slice(0, 20));
}

function costNotes({ bill, currency, line }: SummaryBill): IntakeNote[] {
  const { total, quantities, period } = bill;
  const { kwh } = quantities;
  if (total === null || kwh === undefined || kwh <= 0 || !usualCost.currencies.includes(currency ?? '')) return [];
  const cost = total / kwh;
  if (cost >= usualCost.least && cost <= usualCost.most) return [];
  return [
    {
      code: 'cost-odd',
      message: `The bill from ${period.from} costs ${cost.toFixed(3)} ${currency} per kWh. Its amounts are read as the standard says, in hundred-thousandths; compare them with the printed bill.`,
      where: `line ${line}`,
    },
  ];
}

function reportOf(
  told: readonly SummaryBill[],
  notes: IntakeNote[],
  columnMap: ColumnMap,
  options: ReadOptions,
): BillReading['report'] {
  const named = [...new Set(told.flatMap(({ currency }) => currency ?? []))];
  if (named.length > 1)
    throw intakeError(
      `The summaries are in ${named.join(' and ')}.`,
      options.fileName,
      'Ask for a feed in one currency.',
    );
  const sum = (name: string): number => {
    const figures = told.flatMap(({ bill }) => bill.quantities[name] ?? []);
    return figures.length === 0 ? Number.NaN : figures.reduce((total, figure) => total + figure, 0);
  };
  const demands = told.flatMap(({ bill }) => bill.quantities.maxKw ?? []);
  return {
    format: 'espi',
    rowsRead: told.length,
    intervals: 0,
    missing: 0,
    duplicates: 0,
    estimated: 0,
    firstMs: 0,
    lastMs: 0,
    totalKwh: sum('kwh'),
    totalKvarhLagging: sum('kvarh'),
    totalKvarhLeading: Number.NaN,
    maxKw: demands.length === 0 ? Number.NaN : Math.max(...demands),
    notes,
    columnMap,
    billRows: told.map(({ line }) => line),
    ...(named[0] === undefined ? {} : { currency: named[0] }),
  };
}

/** What intake shows of the summaries of a feed. */
export function previewEspiBills(
  feed: EspiFeed,
  { head, shape }: { head: string; shape: string },
  options: ReadOptions,
): BillPreview {
  const { electric } = meteredSummaries(feed);
  if (electric.length === 0) throw noSummaries(options.fileName);
  const meters = metersOf(electric);
  const reading = attempt(() => readEspiBills(feed, options));
  return {
    kind: 'bills',
    fileName: options.fileName,
    format: 'espi',
    dialect: {},
    rowsInFile: summariesOf(feed).length,
    headerRow: null,
    firstRow: 1,
    lastRow: summariesOf(feed).length,
    rows: headRows(head, null),
    columnMap: reading.result?.report.columnMap ?? options.columnMap ?? { kind: 'bills' },
    mapApplied: options.columnMap !== undefined,
    shape,
    columns: [],
    guesses: meterGuess(meters, options.columnMap),
    problems: reading.problems,
    report: reading.result?.report ?? null,
    documents: [],
    bills: reading.result?.bills ?? [],
    meters,
  };
}
