import { localDateStartMs, type BillingPeriod, type LoadSeries } from '../../core/load';
import { priceBills, priceQuantities, readSchedule, ScheduleError } from '../../core/tariff';
import type { PricedBill, PriceOptions, Schedule } from '../../core/tariff';
import type { BilledBill, PricedYear, PricingRoute } from '../../schemas/pricing';
import { conflict, ServiceError } from '../errors';
import { Bill } from '../models/Bill';
import { BillLine } from '../models/BillLine';
import { ReadingBlock } from '../models/ReadingBlock';
import { TariffChoice } from '../models/TariffChoice';
import { presentBilledBill } from '../presenters/pricing';
import type { OpenEngagement } from './engagements';
import { keptSpans, loadSeries } from './readings';
import { reconcileYear } from './reconcile';

/** A regular grid of intervals from the first period's beginning to the last one's end. */
export interface PricingGrid {
  startMs: number;
  stepMinutes: number;
  count: number;
}

/** What the year is priced from. `load` is null on the printed route. */
export interface PricingBasis {
  route: PricingRoute;
  schedule: Schedule;
  scheduleText: string;
  choice: TariffChoice;
  periods: BillingPeriod[];
  contract: Record<string, number>;
  history: Record<string, number[]> | undefined;
  /** Per period: what the bill itself must say, since no meter measures it. */
  given: Record<string, number>[];
  bills: BilledBill[];
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
  entry.year ??= reconcileYear(entry.basis, priceBasis(entry.basis));
  return entry.year;
}

/** Prices a basis by its route, optionally on another schedule. */
export function priceBasis(basis: PricingBasis, schedule: Schedule = basis.schedule): PricedBill[] {
  const { periods, contract, history, given } = basis;
  const options: PriceOptions = { periods, contract, given, ...(history ? { history } : {}) };
  try {
    if (basis.load) return priceBills(schedule, basis.load, options);
    const rows = basis.bills.map((bill) => ({ ...bill.period, quantities: bill.quantities }));
    return priceQuantities(schedule, rows, { contract, given, ...(history ? { history } : {}) });
  } catch (error) {
    if (!(error instanceof Error) || error instanceof RangeError || error instanceof TypeError) throw error;
    throw conflict(`The bills cannot be priced: ${error.message}`, { station: 'tariff' });
  }
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

/** Bills whose greater part lies in the engagement's year, in order, with their lines. */
async function billsOfYear({ engagement }: OpenEngagement): Promise<{ bill: Bill; lines: BillLine[] }[]> {
  const all = await Bill.findAll({ where: { engagementId: engagement.id }, order: ['periodFrom', 'id'] });
  const middle = (bill: Bill) => (Date.parse(bill.periodFrom) + Date.parse(bill.periodTo)) / 2;
  const bills = all.filter(
    (bill) => middle(bill) >= Date.parse(engagement.yearFrom) && middle(bill) < Date.parse(engagement.yearTo),
  );
  const lines = await BillLine.findAll({ where: { billId: bills.map((bill) => bill.id) }, order: ['position', 'id'] });
  return bills.map((bill) => ({ bill, lines: lines.filter((line) => line.billId === bill.id) }));
}

async function dataKeyOf(opened: OpenEngagement, bills: { bill: Bill; lines: BillLine[] }[], choice: TariffChoice) {
  const where = { meterId: opened.meter.id };
  const [count, newest, changed] = await Promise.all([
    ReadingBlock.count({ where }),
    ReadingBlock.max('id', { where }),
    ReadingBlock.max('updatedAt', { where }),
  ]);
  const ofBills = bills.map(({ bill, lines }) => [
    bill.id,
    bill.version,
    bill.updatedAt.getTime(),
    ...lines.map((line) => `${line.id}@${line.updatedAt.getTime()}`),
  ]);
  const ofChoice = [choice.id, choice.version, choice.updatedAt.getTime()];
  return JSON.stringify([count, newest, changed, ofBills, ofChoice]);
}

async function readBasis(
  opened: OpenEngagement,
  bills: { bill: Bill; lines: BillLine[] }[],
  choice: TariffChoice,
  dataKey: string,
): Promise<PricingBasis> {
  const schedule = readFrozen(choice);
  const billed = bills.map(({ bill, lines }) => presentBilledBill(bill, lines));
  refuseMixed(billed, schedule);
  const load = await readLoad(opened, billed, schedule.timeZone);
  return {
    route: load ? 'intervals' : 'printed',
    schedule,
    scheduleText: choice.scheduleText,
    choice,
    periods: billed.map((bill) => bill.period),
    contract: choice.contract,
    history: choice.history ?? undefined,
    given: billed.map((bill) => pickGiven(bill, schedule)),
    bills: billed,
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

function refuseMixed(bills: BilledBill[], schedule: Schedule): void {
  const foreign = bills.find((bill) => bill.currency !== schedule.currency);
  if (foreign) {
    throw conflict(
      `The bill of ${foreign.name} is in ${foreign.currency}, the schedule ${schedule.id} in ${schedule.currency}. Correct the bill, or choose another schedule.`,
      { station: 'tariff' },
    );
  }
  bills.forEach((bill, index) => {
    const before = bills[index - 1];
    if (!before || before.period.to <= bill.period.from) return;
    throw conflict(
      `The bills of ${before.name} and ${bill.name} overlap: one runs to ${before.period.to}, the other begins on ${bill.period.from}. Correct a period at the station Bills.`,
      { station: 'bills' },
    );
  });
}

/** The kept readings under the bills; null where the meter has none in that time. */
async function readLoad(opened: OpenEngagement, bills: BilledBill[], timeZone: string): Promise<LoadSeries | null> {
  const fromMs = localDateStartMs(bills[0]!.period.from, timeZone);
  const toMs = localDateStartMs(bills.at(-1)!.period.to, timeZone);
  const spans = await keptSpans(opened.meter.id, fromMs, toMs);
  return spans.length === 0 ? null : loadSeries(opened.meter.id, fromMs, toMs);
}

/** Of a bill's printed quantities those the schedule expects from the bill, not from the meter. */
function pickGiven(bill: BilledBill, schedule: Schedule): Record<string, number> {
  const names = new Set(
    schedule.texts.flatMap((text) =>
      text.quantities.filter((one) => one.definition.kind === 'given').map(({ name }) => name),
    ),
  );
  return Object.fromEntries(Object.entries(bill.quantities).filter(([name]) => names.has(name)));
}
