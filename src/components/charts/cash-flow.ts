import { investmentMonths, type InvestmentYear } from '../../core/economics';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';

/** What one year or month brings and takes, major units; step 0 holds the work. */
export interface CashFlowStep {
  step: number;
  work: number;
  incentive: number;
  saving: number;
  upkeep: number;
  tax: number;
  net: number;
  cumulative: number;
}

export interface CashFlowData {
  currency: string;
  /** Year 0 first. */
  years: InvestmentYear[];
}

export type CashFlowSpan = 'years' | 'months';

/** Years or months of an investment as the picture takes them. */
export function stepsOf(years: InvestmentYear[], by: CashFlowSpan): CashFlowStep[] {
  if (by === 'years') return years.map(({ year, ...row }) => ({ step: year, ...row }));
  return investmentMonths(years).map(({ month, ...row }) => ({ step: month, ...row }));
}

export type PartKind = 'work' | 'incentive' | 'saving' | 'upkeep' | 'tax';
const signs: [PartKind, 1 | -1][] = [
  ['saving', 1],
  ['incentive', 1],
  ['work', -1],
  ['upkeep', -1],
  ['tax', -1],
];

/** Boxes of one bar: what comes in stacked upward from nought, what goes out downward. */
export function stackedParts(step: CashFlowStep): { kind: PartKind; from: number; to: number }[] {
  let up = 0;
  let down = 0;
  return signs.flatMap(([kind, sign]) => {
    const amount = sign * step[kind];
    if (Math.abs(amount) < 0.005) return [];
    const from = amount > 0 ? up : down;
    if (amount > 0) up += amount;
    else down += amount;
    return [{ kind, from, to: from + amount }];
  });
}

/** Kinds that occur, for the words on how to read the picture. */
const kindsOf = (steps: CashFlowStep[]) =>
  new Set(steps.flatMap((step) => stackedParts(step).map((part) => part.kind)));

const names: Record<PartKind, string> = {
  saving: 'Hatched: saved.',
  incentive: 'Dotted edge: the incentive.',
  work: 'Solid: the work.',
  upkeep: 'Grey: upkeep.',
  tax: 'Open: tax.',
};

/** How to read the bars: only what is in them. */
export function barsReading(steps: CashFlowStep[]): string {
  const kinds = kindsOf(steps);
  const said = signs.filter(([kind]) => kinds.has(kind)).map(([kind]) => names[kind]);
  return [...said, 'The stroke across: what remains.'].join(' ');
}

/** The same as a table, years or months, with the running total. */
export function cashFlowTable({ currency, years }: CashFlowData, by: CashFlowSpan): LedgerData {
  const money = { kind: 'number', decimals: 0, unit: currency } as const;
  const kinds = kindsOf(stepsOf(years, by));
  const columns: [PartKind, string][] = [
    ['work', 'Work'],
    ['incentive', 'Incentive'],
    ['saving', 'Saved'],
    ['upkeep', 'Upkeep'],
    ['tax', 'Tax'],
  ];
  const shown = columns.filter(([kind]) => kinds.has(kind));
  return {
    columns: [
      { key: 'step', head: by === 'years' ? 'Year' : 'Month', align: 'left' },
      ...shown.map(([key, head]) => ({ key, head, ...money })),
      { key: 'net', head: 'Remains', ...money, strong: true },
      { key: 'cumulative', head: 'So far', ...money, strong: true },
    ],
    rows: stepsOf(years, by).map((step) => ({
      id: String(step.step),
      cells: {
        step: formatNumber(step.step),
        ...Object.fromEntries(shown.map(([kind]) => [kind, signedPart(step, kind)])),
        net: step.net,
        cumulative: step.cumulative,
      },
    })),
  };
}

/** What goes out with a minus; nothing where there is none. */
function signedPart(step: CashFlowStep, kind: PartKind): number | null {
  const sign = signs.find(([one]) => one === kind)?.[1] ?? 1;
  return Math.abs(step[kind]) < 0.005 ? null : sign * step[kind];
}
