import { formatBillName } from '../../components/ui/format';
import type { FindingChangeView, FindingView } from '../../schemas/finding';
import type { Finding as PricedFinding } from '../../schemas/pricing';
import type { Finding } from '../models/Finding';
import type { FindingChange } from '../models/FindingChange';
import { movesFrom } from '../policies/finding';

interface About {
  names: Map<number, string>;
  /** Number by id of letter; null for one that did not go. */
  letters: Map<number, number | null>;
  changes: FindingChange[];
}

function presentChange(
  { id, createdAt, day, byId, fromState, toState, amountMinor, note }: FindingChange,
  names: About['names'],
): FindingChangeView {
  const by = byId === null ? 'the system' : (names.get(byId) ?? 'somebody who left');
  return { id, at: createdAt.toISOString(), day, by, from: fromState, to: toState, amountMinor, note };
}

/** A finding as priced with its row; null where the newest pricing finds it no more. */
export function presentFinding(
  row: Finding,
  priced: { finding: PricedFinding; billName: string } | null,
  { names, letters, changes }: About,
): FindingView {
  const { id, version, family, state, since, decidedMinor, refundedMinor, refundedOn, letterId } = row;
  const finding = priced?.finding;
  return {
    id,
    version,
    letter: finding?.letter ?? null,
    kind: finding?.kind ?? null,
    family,
    billId: finding?.billId ?? null,
    billName: priced?.billName ?? formatBillName({ from: row.periodFrom, to: row.periodTo }),
    from: row.periodFrom,
    to: row.periodTo,
    lineId: finding?.lineId ?? null,
    line: row.lineLabel,
    title: row.title,
    sentence: finding?.sentence ?? 'The newest pricing of the year finds it no more.',
    amountMinor: row.amountMinor,
    energy: finding?.energy ?? null,
    state,
    since,
    wasMinor: decidedMinor !== null && decidedMinor !== row.amountMinor ? decidedMinor : null,
    refunded: refundedMinor === null || refundedOn === null ? null : { amountMinor: refundedMinor, on: refundedOn },
    letterNumber: letterId === null ? null : (letters.get(letterId) ?? null),
    moves: movesFrom(state),
    changes: changes.map((change) => presentChange(change, names)),
  };
}
