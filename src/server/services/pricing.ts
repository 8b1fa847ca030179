import { formatBillName } from '../../components/ui/format';
import { localDateStartMs, type BillingPeriod, type LoadSeries } from '../../core/load';
import { PriceError, priceBills, priceQuantities, readSchedule, ScheduleError } from '../../core/tariff';
import type { PricedBill, PricingGrid, Schedule } from '../../core/tariff';
import type { BillView } from '../../schemas/bill';
import type { PricedYear, PricingRoute } from '../../schemas/pricing';
import { conflict, ServiceError } from '../errors';
import { ReadingBlock } from '../models/ReadingBlock';
import { TariffChoice } from '../models/TariffChoice';
import { listBills } from './bills';
import type { OpenEngagement } from './engagements';
import { keptSpans, loadSeries } from './readings';
import { reconcileYear } from './reconcile';
import { digestOf } from './schedules';

/** What the year is priced from. `load` is null on the printed route. */
export interface PricingBasis {
  route: PricingRoute;
  schedule: Schedule;
  scheduleText: string;
  /** IANA zone of the site; the schedule has one of its own. */
  siteTimeZone: string;
  choice: TariffChoice;
  periods: BillingPeriod[];
  contract: Record<string, number>;
  history: Record<string, number[]> | undefined;
  /** Per period: what the bill itself must say, since no meter measures it. */
  given: Record<string, number>[];
  bills: BillView[];
  load: LoadSeries | null;
  grid: PricingGrid | null;
  /** Changes whenever bills, readings or the choice change; key of anything worked out from them. */
  dataKey: string;
}

/** The basis where meter intervals are kept: everything a plan needs. */
export type PricingInputs = PricingBasis & { load: LoadSeries; grid: PricingGrid };

interface CacheEntry {
  dataKey: string;
  basis: PricingBasis;
  year?: PricedYear;
}

const cacheSize = 8;
const shared = globalThis as typeof globalThis & { counterlagPricing?: Map<number, CacheEntry> };
const cache = (shared.counterlagPricing ??= new Map());

/**
 * Everything needed to price an engagement's year from intervals.
 *
 * @throws {ServiceError} 409 naming the station to visit, where bills, readings or the schedule are missing
 */
export async function pricingInputs(opened: OpenEngagement): Promise<PricingInputs> {
  const basis = await pricingBasis(opened);
  if (!basis.load || !basis.grid) {
    throw conflict(
      'This needs meter intervals, and none are kept for these bills. Bring them in at the station Intervals.',
      {
        station: 'intervals',
      },
    );
  }
  return basis as PricingInputs;
}

/**
 * The same with or without intervals: from the printed quantities where none are kept.
 *
 * @throws {ServiceError} 409 where bills or the schedule are missing
 */
export async function pricingBasis(opened: OpenEngagement): Promise<PricingBasis> {
  return (await cachedEntry(opened)).basis;
}

/**
 * The year priced beside what was billed, with findings.
 *
 * @throws {ServiceError} 409 where something is missing, or a bill cannot be priced
 */
export async function pricedYear(opened: OpenEngagement): Promise<PricedYear> {
  const entry = await cachedEntry(opened);
  const { basis } = entry;
  entry.year ??= reconcileYear(basis, priceBasis(basis), (schedule) => priceOn(basis, schedule));
  return entry.year;
}

/** How many findings the year has, and how many bills cannot be compared. @throws {ServiceError} 409 like {@link pricedYear} */
export async function findingsCount(opened: OpenEngagement): Promise<{ findings: number; incomplete: number }> {
  const { findings, bills } = await pricedYear(opened);
  return { findings: findings.length, incomplete: bills.filter((bill) => bill.missingReadings > 0).length };
}

/**
 * Prices a basis by its route.
 *
 * @throws {ServiceError} 409 with the core's words where a bill cannot be priced
 */
export function priceBasis(basis: PricingBasis): PricedBill[] {
  try {
    return priceOn(basis, basis.schedule);
  } catch (error) {
    if (!(error instanceof PriceError)) throw error;
    throw conflict(`The bills cannot be priced: ${error.message}`, { station: 'tariff' });
  }
}

/** Prices a basis on any schedule. @throws {PriceError} */
function priceOn(basis: PricingBasis, schedule: Schedule): PricedBill[] {
  const { periods, contract, history, given, load } = basis;
  const told = { contract, given, ...(history ? { history } : {}) };
  if (load) return priceBills(schedule, load, { periods, ...told });
  const rows = basis.bills.map((bill) => ({ from: bill.from, to: bill.to, quantities: knownTo(schedule, bill) }));
  return priceQuantities(schedule, rows, told);
}

async function cachedEntry(opened: OpenEngagement): Promise<CacheEntry> {
  const { engagement } = opened;
  const bills = await billsOfYear(opened);
  if (bills.length === 0) {
    throw conflict('No bills of this year are kept yet. Bring them in at the station Bills.', { station: 'bills' });
  }
  const choice = await TariffChoice.findOne({ where: { engagementId: engagement.id } });
  if (!choice) {
    throw conflict('No tariff schedule is chosen yet. Choose one at the station Tariff.', { station: 'tariff' });
  }
  const dataKey = await dataKeyOf(opened, bills, choice);
  const known = cache.get(engagement.id);
  cache.delete(engagement.id);
  const entry =
    known?.dataKey === dataKey ? known : { dataKey, basis: await readBasis(opened, bills, choice, dataKey) };
  cache.set(engagement.id, entry);
  const [oldest] = cache.keys();
  if (cache.size > cacheSize && oldest !== undefined) cache.delete(oldest);
  return entry;
}

/** The bills whose middle day lies in the engagement's year, in order. */
async function billsOfYear({ engagement }: OpenEngagement): Promise<BillView[]> {
  const middle = (bill: BillView) => (Date.parse(bill.from) + Date.parse(bill.to)) / 2;
  const fromMs = Date.parse(engagement.yearFrom);
  const toMs = Date.parse(engagement.yearTo);
  return (await listBills(engagement.id)).filter((bill) => middle(bill) >= fromMs && middle(bill) < toMs);
}

async function dataKeyOf(opened: OpenEngagement, bills: BillView[], choice: TariffChoice): Promise<string> {
  const where = { meterId: opened.meter.id };
  const [count, newest, changed] = await Promise.all([
    ReadingBlock.count({ where }),
    ReadingBlock.max('id', { where }),
    ReadingBlock.max('updatedAt', { where }),
  ]);
  const ofChoice = [choice.id, choice.version, choice.updatedAt.getTime()];
  return digestOf(JSON.stringify([count, newest, changed, bills, ofChoice]));
}

async function readBasis(
  opened: OpenEngagement,
  bills: BillView[],
  choice: TariffChoice,
  dataKey: string,
): Promise<PricingBasis> {
  const schedule = readFrozen(choice);
  refuseMixed(bills, schedule);
  const load = await readLoad(opened, bills, schedule.timeZone);
  return {
    route: load ? 'intervals' : 'printed',
    schedule,
    scheduleText: choice.scheduleText,
    siteTimeZone: opened.site.timeZone,
    choice,
    periods: bills.map(({ from, to }) => ({ from, to })),
    contract: choice.contract,
    history: choice.history ?? undefined,
    given: bills.map((bill) => pickGiven(bill, schedule)),
    bills,
    load,
    grid: load && { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length },
    dataKey,
  };
}

function readFrozen(choice: TariffChoice): Schedule {
  try {
    return readSchedule(choice.scheduleText);
  } catch (error) {
    if (!(error instanceof ScheduleError)) throw error;
    throw new ServiceError(
      409,
      'schedule-unreadable',
      `The text of ${choice.scheduleId} kept with this engagement can no longer be read. Choose the schedule again at the station Tariff.`,
      undefined,
      { station: 'tariff', problems: error.problems },
    );
  }
}

function refuseMixed(bills: BillView[], schedule: Schedule): void {
  const foreign = bills.find((bill) => bill.currency !== schedule.currency);
  if (foreign) {
    throw conflict(
      `The bill of ${formatBillName(foreign)} is in ${foreign.currency}, the schedule ${schedule.id} in ${schedule.currency}. Correct the bill, or choose another schedule.`,
      { station: 'tariff' },
    );
  }
  bills.forEach((bill, index) => {
    const before = bills[index - 1];
    if (!before || before.to <= bill.from) return;
    throw conflict(
      `The bills of ${formatBillName(before)} and ${formatBillName(bill)} overlap: one runs to ${before.to}, the other begins on ${bill.from}. Correct a period at the station Bills.`,
      { station: 'bills' },
    );
  });
}

/** The kept readings under the bills; null where the meter has none in that time. */
async function readLoad(opened: OpenEngagement, bills: BillView[], timeZone: string): Promise<LoadSeries | null> {
  const fromMs = localDateStartMs(bills[0]!.from, timeZone);
  const toMs = localDateStartMs(bills.at(-1)!.to, timeZone);
  const spans = await keptSpans(opened.meter.id, fromMs, toMs);
  return spans.length === 0 ? null : loadSeries(opened.meter.id, fromMs, toMs);
}

/** Of a bill's printed quantities those the schedule has a name for. */
function knownTo(schedule: Schedule, bill: BillView): Record<string, number> {
  const names = new Set(schedule.texts.flatMap((text) => text.quantities.map((quantity) => quantity.name)));
  return Object.fromEntries(Object.entries(bill.quantities).filter(([name]) => names.has(name)));
}

/** Of a bill's printed quantities those the schedule expects from the bill, not from the meter. */
function pickGiven(bill: BillView, schedule: Schedule): Record<string, number> {
  const names = new Set(
    schedule.texts.flatMap((text) =>
      text.quantities.filter((one) => one.definition.kind === 'given').map(({ name }) => name),
    ),
  );
  return Object.fromEntries(Object.entries(bill.quantities).filter(([name]) => names.has(name)));
}
