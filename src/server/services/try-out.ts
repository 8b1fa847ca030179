import { dayNumber } from '../../core/load';
import {
  assumeMonth,
  monthAtPowerFactor,
  PriceError,
  priceMonth,
  ToldError,
  type AssumedMonth,
  type Schedule,
  type ToldMonth,
  type TriedBill,
} from '../../core/tariff';
import { contractSchema, type ContractField } from '../../schemas/tariff';
import type { TryInput, TryView } from '../../schemas/try-out';
import { conflict, ServiceError } from '../errors';
import type { Actor } from '../policies/actor';
import { contractFields } from '../presenters/schedule';
import { withDefaults } from '../presenters/tariff';
import { presentTryOut, type TriedMonth } from '../presenters/try-out';
import { openForm, openScheduleFile } from './schedules';

/** Longest month tried: a bill may run over two. [d] */
const mostDays = 100;

/** Where schedules to try months on are opened. */
const shelves = { library: openScheduleFile, forms: openForm };

/**
 * A schedule or a form of the library, to try months on. Staff only; no engagement is needed.
 *
 * @throws {ServiceError} 404 for an unknown one, 409 naming the first mistake of one that cannot be read
 */
export async function openReadable(actor: Actor, id: string, shelf: keyof typeof shelves): Promise<Schedule> {
  const { schedule, fileName, problems } = await shelves[shelf](actor, id);
  if (schedule) return schedule;
  const [first] = problems;
  const where = first ? ` Line ${first.line}: ${first.message}` : '';
  throw conflict(`${fileName} cannot be read, so nothing can be tried on it.${where} Open the schedule to mend it.`);
}

/** The same for a page; null where it cannot be read, which its own page tells better. @throws {ServiceError} 404 */
export async function readableOrNull(actor: Actor, id: string, shelf: keyof typeof shelves): Promise<Schedule | null> {
  try {
    return await openReadable(actor, id, shelf);
  } catch (error) {
    if (error instanceof ServiceError && error.status === 409) return null;
    throw error;
  }
}

/** A month told in short, priced on a schedule; what cannot be priced is said at its field. */
export function tryOutOn(schedule: Schedule, input: TryInput): TryView {
  const fields = contractFields(schedule);
  const told = toldMonth(input, fields);
  const days = dayNumber(input.to) - dayNumber(input.from);
  const about = { schedule, input, fields, days };
  const faults = {
    ...contractFaults(fields, input.c),
    ...(days < 1 ? { to: 'The last day comes after the first.' } : {}),
    ...(days > mostDays ? { to: `${days} days are no month. Choose at most ${mostDays}.` } : {}),
  };
  const refused = (found: Record<string, string>) =>
    presentTryOut({ ...about, faults: found, month: bareMonth(schedule, told), tried: null });
  if (Object.keys(faults).length > 0) return refused(faults);
  const assumed = withFaults(() => assumeMonth(schedule, told), about);
  if ('faults' in assumed) return refused(assumed.faults);
  const month = assumed.result;
  const isWaiting = month.asked.some(({ basis }) => basis === 'missing') || untoldFields(fields, input.c).length > 0;
  if (isWaiting) return presentTryOut({ ...about, faults: {}, month, tried: null });
  const priced = withFaults(() => priceTried(schedule, told, month, input), about, month);
  if ('faults' in priced) return presentTryOut({ ...about, ...priced, month, tried: null });
  return presentTryOut({ ...about, faults: {}, month, tried: priced.result });
}

/** What the form asks, nothing told: so that its fields stay where figures contradict one another. */
function bareMonth(schedule: Schedule, { period }: ToldMonth): AssumedMonth | null {
  try {
    return assumeMonth(schedule, { period, quick: {}, typed: {}, contract: {} });
  } catch (error) {
    if (error instanceof PriceError || error instanceof RangeError) return null;
    throw error;
  }
}

function toldMonth(input: TryInput, fields: ContractField[]): ToldMonth {
  const { from, to, kwh, kw, kvarh, pf, q, c } = input;
  return {
    period: { from, to },
    quick: { energyKwh: kwh, peakKw: kw, energyKvarh: kvarh, powerFactor: pf },
    typed: q,
    contract: withDefaults(fields, c),
  };
}

/** Contract inputs without a default that are not told yet: they are asked, not refused. */
const untoldFields = (fields: ContractField[], told: Record<string, number>) =>
  fields.filter((field) => field.default === null && told[field.name] === undefined);

function contractFaults(all: ContractField[], told: Record<string, number>): Record<string, string> {
  const untold = untoldFields(all, told);
  const fields = all.filter((field) => !untold.includes(field));
  const known = new Set(fields.map(({ name }) => name));
  const own = Object.fromEntries(Object.entries(told).filter(([name]) => known.has(name)));
  const parsed = contractSchema(fields).safeParse(own);
  return Object.fromEntries((parsed.error?.issues ?? []).map((issue) => [`c.${String(issue.path[0])}`, issue.message]));
}

function priceTried(schedule: Schedule, told: ToldMonth, month: AssumedMonth, { target, p }: TryInput): TriedMonth {
  const priced = (asked: Pick<AssumedMonth, 'asked'>): TriedBill => priceMonth(schedule, told, asked, p);
  const { kvarhPerKwh } = month;
  if (kvarhPerKwh === null) return { now: priced(month), unity: null, raised: null };
  const isBelow = Math.cos(Math.atan(kvarhPerKwh)) < target - 1e-9;
  return {
    now: priced(month),
    unity: priced(monthAtPowerFactor(schedule, told, month, 1)),
    raised: isBelow ? priced(monthAtPowerFactor(schedule, told, month, target)) : null,
  };
}

/** Runs work whose refusals belong to a field of the form. */
function withFaults<Result>(
  work: () => Result,
  { fields, input }: { fields: ContractField[]; input: TryInput },
  month?: AssumedMonth,
): { result: Result } | { faults: Record<string, string> } {
  try {
    return { result: work() };
  } catch (error) {
    if (error instanceof ToldError) return { faults: { [keyOfTold(error.field)]: error.message } };
    if (!(error instanceof PriceError)) throw error;
    return { faults: { [keyOfPrice(error, fields, input, month)]: error.message } };
  }
}

const quickKeys: Record<string, string> = { energyKwh: 'kwh', peakKw: 'kw', energyKvarh: 'kvarh', powerFactor: 'pf' };
const keyOfTold = (field: string) => quickKeys[field] ?? `q.${field}`;

function keyOfPrice(
  { name, period }: PriceError,
  fields: ContractField[],
  input: TryInput,
  month: AssumedMonth | undefined,
): string {
  if (fields.some((field) => field.name === name)) return `c.${name}`;
  const asked = month?.asked.find(({ quantity }) => quantity.name === name);
  if (asked) return asked.quick ? keyOfTold(asked.quick) : `q.${name}`;
  if (name in input.q) return `q.${name}`;
  return period && name === 'PriceError' ? 'from' : 'form';
}
