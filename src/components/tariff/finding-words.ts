import type { FindingChangeView, FindingState, FindingView } from '../../schemas/finding';
import { formatCount, formatDate, formatDay, formatMoney } from '../ui/format';
import type { MarkProps } from '../ui/Mark';

/** States as the page words them. */
export const stateWords: Record<FindingState, string> = {
  open: 'Open',
  raised: 'Put to the utility',
  agreed: 'Agreed',
  refunded: 'Refunded',
  dropped: 'Dropped',
};

/** What one does to bring a finding into a state, by the one it is in. */
export function moveWords(from: FindingState, to: FindingState): string {
  if (to === 'open') return from === 'dropped' ? 'Take it up again' : 'Take it back, it was not raised';
  if (to === 'raised') return from === 'agreed' ? 'It has not agreed after all' : 'Put to the utility, otherwise';
  if (to === 'agreed') return from === 'refunded' ? 'Not refunded yet after all' : 'The utility agrees';
  return to === 'refunded' ? 'The utility has refunded it' : 'Drop it';
}

const kinds: Record<FindingState, Pick<MarkProps, 'kind' | 'tone'>> = {
  open: { kind: 'hollow', tone: 'fault' },
  raised: { kind: 'half', tone: 'caution' },
  agreed: { kind: 'half', tone: 'ink' },
  refunded: { kind: 'filled', tone: 'ink' },
  dropped: { kind: 'filled', tone: 'quiet' },
};

const daysBetween = (from: string, to: string) =>
  Math.max(0, Math.round((Date.parse(to) - Date.parse(from)) / 86_400_000));

/** How a finding stands, as a mark with its word: "Open, 9 days", "Put to the utility, 18 Nov". */
export function stateMark({ state, since, refunded }: FindingView, today: string, currency: string): MarkProps {
  const days = daysBetween(since, today);
  const word =
    state === 'open'
      ? `Open, ${days === 0 ? 'since today' : formatCount(days, 'day')}`
      : state === 'refunded' && refunded
        ? `Refunded ${formatMoney(refunded.amountMinor, currency)}, ${formatDay(since)}`
        : `${stateWords[state]}, ${formatDay(since)}`;
  return { ...kinds[state], word };
}

/** That the amount is another than when people decided on it. */
export function wasWords({ wasMinor, state }: FindingView, currency: string): string | null {
  if (wasMinor === null) return null;
  return `was ${formatMoney(wasMinor, currency)} when ${state === 'dropped' ? 'dropped' : 'raised'}`;
}

/** One step of the history in words. */
export function changeWords({ from, to, day, amountMinor }: FindingChangeView, currency: string): string {
  if (to === null) return 'Note';
  const amount = to === 'refunded' && amountMinor !== null ? ` ${formatMoney(amountMinor, currency)}` : '';
  const back = to === 'open' ? (from === 'dropped' ? 'Taken up again' : 'Taken back') : stateWords[to];
  return `${back}${amount}, ${formatDate(day)}`;
}

/** The newest words anybody wrote about a finding. */
export const newestNote = ({ changes }: FindingView) => changes.findLast(({ note }) => note !== null)?.note ?? null;
