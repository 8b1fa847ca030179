import { col, fn } from 'sequelize';
import { formatBillName } from '../../components/ui/format';
import { localDateStartMs, type LoadSeries } from '../../core/load';
import { readSchedule, ScheduleError } from '../../core/tariff';
import type { PricingGrid, Schedule } from '../../core/tariff';
import type { BillView } from '../../schemas/bill';
import type { PricedYear } from '../../schemas/pricing';
import { conflict, ServiceError } from '../errors';
import { GapFill } from '../models/GapFill';
import { ReadingBlock } from '../models/ReadingBlock';
import { TariffChoice } from '../models/TariffChoice';
import { reconcileInPool } from '../workers/pool';
import { listBills } from './bills';
import type { OpenEngagement } from './engagements';
import { meteredLoad, type MeteredLoad } from './metered-load';
import type { ReconcileBasis } from './price-basis';
import { digestOf } from './schedule-files';

/** What the year is priced from. `load` is null on the printed route. */
export interface PricingBasis extends ReconcileBasis {
  /** Of each meter, where several are summed; `load` is their sum. */
  meters: LoadSeries[];
  scheduleText: string;
  choice: TariffChoice;
  grid: PricingGrid | null;
  /** Changes whenever bills, readings or the choice change; key of anything worked out from them. */
  dataKey: string;
}

/** The basis where meter intervals are kept: everything a plan needs. */
export type PricingInputs = PricingBasis & { load: LoadSeries; grid: PricingGrid };

interface CacheEntry {
  dataKey: string;
  basis: PricingBasis;
  year?: Promise<PricedYear>;
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
 * The year priced beside what was billed, with findings: worked out in a thread of its own, once as long as nothing changes.
 *
 * @throws {ServiceError} 409 where something is missing, or a bill cannot be priced
 */
export async function pricedYear(opened: OpenEngagement): Promise<PricedYear> {
  const entry = await cachedEntry(opened);
  entry.year ??= reconcile(entry.basis);
  try {
    return await entry.year;
  } catch (error) {
    // A thread that was ended is no verdict on the year: the next look tries again.
    entry.year = undefined;
    throw error;
  }
}

function reconcile(basis: PricingBasis): Promise<PricedYear> {
  const { schedule: _schedule, choice: _choice, grid: _grid, dataKey: _dataKey, meters: _meters, ...plain } = basis;
  return reconcileInPool(plain);
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

/** What a year stands on whatever the schedule: the bills, the readings under them, what the contract says. */
export async function pricingGround(
  opened: OpenEngagement,
): Promise<Pick<PricingBasis, 'bills' | 'load' | 'contract' | 'history'>> {
  const choice = await TariffChoice.findOne({ where: { engagementId: opened.engagement.id } });
  if (choice) return pricingBasis(opened);
  const bills = await billsOfYear(opened);
  const metered = bills.length > 0 ? await readLoad(opened, bills, opened.site.timeZone) : null;
  return { bills, load: metered?.load ?? null, contract: {}, history: undefined };
}

/** The bills whose middle day lies in the engagement's year, in order. */
async function billsOfYear({ engagement }: OpenEngagement): Promise<BillView[]> {
  const middle = (bill: BillView) => (Date.parse(bill.from) + Date.parse(bill.to)) / 2;
  const fromMs = Date.parse(engagement.yearFrom);
  const toMs = Date.parse(engagement.yearTo);
  return (await listBills(engagement.id)).filter((bill) => middle(bill) >= fromMs && middle(bill) < toMs);
}

async function dataKeyOf(opened: OpenEngagement, bills: BillView[], choice: TariffChoice): Promise<string> {
  // Blocks are made and taken away, never changed, and no id is given twice: number and newest tell of any change. A column
  // behind the values would have SQLite walk through all of them.
  const readings = await ReadingBlock.findOne({
    where: { meterId: opened.meters.map(({ id }) => id) },
    attributes: [
      [fn('COUNT', col('id')), 'count'],
      [fn('MAX', col('id')), 'newest'],
    ],
    raw: true,
  });
  // Values of an estimate change only together with blocks.
  const fills = await GapFill.findOne({
    where: { meterId: opened.meters.map(({ id }) => id) },
    attributes: [
      [fn('COUNT', col('id')), 'count'],
      [fn('MAX', col('id')), 'newest'],
    ],
    raw: true,
  });
  const ofChoice = [choice.id, choice.version, choice.updatedAt.getTime()];
  return digestOf(JSON.stringify([readings, fills, opened.meters.map(({ id }) => id), bills, ofChoice]));
}

async function readBasis(
  opened: OpenEngagement,
  bills: BillView[],
  choice: TariffChoice,
  dataKey: string,
): Promise<PricingBasis> {
  const schedule = readFrozen(choice);
  refuseMixed(bills, schedule);
  refuseSeveral(opened, schedule);
  const metered = await readLoad(opened, bills, schedule.timeZone);
  const load = metered?.load ?? null;
  if (load) refuseCoarse(schedule, load);
  return {
    route: load ? 'intervals' : 'printed',
    schedule,
    scheduleText: choice.scheduleText,
    siteTimeZone: opened.site.timeZone,
    choice,
    lineMatches: choice.lineMatches,
    toleranceMinor: choice.toleranceMinor,
    periods: bills.map(({ from, to }) => ({ from, to })),
    contract: choice.contract,
    history: choice.history ?? undefined,
    given: bills.map((bill) => pickGiven(bill, schedule)),
    bills,
    load,
    meters: metered && metered.meters.length > 1 ? metered.meters : [],
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

/** Several meters are added up only where the schedule says that they are billed so. */
function refuseSeveral({ meters }: OpenEngagement, schedule: Schedule): void {
  if (meters.length < 2 || schedule.meters === 'summed') return;
  throw conflict(
    `${schedule.id} bills one meter; this engagement has ${meters.length}: ${meters.map(({ label }) => label).join(', ')}. Where the contract has them billed together, write "meters: summed" into a text of the schedule and choose that; otherwise take the other meters off at the station Intervals.`,
    { station: 'tariff' },
  );
}

/** A demand over a window shorter than the readings cannot be told from them: their mean hides its peak. */
function refuseCoarse(schedule: Schedule, { stepMinutes }: LoadSeries): void {
  for (const { demandWindow, quantities } of schedule.texts) {
    const finer = quantities.find(
      ({ definition }) => definition.kind === 'measure' && definition.each === 'demand window',
    );
    if (!finer || !demandWindow || demandWindow.minutes >= stepMinutes) continue;
    throw conflict(
      `${schedule.id} measures "${finer.name}" over ${demandWindow.minutes} minutes, and the kept readings are means of ${stepMinutes}: the peak within them is not known. Bring in readings of ${demandWindow.minutes} minutes or shorter, or undo these to price from what the bills print.`,
      { station: 'intervals' },
    );
  }
}

/** The kept readings under the bills; null where the meters have none in that time. */
function readLoad(opened: OpenEngagement, bills: BillView[], timeZone: string): Promise<MeteredLoad | null> {
  return meteredLoad(opened, localDateStartMs(bills[0]!.from, timeZone), localDateStartMs(bills.at(-1)!.to, timeZone));
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
