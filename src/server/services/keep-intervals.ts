import { formatCount } from '../../components/ui/format';
import type { LoadSeries } from '../../core/load';
import type { OverlapChoice } from '../../schemas/intake';
import type { IntervalsOverlap } from '../../schemas/overlap';
import { inTx } from '../db/tx';
import { conflict } from '../errors';
import { refreshFills } from './gap-fills';
import { markKept, meterOf, type OpenIntake } from './intake-guard';
import { readIntervalFile, type HowToRead } from './intake-read';
import { spanInWords } from './intake-words';
import { assertSteps, intervalsBeside } from './overlap-intervals';
import { keepSeries } from './reading-blocks';

/** Reads a file and keeps its readings at the meter they belong to. @throws {ServiceError} 422, 409 as {@link keepLoad} */
export async function keepIntervals(open: OpenIntake, how: HowToRead, overlap?: OverlapChoice): Promise<void> {
  const { load } = await readIntervalFile(open.intake, how);
  await keepLoad(open, load, overlap);
}

/**
 * Keeps the readings of a file, all or nothing. Those kept before are not touched: the new ones lie above or beneath them.
 *
 * @throws {ServiceError} 409 with both side by side where an interval has a reading already and nothing was chosen
 */
export async function keepLoad(open: OpenIntake, load: LoadSeries, overlap?: OverlapChoice): Promise<void> {
  const { intake } = open;
  const meter = meterOf(open);
  await inTx(async () => {
    await assertSteps(meter, load);
    const beside = await intervalsBeside(open, load);
    if (beside.asks && !overlap) {
      throw conflict(inBoth(open, beside), { overlap: beside });
    }
    if (overlap === 'keep-new' && beside.keepNewRefused) throw conflict(beside.keepNewRefused, { overlap: beside });
    await markKept(intake);
    await keepSeries(meter.id, intake.id, load, overlap);
    await refreshFills(meter.id, open.opened.site.timeZone);
  });
}

function inBoth(open: OpenIntake, { span, files, total }: IntervalsOverlap): string {
  const names = files.map(({ fileName }) => (fileName ? `the file ${fileName}` : 'a file of another engagement'));
  const where = span ? ` from ${spanInWords(span.fromMs, span.toMs, open.opened.site.timeZone)}` : '';
  return `Readings of ${meterOf(open).label}${where} are kept already, from ${names.join(' and ')}; ${formatCount(total?.inCommon ?? 0, 'reading')} of this file meet them. Look at both side by side in the step Keep and choose which stand.`;
}
