import type { LoadSeries } from '../../core/load';
import { inTx } from '../db/tx';
import { conflict } from '../errors';
import { Intake } from '../models/Intake';
import { markKept, type OpenIntake } from './intake-guard';
import { readIntervalFile, type HowToRead } from './intake-read';
import { spanInWords } from './intake-words';
import { keepSeries, keptSpans } from './readings';

const minuteMs = 60_000;

/** Keeps the readings of a file at the meter of its engagement, all or nothing. */
export async function keepIntervals({ intake, opened }: OpenIntake, how: HowToRead): Promise<void> {
  const { load } = await readIntervalFile(intake, how);
  await inTx(async () => {
    await assertFits(load, opened);
    await markKept(intake);
    await keepSeries(opened.meter.id, intake.id, load);
  });
}

/** Whether the readings fit beside those the meter has. */
async function assertFits(load: LoadSeries, { meter, site, engagement }: OpenIntake['opened']): Promise<void> {
  const endMs = load.startMs + load.kwh.length * load.stepMinutes * minuteMs;
  const spans = await keptSpans(meter.id, -8.64e15, 8.64e15);
  const shared = spans.filter((span) => span.startMs < endMs && span.endMs > load.startMs);
  const [first] = shared;
  if (first) {
    const fromMs = Math.max(load.startMs, first.startMs);
    const toMs = Math.min(endMs, Math.max(...shared.map((span) => span.endMs)));
    const file = await Intake.findByPk(first.intakeId);
    const named = file?.engagementId === engagement.id ? `the file ${file.fileName}` : 'a file of another engagement';
    throw conflict(
      `Readings of ${meter.label} from ${spanInWords(fromMs, toMs, site.timeZone)} are kept already, from ${named}. Undo that file first, then keep this one.`,
      { fromMs, toMs, intakeId: file?.engagementId === engagement.id ? file.id : null },
    );
  }
  const other = spans.find((span) => span.stepMinutes !== load.stepMinutes);
  if (other) {
    throw conflict(
      `The kept readings of ${meter.label} are ${other.stepMinutes}-minute intervals, this file has ${load.stepMinutes}-minute intervals. Ask for both in one length, or undo the other file first.`,
      { intakeId: other.intakeId },
    );
  }
}
