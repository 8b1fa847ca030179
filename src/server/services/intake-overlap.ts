import type { IntakeOverlap } from '../../schemas/overlap';
import type { Actor } from '../policies/actor';
import { openIntake } from './intake-guard';
import { readyToKeep } from './intake-keep';
import { billsOverlap } from './overlap-bills';
import { intervalsOverlap } from './overlap-intervals';

/**
 * What is kept and what a file would bring, side by side, before it is kept.
 *
 * @throws {ServiceError} 404 for those who may not know of the file, 409 or 422 where it cannot be kept as it stands
 */
export async function intakeOverlap(actor: Actor, id: number): Promise<IntakeOverlap> {
  const open = await openIntake(actor, id);
  const how = readyToKeep(open.intake);
  return open.intake.kind === 'intervals' ? intervalsOverlap(open, how) : billsOverlap(open, how);
}
