import { spawnSync } from 'node:child_process';
import path from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lossSplitKw, operatingPoint, PullOutError, type OperatingPoint } from '../../../src/core/machine';
import { randomMotor } from './build-motor';

const program = path.resolve('tests/setup/phasor_circuit.py');
/** A system's own Python first: that is where a distribution's numpy lies. */
const python = ['/usr/bin/python3', 'python3'].find(
  (command) => spawnSync(command, ['-c', 'import numpy']).status === 0,
);

const count = 600;
/** Relative, of figures of order one; angles in degrees and amperes are held to the same share of themselves. */
const tolerance = 1e-8;

interface Case {
  motor: Parameters<typeof operatingPoint>[0];
  at: { shaftKw: number; kvar: number; voltagePu: number };
  lossSplitKw: ReturnType<typeof lossSplitKw>;
}

/** Random motors at random loads and voltages; half of them set by field current, which the circuit must find again. */
function cases(): { asked: Case; point: OperatingPoint }[] {
  const share = (min: number, max: number) => fc.double({ min, max, noNaN: true });
  const asked = fc.sample(
    fc.record({ motor: randomMotor(), load: share(0.02, 1.1), q: share(-0.9, 0.5), voltagePu: share(0.9, 1.1) }),
    { numRuns: count, seed: 115 },
  );
  return asked.flatMap(({ motor, load, q, voltagePu }, k) => {
    const kva = motor.ratedOutputKw / (motor.ratedEfficiency * motor.ratedPowerFactor);
    const shaftKw = load * motor.ratedOutputKw;
    const setting = k % 2 === 0 ? { kvar: q * kva } : { fieldCurrentA: (0.9 - 0.3 * q) * motor.ratedFieldCurrentA };
    try {
      const point = operatingPoint(motor, { shaftKw, voltagePu, ...setting });
      const at = { shaftKw, kvar: point.kvar, voltagePu };
      return [{ asked: { motor, at, lossSplitKw: lossSplitKw(motor) }, point }];
    } catch (error) {
      if (error instanceof PullOutError) return [];
      throw error;
    }
  });
}

const relative = (found: number, expected: number, scale: number) =>
  Math.abs(found - expected) / Math.max(Math.abs(expected), scale);

describe.skipIf(!python)('operating points against the complex circuit in numpy', () => {
  if (!python) console.warn('No python3 with numpy on this machine: the independent circuit is not solved.');

  it(`agree to ${tolerance} over ${count} random motors`, () => {
    const all = cases();
    // A point beyond pull-out is left out above; nearly all must be there for the check to mean anything.
    expect(all.length).toBeGreaterThan(0.9 * count);
    const answer = spawnSync(python!, [program], {
      input: JSON.stringify(all.map(({ asked }) => asked)),
      encoding: 'utf8',
      maxBuffer: 1e8,
    });
    expect(answer.stderr).toBe('');
    const solved = JSON.parse(answer.stdout) as (Omit<OperatingPoint, 'kvar' | 'leading' | 'beyond'> & {
      lossesKw: Record<string, number>;
    })[];
    expect(solved).toHaveLength(all.length);
    const worst: Record<string, number> = {};
    all.forEach(({ asked: { motor }, point }, k) => {
      const expected = solved[k]!;
      const scales = {
        inputKw: 0.01 * motor.ratedOutputKw,
        lineCurrentA: 1e-3,
        powerFactor: 1,
        emfPu: 1,
        loadAngleDeg: 1,
      };
      const figures = { ...scales, fieldCurrentA: 0.01 * motor.ratedFieldCurrentA, pullOutRatio: 1 };
      for (const [name, scale] of Object.entries(figures)) {
        const key = name as keyof typeof figures;
        worst[name] = Math.max(worst[name] ?? 0, relative(point[key], expected[key], scale));
      }
      for (const [name, kw] of Object.entries(point.lossesKw)) {
        const error = relative(kw, expected.lossesKw[name]!, 1e-3 * motor.ratedOutputKw);
        worst[name] = Math.max(worst[name] ?? 0, error);
      }
    });
    for (const [name, error] of Object.entries(worst)) expect(error, name).toBeLessThan(tolerance);
    expect(Object.keys(worst)).toHaveLength(13);
  });
});
