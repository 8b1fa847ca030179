import v8 from 'node:v8';
import vm from 'node:vm';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { IntakeError, readIntervals, type IntakeReport } from '@/core/intake';
import { bases, type Base } from './mutations/bases';
import { mutations } from './mutations/mutate';
import { Lot } from './mutations/random';

const seed = Number(process.env.COUNTERLAG_SEED ?? 20_261_201);
const files = 5000;
// Work is bounded by what goes in: no mutant is larger than this.
const mostBytes = 400_000;

v8.setFlagsFromString('--expose-gc');
const collect = vm.runInNewContext('gc') as () => void;
function heapMb(): number {
  collect();
  return process.memoryUsage().heapUsed / 1e6;
}

type Outcome = { report: IntakeReport } | { refusal: IntakeError };

/** A reading, or a refusal that says what, where and what to do; anything else fails the test. */
async function outcomeOf(bytes: Uint8Array, fileName: string): Promise<Outcome> {
  try {
    const { load, report } = await readIntervals(bytes, { fileName, timeZone: 'Etc/UTC' });
    expect(load.kwh.length).toBe(report.intervals);
    return { report };
  } catch (cause) {
    if (!(cause instanceof IntakeError)) throw cause;
    expect(cause.problems.length).toBeGreaterThan(0);
    for (const { message, where, remedy } of cause.problems) {
      expect(message.length).toBeGreaterThan(8);
      expect(where).not.toBe('');
      expect(remedy.length).toBeGreaterThan(8);
    }
    return { refusal: cause };
  }
}

const totals = ({ totalKwh, totalKvarhLagging, totalKvarhLeading }: IntakeReport): number[] => [
  totalKwh,
  totalKvarhLagging,
  totalKvarhLeading,
];
const isClose = (one: number, other: number): boolean =>
  Object.is(one, other) || Math.abs(one - other) <= 1e-9 * Math.max(1, Math.abs(other));
const telling = ({ missing, duplicates, estimated, intervals, negative, notes }: IntakeReport): string =>
  JSON.stringify([
    missing,
    duplicates,
    estimated,
    intervals,
    negative,
    notes.map(({ code, message }) => [code, message]),
  ]);

/** Equal totals, or a report that says something else than that of the base. */
function isHonest(base: IntakeReport, spoiled: IntakeReport): boolean {
  const [own, other] = [totals(base), totals(spoiled)];
  return own.every((total, at) => isClose(other[at] ?? Number.NaN, total)) || telling(base) !== telling(spoiled);
}

async function reportOf(base: Base): Promise<IntakeReport> {
  const outcome = await outcomeOf(base.bytes, base.fileName);
  if ('refusal' in outcome) throw outcome.refusal;
  return outcome.report;
}

describe('spoiled files', () => {
  // The parser of workbooks remarks on what it does not know.
  beforeAll(() => void vi.spyOn(console, 'error').mockImplementation(() => undefined));
  afterAll(() => void vi.restoreAllMocks());

  it(`are read, or refused with place and remedy: ${files} of seed ${seed}`, async () => {
    const lot = new Lot(seed);
    const names = Object.keys(mutations);
    const reports = new Map<Base, IntakeReport>();
    for (const base of bases) reports.set(base, await reportOf(base));
    const tally = { read: 0, refused: 0, neutral: 0 };
    const dishonest: string[] = [];
    let before = Number.NaN;
    for (let turn = 0; tally.read + tally.refused < files; turn += 1) {
      const base = bases[turn % bases.length] as Base;
      const name = lot.of(names);
      const mutant = mutations[name]?.(base, lot);
      if (!mutant || mutant.bytes.length === 0) continue;
      expect(mutant.bytes.length).toBeLessThan(mostBytes);
      const outcome = await outcomeOf(mutant.bytes, base.fileName);
      if ('refusal' in outcome) tally.refused += 1;
      else tally.read += 1;
      if (mutant.isNeutral) tally.neutral += 1;
      if (mutant.isNeutral && 'report' in outcome && !isHonest(reports.get(base) as IntakeReport, outcome.report))
        dishonest.push(`${name} of ${base.name} in turn ${turn}: ${totals(outcome.report).join(', ')}`);
      if (tally.read + tally.refused === 1000) before = heapMb();
    }
    expect(dishonest).toEqual([]);
    // A third and more of them is read, and a fifth and more refused: neither outcome is the only one met.
    expect(tally.read).toBeGreaterThan(files / 3);
    expect(tally.refused).toBeGreaterThan(files / 5);
    expect(tally.neutral).toBeGreaterThan(files / 5);
    expect(heapMb() - before).toBeLessThan(30);
    expect(Object.keys(Object.prototype)).toEqual([]);
  }, 600_000);
});
