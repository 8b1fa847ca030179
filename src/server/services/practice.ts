import { addDays, dayNumber } from '../../core/load';
import { mondayOf, type HourSums } from '../../schemas/hour';
import type { PracticeView, ProgressView, UtilisationView } from '../../schemas/practice';
import { forbidden, notFound } from '../errors';
import { HourEntry } from '../models/HourEntry';
import { Practice } from '../models/Practice';
import { Rate } from '../models/Rate';
import { User } from '../models/User';
import { isStaff, type Actor } from '../policies/actor';
import { canSeePractice } from '../policies/engagement';
import { listEngagements, type OpenEngagement } from './engagements';
import { amountMinorOf, rateInForce } from './rates';

const weeksShown = 8;

const nothing = (): HourSums => ({ minutes: 0, billableMinutes: 0, amountMinor: 0, unratedMinutes: 0 });

/** An entry with its worth: nought where it is not billable, null where no rate covers it. */
interface Priced {
  entry: HourEntry;
  amountMinor: number | null;
}

function priceEntry(entry: HourEntry, rates: Rate[], currency: string): Priced {
  if (!entry.billable) return { entry, amountMinor: 0 };
  const rate = rateInForce(rates, { ...entry.get(), currency });
  return { entry, amountMinor: rate && amountMinorOf(entry.minutes, rate.perHourMinor) };
}

function addTo(sums: HourSums, { entry, amountMinor }: Priced): void {
  sums.minutes += entry.minutes;
  if (!entry.billable) return;
  sums.billableMinutes += entry.minutes;
  if (amountMinor === null) sums.unratedMinutes += entry.minutes;
  else sums.amountMinor += amountMinor;
}

function progressOf(opened: OpenEngagement, priced: Priced[], users: Map<number, User>, today: string): ProgressView {
  const { engagement, client, site } = opened;
  const sums = nothing();
  const minutesBy = new Map<string, number>();
  for (const one of priced) {
    addTo(sums, one);
    const name = users.get(one.entry.userId)?.name ?? '';
    minutesBy.set(name, (minutesBy.get(name) ?? 0) + one.entry.minutes);
  }
  const oldest = priced.map(({ entry }) => entry.day).sort()[0];
  const { code, currency, budgetHours } = engagement;
  return {
    ...sums,
    code,
    currency,
    budgetHours,
    client: client.name,
    site: site.name,
    oldestDays: oldest ? dayNumber(today) - dayNumber(oldest) : null,
    budgetFraction: budgetHours ? sums.minutes / 60 / budgetHours : null,
    people: [...minutesBy]
      .map(([name, minutes]) => ({ name, minutes }))
      .sort((a, b) => b.minutes - a.minutes || a.name.localeCompare(b.name)),
  };
}

function utilisationOf(user: User, entries: HourEntry[], weeks: string[]): UtilisationView {
  const own = entries.filter((entry) => entry.userId === user.id);
  const byWeek = weeks.map((monday) => {
    const told = own.filter((entry) => entry.day >= monday && entry.day < addDays(monday, 7));
    return {
      minutes: told.reduce((sum, entry) => sum + entry.minutes, 0),
      billableMinutes: told.reduce((sum, entry) => sum + (entry.billable ? entry.minutes : 0), 0),
    };
  });
  const minutes = byWeek.reduce((sum, week) => sum + week.minutes, 0);
  const billableMinutes = byWeek.reduce((sum, week) => sum + week.billableMinutes, 0);
  return {
    userId: user.id,
    person: user.name,
    role: user.role as UtilisationView['role'],
    weeks: byWeek,
    minutes,
    billableMinutes,
    billableFraction: minutes > 0 ? billableMinutes / minutes : null,
  };
}

interface Grouped {
  currency: string;
  sums: HourSums;
}

function totalsBy(progress: ProgressView[]): PracticeView['totals'] {
  const groups: Grouped[] = [];
  for (const { currency, minutes, billableMinutes, amountMinor, unratedMinutes } of progress) {
    let group = groups.find((one) => one.currency === currency);
    if (!group) groups.push((group = { currency, sums: nothing() }));
    group.sums.minutes += minutes;
    group.sums.billableMinutes += billableMinutes;
    group.sums.amountMinor += amountMinor;
    group.sums.unratedMinutes += unratedMinutes;
  }
  return groups
    .map(({ currency, sums }) => ({ currency, ...sums }))
    .sort((a, b) => b.amountMinor - a.amountMinor || a.currency.localeCompare(b.currency));
}

function peopleOf(priced: (Priced & { currency: string })[], users: Map<number, User>): PracticeView['people'] {
  const rows = new Map<string, { user: User; currency: string; sums: HourSums }>();
  for (const one of priced) {
    const user = users.get(one.entry.userId);
    if (!user) continue;
    const key = `${user.id} ${one.currency}`;
    const row = rows.get(key) ?? { user, currency: one.currency, sums: nothing() };
    addTo(row.sums, one);
    rows.set(key, row);
  }
  return [...rows.values()]
    .map(({ user, currency, sums }) => ({ person: user.name, role: user.role, currency, ...sums }))
    .sort((a, b) => b.amountMinor - a.amountMinor || a.person.localeCompare(b.person));
}

/**
 * Work in progress and utilisation on a day. Nothing has been invoiced yet, so every hour told is work in progress.
 *
 * @throws {ServiceError} 404 to clients, 403 to consultants
 */
export async function practiceOn(actor: Actor, today: string): Promise<PracticeView> {
  if (!isStaff(actor)) throw notFound();
  if (!canSeePractice(actor)) throw forbidden('The practice’s money is seen by partners only.');
  const [practice, engagements, entries, rates, staff] = await Promise.all([
    Practice.findOne(),
    listEngagements(actor),
    HourEntry.findAll({ order: ['day'] }),
    Rate.findAll(),
    User.findAll({ where: { role: ['partner', 'consultant'] }, order: ['name'] }),
  ]);
  const users = new Map(staff.map((user) => [user.id, user]));
  const monday = mondayOf(today);
  const weeks = Array.from({ length: weeksShown }, (_, index) => addDays(monday, (index - weeksShown + 1) * 7));
  const priced = engagements.flatMap(({ engagement }) =>
    entries
      .filter((entry) => entry.engagementId === engagement.id)
      .map((entry) => ({ ...priceEntry(entry, rates, engagement.currency), currency: engagement.currency })),
  );
  const progress = engagements.map((opened) => {
    const own = priced.filter(({ entry }) => entry.engagementId === opened.engagement.id);
    return progressOf(opened, own, users, today);
  });
  const working = staff.filter((user) => !user.disabledAt || entries.some((entry) => entry.userId === user.id));
  return {
    name: practice?.name ?? 'The practice',
    totals: totalsBy(progress),
    progress: progress.sort((a, b) => b.amountMinor - a.amountMinor || a.code.localeCompare(b.code)),
    people: peopleOf(priced, users),
    weeks,
    utilisation: working.map((user) => utilisationOf(user, entries, weeks)),
  };
}
