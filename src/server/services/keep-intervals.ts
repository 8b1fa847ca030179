import { formatCount } from '../../components/ui/format';
import type { IntervalsOverlap, OverlapChoice } from '../../schemas/intake';
import { inTx } from '../db/tx';
import { conflict } from '../errors';
import { refreshFills } from './gap-fills';
import { markKept, meterOf, type OpenIntake } from './intake-guard';
import { readIntervalFile, type HowToRead } from './intake-read';
import { spanInWords } from './intake-words';
import { assertSteps, intervalsBeside } from './overlap-intervals';
import { keepSeries } from './reading-blocks';

/**
 * Keeps the readings of a file at the meter of its engagement, all or nothing. Readings kept before are not touched:
 * the new ones lie above or beneath them.
 *
 * @throws {ServiceError} 409 with both side by side where an interval has a reading already and nothing was chosen
 */
export async function keepIntervals(open: OpenIntake, how: HowToRead, overlap?: OverlapChoice): Promise<void> {
  const { intake } = open;
  const meter = meterOf(open);
  const { load } = await readIntervalFile(intake, how);
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
