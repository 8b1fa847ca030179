import { sumLoads, wholeReadings, type LoadSeries } from '../../core/load';
import { conflict } from '../errors';
import type { OpenEngagement } from './engagements';
import { keptSpans, loadSeries } from './readings';

/** What the meters of an engagement read over a span. */
export interface MeteredLoad {
  /** Of all meters together: what is priced. */
  load: LoadSeries;
  /** Of each meter in their order. */
  meters: LoadSeries[];
}

/**
 * The kept readings of an engagement's meters over [fromMs, toMs), added up, as pricing takes them; null where none is kept in that time.
 *
 * @throws {ServiceError} 409 where one of several meters has none, or their intervals differ in length
 */
export async function meteredLoad(
  { meters }: Pick<OpenEngagement, 'meters'>,
  fromMs: number,
  toMs: number,
): Promise<MeteredLoad | null> {
  const spans = await Promise.all(meters.map((meter) => keptSpans(meter.id, fromMs, toMs)));
  if (spans.every((kept) => kept.length === 0)) return null;
  const bare = meters.find((_, at) => spans[at]?.length === 0);
  if (bare) {
    throw conflict(
      `No readings of meter ${bare.label} are kept for this time, and it is billed together with ${meters.length === 2 ? 'another' : 'others'}. Bring them in at the station Intervals, or take the meter off there.`,
      { station: 'intervals' },
    );
  }
  const loads = await Promise.all(meters.map(async (meter) => wholeReadings(await loadSeries(meter.id, fromMs, toMs))));
  const other = loads.findIndex((load) => load.stepMinutes !== loads[0]?.stepMinutes);
  if (other > 0) {
    throw conflict(
      `Meter ${meters[0]?.label} reads every ${loads[0]?.stepMinutes} minutes, meter ${meters[other]?.label} every ${loads[other]?.stepMinutes}. To be billed together their readings must have one length: bring them in again so.`,
      { station: 'intervals' },
    );
  }
  return { load: sumLoads(loads), meters: loads };
}
