import { formatDate, formatList, formatMonth } from '../../components/ui/format';
import { addMonths } from '../../core/load';
import { carryQuantities, type PricedBill, type PrintedRow, type Schedule } from '../../core/tariff';
import {
  compareChoices,
  type CompareCandidate,
  type CompareChoice,
  type CompareResult,
  type CompareView,
  type NotComparable,
} from '../../schemas/compare';
import { contractSchema } from '../../schemas/tariff';
import { ServiceError } from '../errors';
import type { Actor } from '../policies/actor';
import { presentComparison } from '../presenters/compare';
import { compareHead } from '../presenters/compare-words';
import { contractFields, historyFields, wordsOfName } from '../presenters/schedule';
import { withDefaults } from '../presenters/tariff';
import { calculateComparison } from '../workers/pool';
import type { CompareSchedule } from '../workers/tasks';
import { openEngagement } from './engagements';
import { pricedYear, pricingBasis, type PricingBasis } from './pricing';
import { digestOf, type ScheduleFile } from './schedule-files';
import { listScheduleFiles } from './schedules';

/** The page on which a year is priced under several schedules. */
export interface ComparePage {
  code: string;
  head: { headline: string; lead: string };
  /** Why nothing can be compared yet, and the station that mends it. */
  obstacle: { message: string; station: string } | null;
  candidates: CompareCandidate[];
  notComparable: NotComparable[];
  /** Chosen, but not priced: in words. */
  unpriced: NotComparable[];
  view: CompareView | null;
  monthBefore: string | null;
}

/** A file that reads as a schedule. */
type ReadFile = ScheduleFile & { schedule: Schedule };

/** The same year under the standing schedule and those the address names. */
export async function comparePage(actor: Actor, code: string, query: URLSearchParams): Promise<ComparePage> {
  const opened = await openEngagement(actor, code);
  const files = await listScheduleFiles(actor);
  const { basis, priced, obstacle } = await basisOrObstacle(opened);
  if (!basis) return { ...emptyPage(code), obstacle };
  const sorted = files.map((file) => ({ file, reason: reasonAgainst(file, basis) }));
  const able = sorted.flatMap(({ file, reason }) => (reason === null ? [file as ReadFile] : []));
  const notComparable = sorted.flatMap(({ file, reason }) =>
    reason === null ? [] : [{ id: file.id, title: file.schedule?.title ?? file.id, reason }],
  );
  const asked = compareChoices(query);
  const taken = asked.map((choice) => ({ choice, file: able.find(({ id }) => id === choice.id) }));
  const checked = taken.map(({ choice, file }) => checkChoice(choice, file, basis, priced));
  const schedules = checked.flatMap((one) => ('schedule' in one ? [one.schedule] : []));
  const refused = checked.flatMap((one) => ('reason' in one ? [one] : []));
  const result = schedules.length > 0 ? await compared(basis, schedules) : null;
  const standing = result?.schedules[0];
  if (standing && 'refused' in standing) {
    const obstacle = { message: `The year cannot be priced: ${standing.refused}`, station: 'tariff' };
    return { ...emptyPage(code), obstacle };
  }
  const known = able.map(({ schedule }) => schedule);
  const view = result && presentComparison(result, { ...basis, others: known });
  const unpriced = [...refused, ...(result ? unpricedOf(result, known) : [])];
  return {
    ...emptyPage(code),
    head: compareHead(view, unpriced),
    candidates: able.map((file) => candidateOf(file, basis, asked)),
    notComparable,
    unpriced,
    view,
    monthBefore: formatMonth(addMonths(basis.periods[0]!.from, -1)),
  };
}

const emptyPage = (code: string) => ({
  code,
  head: {
    headline: 'This year is not priced yet, so no schedule can be held against it.',
    lead: 'What is missing is said below.',
  },
  obstacle: null,
  candidates: [],
  notComparable: [],
  unpriced: [],
  view: null,
  monthBefore: null,
});

async function basisOrObstacle(opened: Parameters<typeof pricingBasis>[0]) {
  try {
    const { bills } = await pricedYear(opened);
    return { basis: await pricingBasis(opened), priced: bills.map((bill) => bill.priced), obstacle: null };
  } catch (error) {
    if (!(error instanceof ServiceError) || error.status !== 409) throw error;
    const station = typeof error.details?.station === 'string' ? error.details.station : 'tariff';
    return { basis: null, priced: [], obstacle: { message: error.message, station } };
  }
}

/** Why a file cannot be compared with the standing schedule; null where it can. */
function reasonAgainst({ id, schedule, problems, sha256 }: ScheduleFile, basis: PricingBasis): string | null {
  const standing = basis.schedule;
  if (id === basis.choice.scheduleId && sha256 === basis.choice.sha256) return 'It is the standing schedule.';
  if (!schedule) return `Its text cannot be read: ${problems[0]?.message ?? 'open it to see why.'}`;
  if (schedule.currency !== standing.currency) {
    return `It prices in ${schedule.currency}, this year is billed in ${standing.currency}.`;
  }
  const [first] = basis.periods;
  if (schedule.inForce !== null && first!.from < schedule.inForce) {
    return `It is in force from ${formatDate(schedule.inForce)}; the year begins on ${formatDate(first!.from)}.`;
  }
  return null;
}

function candidateOf({ id, schedule }: ReadFile, basis: PricingBasis, asked: CompareChoice[]): CompareCandidate {
  const choice = asked.find((one) => one.id === id);
  const contract = contractFields(schedule);
  const standingFields = contractFields(basis.schedule);
  const shared = contract.filter(({ name, unit }) =>
    standingFields.some((field) => field.name === name && field.unit === unit && basis.contract[name] !== undefined),
  );
  const start = Object.fromEntries(shared.map(({ name }) => [name, basis.contract[name]!]));
  return {
    id,
    title: schedule.title,
    publisher: schedule.source.publisher ?? null,
    inForce: schedule.inForce,
    currency: schedule.currency,
    contract,
    history: historyFields(schedule),
    chosen: choice !== undefined,
    start: { contract: choice?.contract ?? start, history: choice?.history ?? null },
  };
}

type Checked = { schedule: CompareSchedule } | NotComparable;

function checkChoice(
  choice: CompareChoice,
  file: ReadFile | undefined,
  basis: PricingBasis,
  priced: PricedBill[],
): Checked {
  const { id } = choice;
  if (!file) return { id, title: id, reason: 'It cannot be compared with this year; the list below says why.' };
  const { schedule, text } = file;
  const about = { id, title: schedule.title };
  const fields = contractFields(schedule);
  const parsed = contractSchema(fields).safeParse(choice.contract);
  if (!parsed.success) return { ...about, reason: parsed.error.issues.map(({ message }) => message).join(' ') };
  const looked = new Set(historyFields(schedule).map(({ name }) => name));
  const history = Object.entries(choice.history ?? {}).filter(([name]) => looked.has(name));
  if (history.some(([, values]) => values.some((value) => !(value >= 0)))) {
    return { ...about, reason: 'Its earlier months are numbers, nought or more.' };
  }
  const printed = basis.load ? { rows: null, missing: [] } : printedRows(basis, priced, schedule);
  if (printed.missing.length > 0) {
    return {
      ...about,
      reason: `The bills do not tell ${formatList(printed.missing)}, and no meter intervals are kept.`,
    };
  }
  const names = givenNames(schedule);
  return {
    schedule: {
      id,
      scheduleText: text,
      contract: withDefaults(fields, choice.contract),
      ...(history.length > 0 ? { history: Object.fromEntries(history) } : {}),
      given: basis.bills.map(({ quantities }) => only(quantities, (name) => names.has(name))),
      rows: printed.rows,
    },
  };
}

const only = (quantities: Record<string, number>, isKept: (name: string) => boolean) =>
  Object.fromEntries(Object.entries(quantities).filter(([name]) => isKept(name)));

const quantitiesOf = ({ texts }: Schedule) => texts.flatMap((text) => text.quantities);

const givenNames = (schedule: Schedule) =>
  new Set(quantitiesOf(schedule).flatMap(({ name, definition }) => (definition.kind === 'given' ? [name] : [])));

/** What the bills tell another schedule, and what they do not. */
function printedRows(
  basis: PricingBasis,
  priced: PricedBill[],
  schedule: Schedule,
): { rows: PrintedRow[]; missing: string[] } {
  const missing = new Map<string, string>();
  const own = new Set(quantitiesOf(basis.schedule).map(({ name }) => name));
  const wanted = new Set(quantitiesOf(schedule).map(({ name }) => name));
  const rows = basis.bills.map(({ from, to, quantities }, index): PrintedRow => {
    const period = { from, to };
    const values = Object.fromEntries(
      Object.entries(priced[index]!.quantities).map(([name, { value }]) => [name, value]),
    );
    const carried = carryQuantities({ schedule: basis.schedule, values }, schedule, period);
    // A quantity the standing schedule has no name for is read as it would be if the other were chosen.
    const named = only(quantities, (name) => wanted.has(name) && !own.has(name));
    for (const { name, label, unit } of carried.missing) {
      if (named[name] === undefined) missing.set(name, `${label ?? wordsOfName(name)}${unit ? ` (${unit})` : ''}`);
    }
    return { ...period, quantities: { ...named, ...carried.quantities } };
  });
  return { rows, missing: [...missing.values()] };
}

function unpricedOf({ schedules }: CompareResult, known: Schedule[]): NotComparable[] {
  return schedules.flatMap((one) =>
    'refused' in one
      ? [{ id: one.id, title: known.find(({ id }) => id === one.id)?.title ?? one.id, reason: one.refused }]
      : [],
  );
}

const cacheSize = 12;
const shared = globalThis as typeof globalThis & { counterlagComparisons?: Map<string, Promise<CompareResult>> };
const cache = (shared.counterlagComparisons ??= new Map());

/** Prices in the pool; the same question is worked out once as long as nothing it hangs on changes. */
function compared(basis: PricingBasis, others: CompareSchedule[]): Promise<CompareResult> {
  const { bills, choice, contract, given, history, load, periods, schedule, scheduleText } = basis;
  const names = new Set(quantitiesOf(schedule).map(({ name }) => name));
  const rows = load
    ? null
    : bills.map(({ from, to, quantities }) => ({ from, to, quantities: only(quantities, (name) => names.has(name)) }));
  const standing = { id: standingId(choice.scheduleId), scheduleText, contract, history, given, rows };
  const key = digestOf(JSON.stringify([basis.dataKey, others]));
  const known = cache.get(key);
  const result =
    known ??
    calculateComparison({
      kind: 'compare',
      periods,
      timeZone: schedule.timeZone,
      load,
      schedules: [standing, ...others],
    });
  cache.delete(key);
  cache.set(key, result);
  result.catch(() => cache.delete(key));
  const [oldest] = cache.keys();
  if (cache.size > cacheSize && oldest !== undefined) cache.delete(oldest);
  return result;
}

/** The standing text may be compared with a newer one of the same id. */
const standingId = (scheduleId: string) => `standing ${scheduleId}`;
