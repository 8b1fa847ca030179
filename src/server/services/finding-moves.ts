import { toMinorUnits } from '../../core/units';
import type { FindingNoteInput, FindingState, MoveFindingInput } from '../../schemas/finding';
import { today } from '../clock';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound, staleVersion } from '../errors';
import { Finding } from '../models/Finding';
import { FindingChange } from '../models/FindingChange';
import type { Actor } from '../policies/actor';
import { movesFrom } from '../policies/finding';
import { openEngagementById, type OpenEngagement } from './engagements';

/** A finding's row with its engagement. */
export interface OpenFinding {
  row: Finding;
  opened: OpenEngagement;
}

/** A finding for who works on its engagement. @throws {ServiceError} 404 for everybody else */
export async function openFinding(actor: Actor, id: number): Promise<OpenFinding> {
  const row = await Finding.findByPk(id);
  if (!row) throw notFound();
  return { row, opened: await openEngagementById(actor, row.engagementId) };
}

export const stateWords: Record<FindingState, string> = {
  open: 'open',
  raised: 'put to the utility',
  agreed: 'agreed by the utility',
  refunded: 'refunded',
  dropped: 'dropped',
};

/** One step as it is kept. `amountMinor` is what was refunded; of other steps the finding's own amount is kept. */
export interface Step {
  to: FindingState;
  day: string;
  amountMinor: number | null;
  note: string | null;
  letterId?: number;
}

/** Takes a finding one step on and writes its history. Call it inside inTx, the row read there, the step allowed. */
export async function takeStep(actor: Actor, row: Finding, step: Step): Promise<void> {
  const { to, day, note } = step;
  const refunds = to === 'refunded';
  const from = row.state;
  await row.update({
    state: to,
    since: day,
    decidedMinor: to === 'open' ? null : (row.decidedMinor ?? row.amountMinor),
    refundedMinor: refunds ? step.amountMinor : null,
    refundedOn: refunds ? day : null,
    letterId: to === 'open' ? null : (step.letterId ?? row.letterId),
  });
  await FindingChange.create({
    findingId: row.id,
    byId: actor.id,
    fromState: from,
    toState: to,
    amountMinor: refunds ? step.amountMinor : row.amountMinor,
    day,
    note: note || null,
  });
}

function refuseForbidden({ state }: Finding, to: FindingState): void {
  if (movesFrom(state).includes(to)) return;
  const ways = movesFrom(state).map((one) => stateWords[one]);
  throw conflict(
    `This finding is ${stateWords[state]}; from there it goes to: ${ways.join(', ')}. Load the page again.`,
  );
}

/**
 * Moves a finding to another state.
 *
 * @throws {ServiceError} 409 where it was changed meanwhile or may not go there, 422 for a day to come
 */
export async function moveFinding(actor: Actor, { row, opened }: OpenFinding, input: MoveFindingInput): Promise<void> {
  if (input.day > today()) {
    throw invalid('The day lies ahead.', { day: ['Write the day it happened; it cannot lie ahead.'] });
  }
  const { to, day, note, amount } = input;
  const amountMinor = to === 'refunded' && amount !== null ? toMinorUnits(amount, opened.engagement.currency) : null;
  await inTx(async () => {
    await freshen(row);
    if (row.version !== input.version) {
      throw staleVersion(
        'This finding',
        { to, day, amount, note },
        {
          to: row.state,
          day: row.since,
          version: row.version,
          amountMinor: row.amountMinor,
        },
      );
    }
    refuseForbidden(row, to);
    await takeStep(actor, row, { to, day, amountMinor, note });
  });
}

/** Adds a note to a finding; the client never sees it. */
export async function noteFinding(actor: Actor, { row }: OpenFinding, { note }: FindingNoteInput): Promise<void> {
  await inTx(() =>
    FindingChange.create({
      findingId: row.id,
      byId: actor.id,
      fromState: null,
      toState: null,
      amountMinor: null,
      day: today(),
      note,
    }),
  );
}
