import type { Trace, TracePoint } from '../../core/intake';
import { conflict, invalid } from '../errors';
import type { Actor } from '../policies/actor';
import { openIntake } from './intake-guard';
import { traceInFile } from './intake-read';

/**
 * Where in its file a value stands: sheet, rows and cells, found by reading the original again as it was matched.
 *
 * @throws {ServiceError} 404 to those who may not know of it, 409 where it cannot be read, 422 where it holds no such value
 */
export async function traceIntake(actor: Actor, id: number, at: TracePoint): Promise<Trace> {
  const { intake } = await openIntake(actor, id);
  const stored = intake.preview;
  if (!stored || stored.preview.problems.length > 0)
    throw conflict(`${intake.fileName} cannot be read as it is matched, so nothing is traced to it.`);
  if ('ms' in at !== (intake.kind === 'intervals')) {
    throw invalid(
      intake.kind === 'intervals'
        ? 'Say which interval is traced: its beginning as ms.'
        : 'Say which bill is traced: its first day as from.',
    );
  }
  return traceInFile(intake, { timeZone: stored.timeZone, columnMap: stored.preview.columnMap }, at);
}
