import { minorUnitDecimals } from '../../core/units';
import type { RateChangeInput, RateInput, RateView } from '../../schemas/rate';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { forbidden, invalid, notFound, staleVersion } from '../errors';
import { Engagement } from '../models/Engagement';
import { Practice } from '../models/Practice';
import { Rate } from '../models/Rate';
import { User } from '../models/User';
import { isStaff, type Actor } from '../policies/actor';
import { canManagePeople } from '../policies/engagement';
import { canSeeRate } from '../policies/people';
import { presentRate } from '../presenters/rate';

/** Work whose rate is asked for. */
export interface RatedWork {
  userId: number;
  engagementId: number;
  day: string;
  currency: string;
}

/**
 * The rate in force on the day of the work: the latest of the engagement's own rates for the person that has begun,
 * else the latest of their general ones. Null where none has begun in the engagement's currency.
 */
export function rateInForce(rates: Rate[], work: RatedWork): Rate | null {
  const begun = rates
    .filter((rate) => rate.userId === work.userId && rate.currency === work.currency && rate.from <= work.day)
    .sort((a, b) => b.from.localeCompare(a.from));
  const own = begun.find((rate) => rate.engagementId === work.engagementId);
  return own ?? begun.find((rate) => rate.engagementId === null) ?? null;
}

/** Worth of an entry in minor units, rounded half up to the minor unit. */
export const amountMinorOf = (minutes: number, perHourMinor: number) => Math.floor((minutes * perHourMinor) / 60 + 0.5);

/** Currency of the practice. */
export async function practiceCurrency(): Promise<string> {
  return (await Practice.findOne())?.currency ?? 'USD';
}

/** The rates of a person, newest first. @throws {ServiceError} 404 for the rates of others, unless a partner asks */
export async function listRates(actor: Actor, userId: number): Promise<RateView[]> {
  if (!canSeeRate(actor, { id: userId })) throw notFound();
  const rates = await Rate.findAll({ where: { userId }, order: [['from', 'DESC']] });
  const codes = new Map((await Engagement.findAll()).map((engagement) => [engagement.id, engagement.code]));
  return rates.map((rate) => presentRate(rate, rates, codes));
}

/** @throws {ServiceError} 404 to clients, 403 to consultants */
export function authorizeRates(actor: Actor): void {
  if (!isStaff(actor)) throw notFound();
  if (!canManagePeople(actor)) throw forbidden('Rates are set by partners.');
}

async function refuseTwin(rate: { userId: number; engagementId: number | null; from: string }, id?: number) {
  const twin = await Rate.findOne({
    where: { userId: rate.userId, engagementId: rate.engagementId, from: rate.from },
  });
  if (twin && twin.id !== id) {
    throw invalid('A rate begins on this day already.', {
      from: ['A rate begins on this day already. Change that one.'],
    });
  }
}

const toMinor = (perHour: number, currency: string) => Math.round(perHour * 10 ** minorUnitDecimals(currency));

async function viewOf(actor: Actor, rate: Rate): Promise<RateView> {
  const views = await listRates(actor, rate.userId);
  return views.find((view) => view.id === rate.id) as RateView;
}

/** Sets a rate from a day on. @throws {ServiceError} 403; 422 by field */
export async function setRate(actor: Actor, input: RateInput): Promise<RateView> {
  authorizeRates(actor);
  const user = await User.findByPk(input.userId);
  if (!user || user.role === 'client') throw invalid('Choose a person of the practice.', { userId: ['Nobody here.'] });
  const engagement = input.engagementId === null ? null : await Engagement.findByPk(input.engagementId);
  if (input.engagementId !== null && !engagement) {
    throw invalid('Choose an engagement.', { engagementId: ['There is no such engagement.'] });
  }
  const currency = engagement?.currency ?? (await practiceCurrency());
  const { userId, engagementId, from } = input;
  const perHourMinor = toMinor(input.perHour, currency);
  const rate = await inTx(async () => {
    await refuseTwin(input);
    return Rate.create({ userId, engagementId, from, currency, perHourMinor });
  });
  return viewOf(actor, rate);
}

/** Opens a rate for change. @throws {ServiceError} 403, 404 */
export async function openRate(actor: Actor, id: number): Promise<Rate> {
  authorizeRates(actor);
  const rate = await Rate.findByPk(id);
  if (!rate) throw notFound();
  return rate;
}

/** Corrects a rate. @throws {ServiceError} 409 where it was changed meanwhile; 422 by field */
export async function changeRate(actor: Actor, rate: Rate, input: RateChangeInput): Promise<RateView> {
  const { version, perHour, from } = input;
  await inTx(async () => {
    await refuseStale(rate, version, { perHour, from });
    await refuseTwin({ userId: rate.userId, engagementId: rate.engagementId, from }, rate.id);
    await rate.update({ perHourMinor: toMinor(perHour, rate.currency), from });
  });
  return viewOf(actor, rate);
}

/** Removes a rate; the trail keeps it. @throws {ServiceError} 409 where it was changed meanwhile */
export async function removeRate(rate: Rate, version: number): Promise<void> {
  await inTx(async () => {
    await refuseStale(rate, version, null);
    await rate.destroy();
  });
}

/** Refuses a change of a rate that somebody changed in between. Call it inside inTx. */
async function refuseStale(rate: Rate, version: number, mine: unknown): Promise<void> {
  await freshen(rate);
  if (rate.version === version) return;
  const perHour = rate.perHourMinor / 10 ** minorUnitDecimals(rate.currency);
  throw staleVersion('This rate', mine, { perHour, from: rate.from, version: rate.version });
}
