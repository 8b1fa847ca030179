import Holidays from 'date-holidays';
import type { HolidayRule } from '../model';

const knownYears = new Map<string, ReadonlySet<string>>();
const knownRules = new WeakMap<HolidayRule, Map<number, ReadonlySet<string>>>();

/**
 * What is wrong with a calendar's name, or nothing.
 *
 * @param calendar  Country, or country-state(-region), by the codes of the `date-holidays` package, which itself falls back in silence
 */
export function problemWithCalendar(calendar: string): string | undefined {
  const [country = '', state, region, more] = calendar.split('-');
  const all = new Holidays();
  const has = (codes: object | undefined, code: string): boolean => codes !== undefined && Object.hasOwn(codes, code);
  if (more !== undefined || !has(all.getCountries('en'), country))
    return `no holiday calendar is called "${calendar}".`;
  if (state === undefined) return undefined;
  if (!has(all.getStates(country, 'en'), state)) return `the holiday calendar of ${country} has no part "${state}".`;
  if (region === undefined || has(all.getRegions(country, state, 'en'), region)) return undefined;
  return `the holiday calendar of ${country}-${state} has no part "${region}".`;
}

/** Codes of the countries there are calendars for. */
export function calendarCountries(): string[] {
  return Object.keys(new Holidays().getCountries('en'));
}

/** Holidays of a year as local dates: days of type `public`, substitute days included, with days added and dropped. */
export function holidaysOfYear(rule: HolidayRule, year: number): ReadonlySet<string> {
  let years = knownRules.get(rule);
  if (!years) knownRules.set(rule, (years = new Map()));
  let dates = years.get(year);
  if (!dates) years.set(year, (dates = workOutYear(rule, year)));
  return dates;
}

function workOutYear(rule: HolidayRule, year: number): ReadonlySet<string> {
  const dates = new Set(rule.calendar === undefined ? [] : publicDays(rule.calendar, year));
  for (const date of rule.drop) dates.delete(date);
  for (const date of rule.add) if (date.startsWith(`${year}-`)) dates.add(date);
  return dates;
}

function publicDays(calendar: string, year: number): ReadonlySet<string> {
  const key = `${calendar} ${year}`;
  let days = knownYears.get(key);
  if (!days) {
    const [country = '', state, region] = calendar.split('-');
    const source =
      state === undefined
        ? new Holidays(country)
        : region === undefined
          ? new Holidays(country, state)
          : new Holidays(country, state, region);
    days = new Set(
      source
        .getHolidays(year, 'en')
        .filter((day) => day.type === 'public')
        .map((day) => day.date.slice(0, 10)),
    );
    knownYears.set(key, days);
  }
  return days;
}
