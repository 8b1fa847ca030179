import type { TodayView, WaitingView } from '../../schemas/today';
import { capital, formatCount, formatDate, formatMoney, formatSpelled } from '../ui/format';

const things = (count: number) => `${formatSpelled(count)} ${count === 1 ? 'thing waits' : 'things wait'}`;

const lower = (text: string) => text.charAt(0).toLowerCase() + text.slice(1);

/** The finding of the page: what is overdue, else what money waits, else what waits longest. */
export function todayHeading({ waiting, engagements }: TodayView): string {
  const own = waiting.filter((row) => row.group !== 'others');
  const money = own.find((row) => row.group !== 'overdue' && row.stake && 'amountMinor' in row.stake);
  const first = own[0]?.group === 'overdue' ? own[0] : (money ?? own[0]);
  if (!first) {
    return engagements.length > 0
      ? 'Nothing waits for you.'
      : 'No engagement is under way. Begin one, and its work shows here.';
  }
  const rest = own.length - 1;
  const others =
    rest === 0 ? '' : `; ${formatSpelled(rest)} more ${rest === 1 ? 'thing waits' : 'things wait'} for you`;
  const firm = first.where.includes(', ') ? `${first.where.split(', ')[0]}: ${lower(first.title)}` : first.title;
  return `${firm}${stakeWords(first)}${lateWords(first)}${others}.`;
}

function stakeWords({ stake }: WaitingView): string {
  if (!stake) return '';
  if ('amountMinor' in stake) return `, ${formatMoney(stake.amountMinor, stake.currency)} ${stake.note}`;
  return /^\d+(,\d{3})*/.test(stake.text) && !/^\d{4}-/.test(stake.text) ? `, ${stake.text} ${stake.note}` : '';
}

function lateWords(row: WaitingView): string {
  if (row.dateIs === 'since') return '';
  if (row.group !== 'overdue') return ` on ${formatDate(row.date)}`;
  return row.days === 0 ? ', due today' : `: ${formatCount(row.days, 'day')} late`;
}

/** The line below: the day, how many wait, how many are with others. */
export function todayLead({ waiting, date }: TodayView, week: number, weekday: string): string {
  const own = waiting.filter((row) => row.group !== 'others').length;
  const overdue = waiting.filter((row) => row.group === 'overdue').length;
  const others = waiting.length - own;
  const parts = [
    own === 0 ? 'nothing waits for you' : `${things(own)} for you`,
    overdue > 0 && `${formatSpelled(overdue)} of them overdue`,
  ].filter(Boolean);
  const tail = others > 0 ? `; ${formatSpelled(others)} more ${others === 1 ? 'is' : 'are'} with others` : '';
  return `${weekday} ${formatDate(date)}, week ${week}. ${capital(parts.join(', '))}${tail}.`;
}

export const groupWords: Record<WaitingView['group'], string> = {
  overdue: 'Overdue',
  yours: 'Yours',
  others: 'With others',
};

/** Beneath the date: how late, or how long it waits. */
export function daysWords(row: WaitingView): string {
  if (row.dateIs === 'due') {
    if (row.group === 'overdue') return row.days === 0 ? 'due today' : `${formatCount(row.days, 'day')} late`;
    return 'due';
  }
  return row.days === 0 ? 'today' : formatCount(row.days, 'day');
}
