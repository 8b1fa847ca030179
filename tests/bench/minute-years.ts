import { execFileSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { localDateStartMs, type LoadSeries } from '../../src/core/load';
import { priceBills, readSchedule } from '../../src/core/tariff';
import type { Measured } from './run';

const childFlag = '--price-ten-years-of-minutes';
const mb = 1_048_576;

interface ChildFigures {
  intervals: number;
  bills: number;
  seconds: number;
  arraysMb: number;
  peakMb: number;
}

/**
 * Ten years of one-minute data (5.3 million intervals, 120 bills with words) on the heavy schedule, in a process of its own. Peak memory
 * is that process's greatest resident size less its resident size before the arrays were made: the arrays themselves are in it.
 */
export function benchMinuteYears(): Measured[] {
  const written = execFileSync(process.execPath, ['--import', 'tsx', fileURLToPath(import.meta.url), childFlag], {
    encoding: 'utf8',
  });
  const { intervals, bills, seconds, arraysMb, peakMb } = JSON.parse(written) as ChildFigures;
  return [
    {
      name: 'ten years of one-minute data: peak memory over the size of the arrays',
      ratio: peakMb / arraysMb,
      atMost: 3,
      figures:
        `${intervals.toLocaleString('en')} intervals, ${bills} bills with words in ${seconds.toFixed(2)} s; arrays ${arraysMb.toFixed(0)} MB, ` +
        `greatest resident size less that before the arrays ${peakMb.toFixed(0)} MB, arrays included`,
    },
  ];
}

function minuteLoad(timeZone: string): LoadSeries {
  const startMs = localDateStartMs('2016-01-01', timeZone);
  const count = (localDateStartMs('2026-01-01', timeZone) - startMs) / 60_000;
  const load: LoadSeries = {
    startMs,
    stepMinutes: 1,
    kwh: new Float64Array(count),
    kvarhLagging: new Float64Array(count),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
  for (let i = 0; i < count; i++) {
    load.kwh[i] = 20 + (i % 1440) / 100 + ((i * 37) % 101) / 10;
    load.kvarhLagging[i] = i % 1440 > 360 ? 12 + ((i * 53) % 89) / 10 : 0;
    load.kvarhLeading[i] = i % 1440 > 360 ? 0 : ((i * 29) % 71) / 10;
  }
  return load;
}

function priceInChild(): void {
  const text = readFileSync(new URL('heavy.yaml', import.meta.url), 'utf8');
  const schedule = readSchedule(text.replace('inForce: 2025-01-01', 'inForce: 2016-01-01'));
  const begin = (month: number): string =>
    `${2016 + Math.floor(month / 12)}-${String((month % 12) + 1).padStart(2, '0')}-01`;
  const periods = Array.from({ length: 120 }, (_, i) => ({ from: begin(i), to: begin(i + 1) }));
  const beforeMb = process.memoryUsage().rss / mb;
  const load = minuteLoad(schedule.timeZone);
  const arraysMb = (load.kwh.byteLength * 3 + load.quality.byteLength) / mb;
  const startMs = performance.now();
  const bills = priceBills(schedule, load, { periods });
  const figures: ChildFigures = {
    intervals: load.kwh.length,
    bills: bills.length,
    seconds: (performance.now() - startMs) / 1000,
    arraysMb,
    peakMb: process.resourceUsage().maxRSS / 1024 - beforeMb,
  };
  process.stdout.write(JSON.stringify(figures));
}

if (process.argv.includes(childFlag)) priceInChild();
