import { readFileSync } from 'node:fs';
import { inferSchema, initParser } from 'udsv';
import { readIntervals } from '../../src/core/intake';
import { hasShared, sharedFile } from '../setup/shared';
import type { Measured } from './run';

const runs = 21;
const warmUps = 4;

function median(times: number[]): number {
  return [...times].sort((a, b) => a - b)[Math.floor(times.length / 2)] ?? Number.NaN;
}

/** A year of quarter-hours as text, should the real one not lie beside the checkout. */
function inventedYear(): Uint8Array {
  const rows = Array.from({ length: 35_040 }, (_, at) => {
    const stamp = new Date(Date.UTC(2025, 0, 1) + at * 900_000).toISOString();
    const [date = '', time = ''] = stamp.split('T');
    const [year, month, day] = date.split('-');
    return `${day}/${month}/${year} ${time.slice(0, 5)},${(at % 700) / 10},${(at % 300) / 10},0,0.02,73.21,100,${at % 96},Weekday,Monday,Light`;
  });
  return new TextEncoder().encode(
    `date,kWh,Lagging kvarh,Leading kvarh,CO2(t),PF,PF 2,NSM,Week,Day,Kind\n${rows.join('\n')}\n`,
  );
}

/**
 * Reading a year of quarter-hours (bytes to load and report) against splitting the same bytes into strings with the
 * fastest parser of delimited text, turn by turn in one process.
 */
export async function benchIntake(): Promise<Measured[]> {
  const bytes = new Uint8Array(
    hasShared ? readFileSync(sharedFile('data', 'steel-plant', 'steel-plant-2018.csv')) : inventedYear(),
  );
  const own: number[] = [];
  const reference: number[] = [];
  for (let run = -warmUps; run < runs; run += 1) {
    const startReference = performance.now();
    const text = new TextDecoder().decode(bytes);
    const rows = initParser(inferSchema(text)).stringArrs(text);
    const referenceMs = performance.now() - startReference;
    const startOwn = performance.now();
    const { load } = await readIntervals(bytes, { fileName: 'year.csv', timeZone: 'Asia/Seoul' });
    const ownMs = performance.now() - startOwn;
    if (run >= 0) {
      own.push(ownMs);
      reference.push(referenceMs);
    }
    if (load.kwh.length !== rows.length) throw new Error(`${load.kwh.length} intervals of ${rows.length} rows`);
  }
  const ratio = median(own) / median(reference);
  const figures = `${median(own).toFixed(1)} ms to read, ${median(reference).toFixed(1)} ms to split with udsv, median of ${runs}`;
  return [{ name: 'read a year of quarter-hours', ratio, atMost: 4, figures }];
}
