import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import type { LoadSeries } from '../../src/core/load';
import { compilePricing, readSchedule } from '../../src/core/tariff';
import { calendarMonths, generatedYear, medianMs } from './pricing';
import { priceRows } from './rows-program';
import type { Measured } from './run';

/**
 * The same year on the heavy schedule, priced by two programs written for it alone: an object for each row, and numpy. All three must
 * agree to the cent.
 */
export function benchRivals(): Measured[] {
  const schedule = readSchedule(readFileSync(new URL('heavy.yaml', import.meta.url), 'utf8'));
  const load = generatedYear(schedule.timeZone);
  const { startMs, stepMinutes } = load;
  const grid = { startMs, stepMinutes, count: load.kwh.length };
  const pricing = compilePricing(schedule, grid, { periods: calendarMonths() });
  const totals = [...pricing.totals(load)];
  const oursMs = medianMs(() => pricing.totals(load)[0]!);
  const rows = timed(() => priceRows(load));
  const rivals = [{ name: 'an object for each row', ...rows }, numpy(load)];
  return rivals.map((rival) => {
    const name = `heavy: times as fast as ${rival.name}`;
    if ('absent' in rival) return { name, figures: rival.absent };
    agree(name, totals, rival.totals);
    const figures = `${rival.ms.toFixed(2)} ms against ${oursMs.toFixed(3)} ms; ${totals.length} totals equal to the cent`;
    return { name, perSecond: rival.ms / oursMs, figures };
  });
}

function timed(work: () => number[]): { totals: number[]; ms: number } {
  const totals = work();
  const times = Array.from({ length: 5 }, () => {
    const start = performance.now();
    work();
    return performance.now() - start;
  });
  return { totals, ms: times.sort((a, b) => a - b)[2]! };
}

function numpy(load: LoadSeries): { name: string; totals: number[]; ms: number } | { name: string; absent: string } {
  const name = 'numpy';
  if (spawnSync('python3', ['-c', 'import numpy']).status !== 0)
    return { name, absent: 'left out: python3 with numpy is not on this machine' };
  const folder = mkdtempSync(path.join(tmpdir(), 'bench-'));
  try {
    const file = path.join(folder, 'year.f64');
    const { kwh, kvarhLagging, kvarhLeading } = load;
    writeFileSync(file, Buffer.concat([kwh, kvarhLagging, kvarhLeading].map(({ buffer }) => Buffer.from(buffer))));
    const program = fileURLToPath(new URL('numpy_program.py', import.meta.url));
    const { status, stdout, stderr } = spawnSync('python3', [program, file, String(load.startMs)], {
      encoding: 'utf8',
    });
    if (status !== 0) throw new Error(`numpy_program.py: ${stderr}`);
    return { name, ...(JSON.parse(stdout) as { totals: number[]; ms: number }) };
  } finally {
    rmSync(folder, { recursive: true });
  }
}

function agree(name: string, ours: number[], theirs: number[]): void {
  const differing = ours.flatMap((total, i) =>
    Math.round(100 * total) === Math.round(100 * theirs[i]!) ? [] : [`bill ${i + 1}: ${total} and ${theirs[i]}`],
  );
  if (ours.length !== theirs.length || differing.length > 0) throw new Error(`${name}: ${differing.join('; ')}`);
}
