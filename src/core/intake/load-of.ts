import { quality as grades, type LoadSeries } from '../load';
import { reactiveOf } from './kvarh-senses';
import type { GriddedChannels } from './series';
import type { IntervalRole } from './column-map';
import type { IntakeNote } from './types';

/** The load of gridded channels, with notes on what was assumed about reactive energy and export. */
export function loadOf(gridded: GriddedChannels): { load: LoadSeries; notes: IntakeNote[]; negative: number } {
  const { length } = gridded;
  const notes: IntakeNote[] = [...gridded.notes];
  const channels = withoutEmpty(gridded.channels, notes);
  const absent = (): Float64Array => new Float64Array(length).fill(Number.NaN);
  const drawn = channels.get('active');
  const { kwh, negative, exported } = withoutExport(drawn ?? absent());
  const exportKwh = exported + sumOf(channels.get('export'));
  if (negative > 0 || channels.has('export')) {
    notes.push({
      code: 'export-left-out',
      message: `${round(exportKwh)} kWh delivered to the grid are neither netted nor kept.`,
    });
  }
  const reactive = reactiveOf(channels, kwh, notes);
  const carried = [...channels].filter(([role]) => role !== 'export' && role !== 'sense').map(([, figures]) => figures);
  const quality = gridded.quality.slice();
  const lagging = reactive.lagging ?? absent();
  const leading = reactive.leading ?? absent();
  for (let slot = 0; slot < length; slot += 1) {
    if (!lacks(carried, slot)) continue;
    quality[slot] = grades.missing;
    kwh[slot] = lagging[slot] = leading[slot] = Number.NaN;
  }
  const missing = [
    drawn ? '' : 'kWh',
    reactive.lagging ? '' : 'lagging kvarh',
    reactive.leading ? '' : 'leading kvarh',
  ].filter((name) => name !== '');
  for (const name of missing) notes.push({ code: 'channel-absent', message: `The file carries no ${name}.` });
  return {
    load: {
      startMs: gridded.startMs,
      stepMinutes: gridded.stepMinutes,
      kwh,
      kvarhLagging: lagging,
      kvarhLeading: leading,
      quality,
    },
    notes,
    negative,
  };
}

function lacks(carried: readonly Float64Array[], slot: number): boolean {
  for (let index = 0; index < carried.length; index += 1)
    if (Number.isNaN(carried[index]?.[slot] ?? Number.NaN)) return true;
  return false;
}

/** A channel without a single figure is absent, not missing throughout. */
function withoutEmpty(
  channels: ReadonlyMap<IntervalRole, Float64Array>,
  notes: IntakeNote[],
): Map<IntervalRole, Float64Array> {
  const filled = [...channels].filter(([, figures]) => figures.some((figure) => !Number.isNaN(figure)));
  const empty = [...channels.keys()].filter((role) => !filled.some(([other]) => other === role));
  if (empty.length > 0)
    notes.push({
      code: 'channel-empty',
      message: `Columns without a single figure are left out: ${empty.join(', ')}.`,
    });
  return new Map(filled);
}

const sumOf = (figures: Float64Array | undefined): number =>
  figures?.reduce((sum, figure) => (Number.isNaN(figure) ? sum : sum + Math.abs(figure)), 0) ?? 0;
const round = (figure: number): number => Math.round(figure * 1000) / 1000;

function withoutExport(net: Float64Array): { kwh: Float64Array; negative: number; exported: number } {
  let negative = 0;
  let exported = 0;
  const kwh = net.slice();
  for (let slot = 0; slot < kwh.length; slot += 1) {
    const figure = kwh[slot] ?? Number.NaN;
    if (!(figure < 0)) continue;
    negative += 1;
    exported -= figure;
    kwh[slot] = 0;
  }
  return { kwh, negative, exported };
}
