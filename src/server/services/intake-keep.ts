import { toConfirm, type IntakeView, type OverlapChoice } from '../../schemas/intake';
import type { IntakePicture } from '../../schemas/intervals';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound } from '../errors';
import type { Intake } from '../models/Intake';
import { ReadingBlock } from '../models/ReadingBlock';
import type { Actor } from '../policies/actor';
import { refreshFills } from './gap-fills';
import { present } from './intake';
import { meterOf, openIntake, openIntakeForChange } from './intake-guard';
import { readIntervalFile, type HowToRead } from './intake-read';
import { assertNotReading } from './intake-reading';
import { keepBills, takeBillsBack } from './keep-bills';
import { keepIntervals } from './keep-intervals';
import { daysOf } from './load-days';
import { loadFindings } from './load-findings';

/**
 * Keeps what a file holds: readings at the engagement's meter, or bills. All of it or nothing.
 *
 * @param overlap  Which of the two stands where the file overlaps what is kept
 * @throws {ServiceError} 422 where the map still has problems or waits for a word, 409 with the two side by side where it
 *   overlaps what is kept and nothing was chosen
 */
export async function keepIntake(
  actor: Actor,
  id: number,
  version: number,
  overlap?: OverlapChoice,
): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, version);
  const how = readyToKeep(open.intake);
  if (open.intake.kind === 'intervals') await keepIntervals(open, how, overlap);
  else await keepBills(open, how, overlap);
  return present(open);
}

/** How the file is to be read. @throws {ServiceError} where it cannot be kept as it stands */
export function readyToKeep(intake: Intake): HowToRead {
  const { state, fileName } = intake;
  assertNotReading(intake);
  if (state === 'kept') throw conflict(`${fileName} is kept already.`);
  if (state === 'given-up') throw conflict(`${fileName} was given up. Bring it in again to keep it.`);
  const stored = intake.preview;
  if (!stored || stored.preview.problems.length > 0) {
    const problems = intake.problems ?? [];
    throw invalid(`${fileName} cannot be read as it is matched. ${problems[0]?.message ?? ''}`.trim(), undefined, {
      problems,
    });
  }
  const { count } = toConfirm(stored.preview, stored.confirmed);
  if (count > 0) {
    throw invalid(
      `${count} ${count === 1 ? 'reading' : 'readings'} of columns want your word first. Confirm each in the step Match.`,
    );
  }
  return { timeZone: stored.timeZone, columnMap: stored.preview.columnMap };
}

/** Takes back exactly what a kept file brought in. The file stays in the drawer and can be kept again. */
export async function undoIntake(actor: Actor, id: number, version: number): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, version);
  const { intake } = open;
  if (intake.state !== 'kept') throw conflict(`${intake.fileName} is not kept, so there is nothing to undo.`);
  await inTx(async () => {
    const blocks = await ReadingBlock.findAll({ where: { intakeId: id }, attributes: { exclude: ['values'] } });
    for (const block of blocks) await block.destroy();
    await takeBillsBack(intake);
    if (blocks.length > 0) await refreshFills(meterOf(open).id, open.opened.site.timeZone);
    await intake.update({ state: 'undone', undoneAt: new Date() });
  });
  return present(open);
}

/** What the file holds by local day, before it is kept, and what of it may not be true. */
export async function intakePicture(actor: Actor, id: number): Promise<IntakePicture> {
  const { intake, opened } = await openIntake(actor, id);
  const stored = intake.preview;
  if (intake.kind !== 'intervals' || !stored || stored.preview.problems.length > 0) throw notFound();
  const { timeZone } = stored;
  const { load } = await readIntervalFile(intake, { timeZone, columnMap: stored.preview.columnMap });
  return { ...daysOf(load, timeZone), findings: await loadFindings(opened, load) };
}
