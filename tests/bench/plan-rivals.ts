import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { lossSplitKw, type FieldControl } from '../../src/core/machine';
import { createSimulator, fieldBounds, searchSettings, spanSeries, type PlanMotor } from '../../src/core/plan';
import { compilePricing, readSchedule } from '../../src/core/tariff';
import { calendarMonths, generatedYear, medianMs } from './pricing';
import type { Measured } from './run';
import { buildMotors } from './search';

/** Rounds of the minimiser's population: about as many years as it can price while somebody waits. */
const rounds = 12;

interface Answer {
  totals: number[][];
  ms: number;
  fields: number[];
  cost: number;
  evaluations: number;
  seconds: number;
}

/**
 * The same plant, year and heavy schedule simulated by a plain script in numpy, and searched by scipy's minimisers over continuous field
 * currents: three motors in two seasons. Candidates must agree within a cent; then whose optimum is cheaper, in how many times the time.
 */
export function benchPlanRivals(): Measured[] {
  const name = 'plans: times as fast as numpy';
  const python = ['python3', '/usr/bin/python3'].find(
    (command) => spawnSync(command, ['-c', 'import numpy, scipy.optimize']).status === 0,
  );
  if (!python) return [{ name, figures: 'left out: no python3 with numpy and scipy on this machine' }];
  const year = buildYear();
  const theirs = askPython(python, year);
  const ms = candidateMs(year);
  agree(year, theirs);
  const { load, motors, spans, pricing } = year;
  const begun = performance.now();
  const found = searchSettings({
    plant: { load, motors },
    fixed: { spans },
    totals: (series) => pricing.totals(series),
  });
  const seconds = (performance.now() - begun) / 1000;
  const less = theirs.cost - found.cost;
  return [
    {
      name,
      perSecond: theirs.ms / ms,
      figures: `a candidate year of three motors in two seasons: ${theirs.ms.toFixed(1)} ms against ${ms.toFixed(2)} ms; 60 totals equal within a cent`,
    },
    {
      name: 'plans: time of scipy’s minimisers over the whole search',
      perSecond: theirs.seconds / seconds,
      figures:
        `theirs ${theirs.cost.toFixed(2)} after ${theirs.evaluations} years in ${theirs.seconds.toFixed(1)} s, continuous amperes; ` +
        `ours ${found.cost.toFixed(2)} after ${found.priced} in ${seconds.toFixed(1)} s, whole amperes: ` +
        `ours is ${Math.abs(less).toFixed(2)} ${less >= 0 ? 'cheaper' : 'dearer'}`,
    },
  ];
}

function buildYear() {
  const schedule = readSchedule(readFileSync(new URL('heavy.yaml', import.meta.url), 'utf8'));
  const load = generatedYear(schedule.timeZone);
  const grid = { startMs: load.startMs, stepMinutes: load.stepMinutes, count: load.kwh.length };
  const motors = buildMotors(grid, schedule.timeZone);
  const seasons = [{ name: 'Winter' }, { name: 'Summer', months: [4, 5, 6, 7, 8, 9] }];
  const spans = spanSeries(seasons, grid, schedule.timeZone);
  const bounds = motors.map(boundsOf);
  return {
    load,
    motors,
    spans,
    bounds,
    pricing: compilePricing(schedule, grid, { periods: calendarMonths() }),
    simulator: createSimulator({ load, motors }, { spans }),
    /** Field currents per motor and season, spread over what is admissible. */
    candidates: Array.from({ length: 5 }, (_, c) =>
      bounds.flatMap(([low, high]) => [0.2, 0.5].map((share) => low + (high - low) * (share + 0.07 * c))),
    ),
  };
}

type Year = ReturnType<typeof buildYear>;

function boundsOf(motor: PlanMotor): [low: number, high: number] {
  const found = fieldBounds(motor);
  if ('none' in found) throw new Error('a motor of the bench has no admissible field');
  return [found.lowA, found.highA];
}

function totalsOf({ motors, pricing, simulator }: Year, fields: number[]): Float64Array {
  const held = (fieldCurrentA: number): FieldControl => ({ holds: 'field-current', fieldCurrentA });
  return pricing.totals(simulator.apply(motors.map((_, m) => [held(fields[2 * m]!), held(fields[2 * m + 1]!)])));
}

/** Median time of a candidate; each has amperes of its own, so that nothing solved before is met again. */
function candidateMs(year: Year): number {
  let nudgeA = 0;
  return medianMs(() => {
    nudgeA += 0.001;
    return totalsOf(
      year,
      year.candidates[2]!.map((amperes) => amperes - nudgeA),
    )[0]!;
  });
}

function agree(year: Year, theirs: Answer): void {
  year.candidates.forEach((fields, c) =>
    totalsOf(year, fields).forEach((total, bill) => {
      const other = theirs.totals[c]![bill]!;
      if (!(Math.abs(total - other) <= 0.011))
        throw new Error(`candidate ${c + 1}, bill ${bill + 1}: ${total} and ${other}`);
    }),
  );
}

function askPython(python: string, { load, motors, spans, bounds, candidates }: Year): Answer {
  const folder = mkdtempSync(path.join(tmpdir(), 'bench-plan-'));
  const keep = (file: string, ...arrays: (Float64Array | Uint8Array)[]) => {
    const full = path.join(folder, file);
    writeFileSync(full, Buffer.concat(arrays.map((a) => Buffer.from(a.buffer, a.byteOffset, a.byteLength))));
    return full;
  };
  try {
    const task = path.join(folder, 'task.json');
    const asked = {
      year: keep('year.f64', load.kwh, load.kvarhLagging, load.kvarhLeading),
      spans: keep('spans.u8', spans.index),
      startMs: load.startMs,
      rounds,
      candidates,
      motors: motors.map(({ motor, shaftKw, standingFieldA }, m) => ({
        ...motor,
        lossSplitKw: lossSplitKw(motor),
        shaft: keep(`shaft-${m}.f64`, shaftKw),
        standingFieldA,
        bounds: bounds[m],
      })),
    };
    writeFileSync(task, JSON.stringify(asked));
    const program = fileURLToPath(new URL('search_program.py', import.meta.url));
    const env = { ...process.env, PYTHONDONTWRITEBYTECODE: '1' };
    const { status, stdout, stderr } = spawnSync(python, [program, task], { encoding: 'utf8', env });
    if (status !== 0) throw new Error(`search_program.py: ${stderr}`);
    return JSON.parse(stdout) as Answer;
  } finally {
    rmSync(folder, { recursive: true });
  }
}
