import { formatMajor, formatNumber, formatPayback } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

/** One end of an input: its value in words, and what the plan is worth with it. */
export interface RankingEnd {
  words: string;
  npv: number;
  paybackYears: number | null;
}

/** What one input does to the result between the two values it lies between eight of ten times. */
export interface RankingRow {
  name: string;
  unit: string;
  low: RankingEnd;
  high: RankingEnd;
}

export interface RankingData {
  currency: string;
  /** Present value as reckoned, major units. */
  npv: number;
  paybackYears: number | null;
  /** The widest first. */
  rows: RankingRow[];
}

/** "49,000 to 74,000 USD". */
export const rangeWords = ({ low, high, unit }: RankingRow) => `${low.words} to ${high.words}\u00a0${unit}`;

/** "8 to 12 months", the shorter first; "12 months to never". */
export function paybackRangeWords({ low, high }: Pick<RankingRow, 'low' | 'high'>): string {
  const order = [low, high].map((end) => end.paybackYears).sort((a, b) => (a ?? Infinity) - (b ?? Infinity));
  const [first = null, second = null] = order;
  const [from, to] = [formatPayback(first), formatPayback(second)];
  if (from === to) return from;
  return first !== null && second !== null && first > 0
    ? `${formatNumber(Math.max(1, Math.round(first * 12)))} to ${to}`
    : `${from} to ${to}`;
}

/** The finding: what moves the result most, and whether it turns it. */
export function rankingFinding({ currency, rows }: RankingData): string {
  const [widest] = rows;
  if (!widest) return 'Nothing that is uncertain here moves the result.';
  const money = (amount: number) => formatMajor(amount, currency, { whole: true });
  const [least, most] = [widest.low.npv, widest.high.npv].sort((a, b) => a - b) as [number, number];
  return `${widest.name} moves the result most, from ${money(least)} to ${money(most)} in present value. ${turning(rows)}`;
}

/** Whether an input by itself turns a gain into a loss. */
function turning(rows: RankingRow[]): string {
  const losing = rows.filter(({ low, high }) => Math.min(low.npv, high.npv) <= 0);
  if (losing.length === 0) return 'None of them alone makes the plan a loss.';
  if (losing.every(({ low, high }) => Math.max(low.npv, high.npv) <= 0))
    return 'None of them alone makes the plan pay.';
  return `${losing[0]!.name} alone can make the plan a loss.`;
}

/** The same as a table. */
export function rankingTable({ currency, rows }: RankingData): LedgerData {
  const money = { kind: 'number', decimals: 0, unit: currency } as const;
  return {
    columns: [
      { key: 'name', head: 'What' },
      { key: 'unit', head: 'Unit', quiet: true },
      { key: 'low', head: 'From', align: 'right' },
      { key: 'high', head: 'To', align: 'right' },
      { key: 'npvLow', head: 'Worth, from', ...money },
      { key: 'npvHigh', head: 'Worth, to', ...money },
      { key: 'paybackLow', head: 'Paid back, from', align: 'right' },
      { key: 'paybackHigh', head: 'Paid back, to', align: 'right' },
    ],
    rows: rows.map(({ name, unit, low, high }) => ({
      id: name,
      cells: {
        name,
        unit,
        low: low.words,
        high: high.words,
        npvLow: low.npv,
        npvHigh: high.npv,
        paybackLow: formatPayback(low.paybackYears),
        paybackHigh: formatPayback(high.paybackYears),
      },
    })),
  };
}

/** The same for paper, in four columns: the paybacks, and the present values as one. */
export function rankingShort({ currency, rows }: RankingData): LedgerData {
  const worth = ({ low, high }: RankingRow) => {
    const [least, most] = [low.npv, high.npv].sort((a, b) => a - b) as [number, number];
    return `${formatNumber(least)} to ${formatNumber(most)}`;
  };
  return {
    columns: [
      { key: 'name', head: 'What', wrap: true },
      { key: 'range', head: 'From and to', align: 'right' },
      { key: 'payback', head: 'Paid back', align: 'right' },
      { key: 'worth', head: 'Worth today', unit: currency, align: 'right', strong: true },
    ],
    rows: rows.map((row) => ({
      id: row.name,
      cells: { name: row.name, range: rangeWords(row), payback: paybackRangeWords(row), worth: worth(row) },
    })),
  };
}
