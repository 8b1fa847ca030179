import type { FindingState } from '../../schemas/finding';
import type { Actor, EngagementScope } from './actor';
import { canWorkOn } from './engagement';

const moves: Record<FindingState, FindingState[]> = {
  open: ['raised', 'dropped'],
  raised: ['agreed', 'refunded', 'dropped', 'open'],
  agreed: ['refunded', 'dropped', 'raised'],
  refunded: ['agreed'],
  dropped: ['open'],
};

/** May the person decide about findings and write to the utility? Who works on the engagement; never the client. */
export const canDecideFindings = (actor: Actor, engagement: EngagementScope) => canWorkOn(actor, engagement);

/** States a finding may go to from one; the second of each pair back is for what was entered wrongly. */
export const movesFrom = (state: FindingState): FindingState[] => moves[state];

/** Does a finding in this state still wait for the practice? What is put to the utility, settled or dropped does not. */
export const isUnhandled = (state: FindingState) => state === 'open';
