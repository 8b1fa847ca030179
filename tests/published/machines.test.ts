import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { decimalsOf } from '@/core/units';
import { hasShared, sharedFile } from '../setup/shared';
import { correctionCases } from './correction-cases';
import { capabilityCases, nameplateCases } from './machine-capability-cases';
import type { Figures, MachineCase } from './machine-case';
import { emfCases } from './machine-emf-cases';
import { loadCases } from './machine-load-cases';
import { lossCases } from './machine-loss-cases';
import { salientCases } from './machine-salient-cases';
import { networkCases } from './network-cases';
import { plantCases } from './plant-cases';

const machineCases = [...loadCases, ...emfCases, ...salientCases, ...nameplateCases, ...capabilityCases, ...lossCases];
const cases: MachineCase[] = [...machineCases, ...plantCases, ...correctionCases, ...networkCases];

/** How far the recomputed figures, five digits each, may be off: relative, or absolute where nought is sought. */
const RECOMPUTED = 1e-4;

/** How far a printed figure may be off: half a unit of its last digit unless the case says why not, never beyond its tolerance. */
function allowedOff({ within, tolerance }: MachineCase, name: string, printed: number): number {
  const own = typeof within === 'number' ? within : within?.[name];
  // The crumbs of binary arithmetic beside the last printed digit.
  return Math.min(own ?? 0.5 * 10 ** -decimalsOf(printed), tolerance * Math.abs(printed)) + 1e-9;
}

function figuresSought({ printed, recomputed, outside }: MachineCase): string[] {
  const names = new Set([...Object.keys(printed ?? {}), ...Object.keys(recomputed)]);
  return [...names].filter((name) => outside?.[name] === undefined);
}

/** Holds a figure to its digits as printed, or to be as wrong as the case says. */
function holdPrinted(one: MachineCase, name: string, found: number, printed: number): void {
  const off = Math.abs(found - printed);
  const allowed = allowedOff(one, name, printed);
  if (one.wrong?.[name] === undefined) {
    expect(off, `${name}: ${found} for ${printed} printed`).toBeLessThanOrEqual(allowed);
  } else {
    expect(off, `${name} is right as printed`).toBeGreaterThan(allowed);
    expect(one.recomputed[name], `${name} recomputed`).toBeTypeOf('number');
  }
}

function holdRecomputed(name: string, found: Figures[string], recomputed: Figures[string]): void {
  if (typeof recomputed !== 'number') return expect(found, name).toBe(recomputed);
  const off = Math.abs((found as number) - recomputed) / (Math.abs(recomputed) || 1);
  expect(off, `${name}: ${found} for ${recomputed}`).toBeLessThanOrEqual(RECOMPUTED);
}

describe('worked examples of machines and plants', () => {
  it.each(cases)('$id gives the printed and the recomputed figures: $source', (one) => {
    const found = one.find();
    const sought = figuresSought(one);
    expect(sought.length).toBeGreaterThan(0);
    expect(Object.keys(found).sort()).toEqual(sought.sort());
    for (const name of sought) {
      const [printed, recomputed] = [one.printed?.[name], one.recomputed[name]];
      if (printed !== undefined) holdPrinted(one, name, found[name] as number, printed);
      if (recomputed !== undefined) holdRecomputed(name, found[name]!, recomputed);
    }
  });
});

interface ListedCase {
  id: string;
  status: 'found' | 'memory';
  kind: 'published' | 'derived';
  expected: Record<string, number>;
  recomputed: Figures;
  tolerance: number;
  mismatches: { key: string }[];
}

describe.skipIf(!hasShared)('the list of worked examples beside the checkout', () => {
  const listed = (): ListedCase[] =>
    JSON.parse(readFileSync(sharedFile('checks', 'machine-cases.json'), 'utf8')) as ListedCase[];

  it('stands here whole, each example once', () => {
    const ids = listed().map(({ id }) => id);
    expect(ids.length).toBeGreaterThanOrEqual(52);
    expect(cases.map(({ id }) => id).sort()).toEqual(ids.sort());
  });

  it('has the figures, tolerances and wrong figures that stand here', () => {
    for (const { id, expected, recomputed, tolerance, mismatches } of listed()) {
      const one = cases.find((row) => row.id === id)!;
      expect(one.printed ?? {}, id).toEqual(expected);
      expect(one.recomputed, id).toEqual(recomputed);
      expect(one.tolerance, id).toBe(tolerance);
      expect(Object.keys(one.wrong ?? {}).sort(), id).toEqual(mismatches.map(({ key }) => key).sort());
    }
  });

  it('says which examples were not read in a source', () => {
    for (const { id, status, kind } of listed()) {
      const { source } = cases.find((row) => row.id === id)!;
      if (kind === 'published') expect(/from memory/.test(source), id).toBe(status === 'memory');
      else expect(source, id).toMatch(/[Oo]wn /);
    }
  });
});
