import { addDays, dayNumber, localDateOf } from '../../core/load';
import {
  formatCount,
  formatDateTime,
  formatList,
  formatMonth,
  formatNumber,
  formatPeriod,
} from '../../components/ui/format';
import type { BillView } from '../../schemas/bill';
import type { IntervalsStation, MonthOfLoad, ReadingGap } from '../../schemas/intervals';
import type { MotorView } from '../../schemas/motor';
import type { DraftItem } from '../../schemas/request';

interface Year {
  from: string;
  to: string;
}

/** Bills read on other days than the year's own may fall short of it by some days at either end. */
const endsMayLackDays = 15;
const hourMs = 3_600_000;
const dayMs = 24 * hourMs;
/** More gaps than these become one line: nobody answers a list of thirty. */
const mostGaps = 5;

/** A thing that is missing, whether or not it has been asked for. */
export type Missing = Omit<DraftItem, 'askedIn'>;

const item = (given: Pick<Missing, 'kind' | 'words' | 'why'> & Partial<Missing>): Missing => ({
  from: null,
  to: null,
  motorId: null,
  ...given,
});

/** Stretches of the year that no bill covers; short ones at its ends are left out. */
export function uncoveredStretches(bills: Pick<BillView, 'from' | 'to'>[], year: Year): Year[] {
  const stretches: Year[] = [];
  let reached = year.from;
  for (const { from, to } of [...bills].sort((a, b) => a.from.localeCompare(b.from))) {
    if (from > reached && from > year.from) stretches.push({ from: reached, to: from < year.to ? from : year.to });
    if (to > reached) reached = to;
    if (reached >= year.to) break;
  }
  if (reached < year.to) stretches.push({ from: reached, to: year.to });
  return stretches.filter(({ from, to }) => {
    const days = dayNumber(to) - dayNumber(from);
    const isAtEnd = from === year.from || to === year.to;
    return days > 0 && (!isAtEnd || days > endsMayLackDays);
  });
}

/** What of the year's bills is missing. */
export function missingBills(bills: Pick<BillView, 'from' | 'to'>[], year: Year): Missing[] {
  return uncoveredStretches(bills, year).map(({ from, to }) => {
    const days = dayNumber(to) - dayNumber(from);
    const whole = from === year.from && to === year.to;
    return item({
      kind: 'bills',
      words: whole
        ? 'The power bills of the whole year, all pages of each'
        : `The power ${days > 45 ? 'bills' : 'bill'} for these days, all pages`,
      from,
      to,
      why: whole ? 'No bill of the year is kept.' : `No bill covers ${formatPeriod(from, to, { year: true })}.`,
    });
  });
}

const localPeriod = ({ fromMs, toMs }: Pick<ReadingGap, 'fromMs' | 'toMs'>, timeZone: string) => ({
  from: localDateOf(fromMs, timeZone),
  to: addDays(localDateOf(toMs - 1, timeZone), 1),
});

function missingGaps(gaps: ReadingGap[], gapCount: number, timeZone: string): Missing[] {
  const long = gaps.filter(({ fromMs, toMs }) => toMs - fromMs >= dayMs);
  const own = [...long].sort((a, b) => b.toMs - b.fromMs - (a.toMs - a.fromMs)).slice(0, mostGaps);
  const items = [...own]
    .sort((a, b) => a.fromMs - b.fromMs)
    .map((gap) =>
      item({
        kind: 'intervals',
        words: 'The meter’s readings for these days, or why there are none',
        ...localPeriod(gap, timeZone),
        why: `Readings are missing from ${formatDateTime(gap.fromMs, timeZone)} to ${formatDateTime(gap.toMs, timeZone)}.`,
      }),
    );
  const left = gaps.filter((gap) => !own.includes(gap));
  const leftCount = gapCount - own.length;
  if (leftCount === 0 || left.every(({ fromMs, toMs }) => toMs - fromMs < hourMs)) return items;
  const named = left.slice(0, 3).map(({ fromMs }) => formatDateTime(fromMs, timeZone));
  const rest = leftCount - named.length;
  const places = [...named, ...(rest > 0 ? [`${formatNumber(rest)} more`] : [])];
  const words = `The readings missing in ${formatCount(leftCount, 'shorter gap')}: ${formatList(places)}`;
  return [...items, item({ kind: 'intervals', words, why: 'These gaps are shorter than a day, or many.' })];
}

/** Months with active energy but no reactive energy; all of the year where the meter's file has no such column. */
function missingReactive(months: MonthOfLoad[], year: Year): Missing[] {
  const without = months.filter(
    ({ kwh, kvarhLagging, kvarhLeading }) => kwh !== null && kvarhLagging === null && kvarhLeading === null,
  );
  if (without.length === 0) return [];
  const whole = without.length === months.length;
  return [
    item({
      kind: 'intervals',
      words: 'Reactive energy (kvarh) of the same meter in the same steps, lagging and leading apart if it counts both',
      ...(whole ? year : {}),
      why: whole
        ? 'The files hold no reactive energy at all.'
        : `There is no reactive energy for ${formatList(without.slice(0, 6).map(({ from }) => formatMonth(from)))}.`,
    }),
  ];
}

/** What of the year's readings is missing. */
export function missingIntervals(
  station: Pick<IntervalsStation, 'year' | 'timeZone'>,
  meter: string,
  year: Year,
): Missing[] {
  if (!station.year) {
    return [
      item({
        kind: 'intervals',
        words: `The interval readings of meter ${meter} for the whole year, 15 minutes or finer: active energy (kWh), and reactive energy (kvarh) if the meter counts it`,
        ...year,
        why: 'No readings of the year are kept.',
      }),
    ];
  }
  const { gaps, gapCount, months } = station.year;
  return [...missingGaps(gaps, gapCount, station.timeZone), ...missingReactive(months, year)];
}

type Plate = Pick<MotorView, 'id' | 'name' | 'drives' | 'assumed'>;

/** What of the motors' plates is missing: all of them, or the values that were assumed. */
export function missingPlates(motors: Plate[]): Missing[] {
  if (motors.length === 0) {
    return [
      item({
        kind: 'nameplate',
        words:
          'A photo of the nameplate of every synchronous motor, and of its exciter: straight on, every figure legible',
        why: 'No motor is entered.',
      }),
    ];
  }
  return motors
    .filter(({ assumed }) => assumed.length > 0)
    .map(({ id, name, drives, assumed }) => {
      const values = formatList([...new Set(assumed.map(({ label }) => label))]);
      return item({
        kind: 'nameplate',
        words: `Photos of the nameplates of ${name}${drives ? `, ${drives.toLowerCase()},` : ''} and its exciter, and its data sheet if there is one`,
        motorId: id,
        why: `Assumed so far: ${values}.`,
      });
    });
}
