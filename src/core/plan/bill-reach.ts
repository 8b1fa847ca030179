import type { Spans } from './types';

/** Which bills the settings of each span move. */
export interface BillReach {
  /** Per span: bills some of whose intervals lie in it. */
  ofSpan: number[][];
  /** A bill may look back on those before it: ratchets, streaks. */
  looksBack: boolean;
}

/**
 * Bills that each span lies in.
 *
 * @param spans  Absent: the whole year is one.
 * @param bills  First interval of each and the one behind its last.
 * @param looksBack  Whether a bill may hang on those before it.
 */
export function billReach(
  spans: Spans | undefined,
  bills: readonly { first: number; end: number }[],
  looksBack: boolean,
): BillReach {
  const ofSpan = Array.from({ length: spans?.count ?? 1 }, () => new Set<number>());
  bills.forEach(({ first, end }, bill) => {
    if (!spans) ofSpan[0]!.add(bill);
    else for (let i = first; i < end; i++) ofSpan[spans.index[i]!]!.add(bill);
  });
  return { ofSpan: ofSpan.map((own) => [...own].sort((a, b) => a - b)), looksBack };
}

/** Bills that each span's settings may move, look-backs included. */
export function movedBills({ ofSpan, looksBack }: BillReach, count: number): number[][] {
  if (!looksBack) return ofSpan;
  return ofSpan.map((own) => {
    const first = Math.min(count, ...own);
    return Array.from({ length: count - first }, (_, k) => first + k);
  });
}
