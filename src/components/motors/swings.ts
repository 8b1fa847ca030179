import type { AssumedSaving } from '../../schemas/assumed-saving';
import type { AssumedValue } from '../../schemas/motor';
import { formatAmount, formatMoney, formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { fit } from './words';

/** An assumed value with what its range does to the kvar in hand and to the saving. */
export interface Swing {
  assumed: AssumedValue;
  /** Change of the saving at the range's ends, in minor units; null while it is not worked out or the plan cannot run there. */
  savingEffect: [number, number] | null;
  /** Greatest change from the answer, as a share of it. */
  kvarShare: number;
  savingShare: number;
}

const greatest = (effect: [number, number] | null) => (effect ? Math.max(...effect.map(Math.abs)) : 0);
const shareOf = (change: number, answer: number | null) => (answer ? change / Math.abs(answer) : 0);

/** Every assumed value, the one that moves the answer most first: the saving where it is worked out, else the kvar. */
export function swingsOf(assumed: AssumedValue[], saving: AssumedSaving | null): Swing[] {
  const all = assumed.map((one): Swing => {
    const found = saving?.swings.find(({ motorId, field }) => motorId === one.motorId && field === one.field);
    const { atLowMinor = null, atHighMinor = null } = found ?? {};
    const savingEffect: Swing['savingEffect'] =
      saving && atLowMinor !== null && atHighMinor !== null
        ? [atLowMinor - saving.savingMinor, atHighMinor - saving.savingMinor]
        : null;
    return {
      assumed: one,
      savingEffect,
      kvarShare: shareOf(greatest(one.kvarEffect), one.kvarMost),
      savingShare: saving ? shareOf(greatest(savingEffect), saving.savingMinor) : 0,
    };
  });
  return all.sort((a, b) => b.savingShare - a.savingShare || b.kvarShare - a.kvarShare);
}

/** Below this share a value moves nothing that a person would see. */
const leastShare = 0.005;
const percentWords = (share: number) => formatQuantity(100 * share, '%', { upTo: 1 });

/** What to measure first, in one sentence. */
export function measureFirst(swings: Swing[], saving: AssumedSaving | null): string {
  if (swings.length === 0) return 'Nothing is assumed: every figure stands on plates and data sheets.';
  const byKvar = [...swings].sort((a, b) => b.kvarShare - a.kvarShare)[0]!;
  const [first] = swings;
  const named = ({ assumed }: Swing) => `${assumed.label} of ${assumed.motorName}`;
  const most = (one: Swing) => `what ${one.assumed.motorName} may deliver by ${percentWords(one.kvarShare)}`;
  if (!saving) {
    return byKvar.kvarShare < leastShare
      ? 'No assumed value moves the kvar in hand by more than half a per cent: the rated power factor decides.'
      : `Measure ${named(byKvar)} first: it moves ${most(byKvar)}.`;
  }
  if (!first || first.savingShare < leastShare) {
    const kvar =
      byKvar.kvarShare < leastShare
        ? ''
        : ` Most of the kvar hangs on ${named(byKvar)}, ${percentWords(byKvar.kvarShare)}.`;
    return `No assumed value moves the saving of ${saving.planName} by more than half a per cent.${kvar}`;
  }
  const money = formatMoney(greatest(first.savingEffect), saving.currency, { whole: true });
  return `Measure ${named(first)} first: it moves the saving of ${saving.planName} by ${percentWords(first.savingShare)}, ${money} a year, and ${most(first)}.`;
}

/** An assumed value with its range: "Xq of M-1, 0.60 to 0.90". */
export function rangeWords(assumed: AssumedValue): string {
  const [low, high] = assumed.range ?? [assumed.value, assumed.value];
  const digits = fit(high);
  const unit = assumed.unit && assumed.unit !== 'pu' ? ` ${assumed.unit}` : '';
  return `${formatNumber(low, { decimals: digits })} to ${formatNumber(high, { decimals: digits })}${unit}`;
}

const changeWords = (effect: [number, number] | null, words: (change: number) => string) =>
  effect ? `${words(effect[0])}, ${words(effect[1])}` : 'not admissible';

/** The values that matter, one a line: those that move kvar or saving visibly. */
export function swingsTable(swings: Swing[], saving: AssumedSaving | null): LedgerData {
  const seen = swings.filter((one) => one.kvarShare >= leastShare / 5 || one.savingShare >= leastShare / 5);
  return {
    columns: [
      { key: 'value', head: 'Assumed value' },
      { key: 'range', head: 'Typical range', align: 'right', wrap: true },
      { key: 'kvar', head: 'kvar in hand, at its ends', unit: 'kvar', align: 'right', wrap: true },
      ...(saving
        ? [
            {
              key: 'saving',
              head: `Saving of ${saving.planName}, at its ends`,
              unit: saving.currency,
              align: 'right' as const,
              wrap: true,
            },
            { key: 'share', head: 'Moves the saving', unit: '%', kind: 'number' as const, decimals: 1, strong: true },
          ]
        : [{ key: 'share', head: 'Moves the kvar', unit: '%', kind: 'number' as const, decimals: 1, strong: true }]),
    ],
    rows: seen.map((one) => ({
      id: `${one.assumed.motorId} ${one.assumed.field}`,
      cells: {
        value: { value: `${one.assumed.label} of ${one.assumed.motorName}`, assumed: true },
        range: rangeWords(one.assumed),
        kvar: changeWords(one.assumed.kvarEffect, (change) => formatNumber(change, { signed: true })),
        share: 100 * (saving ? one.savingShare : one.kvarShare),
        ...(saving && {
          saving: changeWords(one.savingEffect, (change) =>
            formatAmount(change, saving.currency, { signed: true, whole: true }),
          ),
        }),
      },
    })),
  };
}
