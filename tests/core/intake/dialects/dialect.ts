import { expect } from 'vitest';
import { readIntervals, type ColumnMap } from '@/core/intake';
import { bytesOf } from '../files';
import { seriesOf, type Series } from './series';

/** One way to write the series down. */
export interface Dialect {
  name: string;
  stepMinutes: 5 | 15 | 30 | 60;
  write: (series: Series) => string | Uint8Array;
  fileName?: string;
  map?: ColumnMap;
  /** The text has no leading energy of its own. */
  lacksLeading?: true;
  lacksLagging?: true;
  /** The text marks estimates. */
  marksEstimates?: true;
  /** What the text can carry of the series, where that is not the whole. */
  carried?: (series: Series) => Carried;
  /** Least digits of the text: how far a figure may be off, as a fraction of its interval's kWh, and why. */
  tolerance?: { fraction: number; why: string };
  /** Codes of notes that must be there. */
  notes?: string[];
  /** Zones the dialect can be written in; all if left out. */
  fits?: (series: Series) => boolean;
  /** Words of the refusal, for a text that cannot be read rightly. */
  refused?: RegExp;
}

/** What must come back: NaN where missing. */
export interface Carried {
  startMs: number;
  kwh: number[];
  lagging: number[];
  leading: number[];
  quality: number[];
}

const missing = 2;

/** The whole series as a reader should give it back. */
export function wholeOf(
  series: Series,
  dialect: Pick<Dialect, 'lacksLeading' | 'lacksLagging' | 'marksEstimates'>,
): Carried {
  const { readings } = series;
  const unless = (isLost: boolean, figure: number): number => (isLost ? Number.NaN : figure);
  return {
    startMs: series.startMs,
    kwh: readings.map((one) => unless(one.grade === 'missing', one.kwh)),
    lagging: readings.map((one) => unless(one.grade === 'missing' || dialect.lacksLagging === true, one.lagging)),
    leading: readings.map((one) => unless(one.grade === 'missing' || dialect.lacksLeading === true, one.leading)),
    quality: readings.map((one) =>
      one.grade === 'missing' ? missing : one.grade === 'estimated' && dialect.marksEstimates ? 1 : 0,
    ),
  };
}

function expectFigures(
  what: string,
  actual: Float64Array,
  expected: readonly number[],
  allowed: readonly number[] | null,
): void {
  expect(actual.length, what).toBe(expected.length);
  const wrong = expected.findIndex((figure, at) => {
    const found = actual[at] ?? Number.NaN;
    return allowed && !Number.isNaN(figure)
      ? !(Math.abs(found - figure) <= (allowed[at] ?? 0))
      : !Object.is(found, figure);
  });
  if (wrong >= 0) expect([what, wrong, actual[wrong]]).toEqual([what, wrong, expected[wrong]]);
}

/** Writes the series of a zone in a dialect, reads it, and holds every interval against the series. */
export async function expectRead(dialect: Dialect, zone: string): Promise<void> {
  const series = seriesOf(zone, dialect.stepMinutes);
  const written = dialect.write(series);
  const bytes = typeof written === 'string' ? bytesOf(written) : written;
  const options = {
    fileName: dialect.fileName ?? 'plant.csv',
    timeZone: zone,
    ...(dialect.map ? { columnMap: dialect.map } : {}),
  };
  if (dialect.refused) {
    await expect(readIntervals(bytes, options)).rejects.toThrow(dialect.refused);
    return;
  }
  const { load, report } = await readIntervals(bytes, options);
  const expected = dialect.carried?.(series) ?? wholeOf(series, dialect);
  const { tolerance } = dialect;
  const allowed = tolerance ? expected.kwh.map((kwh) => kwh * tolerance.fraction) : null;
  expect(new Date(load.startMs).toISOString()).toBe(new Date(expected.startMs).toISOString());
  expect(load.stepMinutes).toBe(series.stepMinutes);
  expectFigures('kWh', load.kwh, expected.kwh, allowed);
  expectFigures('lagging kvarh', load.kvarhLagging, expected.lagging, allowed);
  expectFigures('leading kvarh', load.kvarhLeading, expected.leading, allowed);
  expectFigures('quality', Float64Array.from(load.quality), expected.quality, null);
  expect(report.missing).toBe(expected.quality.filter((grade) => grade === missing).length);
  const codes = report.notes.map((note) => note.code);
  for (const code of dialect.notes ?? []) expect(codes).toContain(code);
}
