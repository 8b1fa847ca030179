import fc from 'fast-check';
import { all, create } from 'mathjs';
import { describe, expect, it } from 'vitest';
import { PriceError, priceBills, ScheduleError, type Schedule } from '@/core/tariff';
import { buildSchedule, buildSeries, valuesOf } from './build';

describe('formulas over cells beside a general expression package (mathjs)', () => {
  const math = create(all!);
  const scope = {
    excess: (a: number, b: number) => Math.max(0, a - b),
    between: (q: number, a: number, b: number) => Math.max(0, Math.min(q, Math.max(a, b)) - a),
    pf: (p: number, q: number) => (Number(p) === 0 ? 1 : Math.abs(p) / Math.hypot(p, q)),
    ratio: (q: number, p: number) => (Number(p) === 0 ? 0 : q / p),
    when: (c: number | boolean, a: number, b: number) => (Number(c) !== 0 ? a : b),
  };
  const leaf = fc.constantFrom(
    'kwh',
    'kvarhLagging',
    'kvarhLeading',
    'kvarhNet',
    'kvah',
    'kw',
    'kva',
    'kvarNet',
    '0.4',
    '3',
    'k',
  );
  const { formula } = fc.letrec<{ formula: string }>((tie) => ({
    formula: fc.oneof(
      { maxDepth: 4 },
      leaf,
      fc
        .tuple(tie('formula'), fc.constantFrom('+', '-', '*', '/', '<', '>='), tie('formula'))
        .map(([a, operator, b]) => `(${a} ${operator} ${b})`),
      fc
        .tuple(fc.constantFrom('max', 'min', 'hypot', 'excess', 'pf', 'ratio'), tie('formula'), tie('formula'))
        .map(([fn, a, b]) => `${fn}(${a}; ${b})`),
      fc.tuple(tie('formula'), tie('formula'), tie('formula')).map(([a, b, c]) => `between(${a}; ${b}; ${c})`),
      fc.tuple(tie('formula'), tie('formula'), tie('formula')).map(([a, b, c]) => `if(${a}; ${b}; ${c})`),
      tie('formula').map((a) => `sqrt(abs(${a}))`),
    ),
  }));
  const day = { from: '2026-07-06', to: '2026-07-08' };
  // Two days of half hours; in the second one hour without energy, one with a gap in it and one that is all gap.
  const load = buildSeries({
    ...day,
    timeZone: 'Europe/Lisbon',
    stepMinutes: 30,
    powers: (_, i) => (i === 60 || i === 61 ? [0, 0, 0] : [40 + (i % 7) * 8, (i % 5) * 16, (i % 3) * 4]),
  });
  for (const i of [70, 80, 81]) {
    load.quality[i] = 2;
    load.kwh[i] = load.kvarhLagging[i] = load.kvarhLeading[i] = NaN;
  }

  /** The schedule; nothing where its formulas mix energy with power, which the reader refuses. */
  function readOrNull(text: string): Schedule | null {
    try {
      return buildSchedule(text, { zeroKwh: '{ pf: 1, ratio: 0 }' });
    } catch (error) {
      if (error instanceof ScheduleError) return null;
      throw error;
    }
  }

  /** Value of a formula in every hour of which something was metered. */
  function byHour(text: string): { value: number; isWhole: boolean }[] {
    const node = math.parse(text.replaceAll('if(', 'when(').replaceAll(';', ',')).compile();
    return Array.from({ length: 48 }, (_, hour) => {
      const metered = [2 * hour, 2 * hour + 1].filter((i) => load.quality[i] !== 2);
      const sum = (register: Float64Array): number => metered.reduce((total, i) => total + register[i]!, 0);
      const [kwh, lagging, leading] = [sum(load.kwh), sum(load.kvarhLagging), sum(load.kvarhLeading)];
      const hours = metered.length / 2;
      const kvah = Math.hypot(kwh, lagging - leading);
      const cell = { kwh, kvarhLagging: lagging, kvarhLeading: leading, kvarhNet: lagging - leading, kvah };
      const powers = { kw: kwh / hours, kva: kvah / hours, kvarNet: (lagging - leading) / hours };
      if (metered.length === 0) return [];
      return [
        { value: Number(node.evaluate({ ...scope, ...cell, ...powers, k: 0.25 })), isWhole: metered.length === 2 },
      ];
    }).flat();
  }

  it('give the same sums, highest and lowest, gaps and hours without energy among them', () => {
    let compared = 0;
    fc.assert(
      fc.property(formula, formula, (text, condition) => {
        fc.pre(text.length <= 450 && condition.length <= 450 && /k[wv]/.test(text) && /k[wv]/.test(condition));
        const schedule = readOrNull(
          `rates: { k: 0.25 }
quantities:
  all: { sum: (${text}) * kwh, each: hour, unit: kWh }
  some: { sum: (${text}) * kwh, each: hour, where: ${condition} > k, unit: kWh }
  most: { highest: (${text}) * kwh, each: hour, unit: kWh }
  least: { lowest: (${text}) * kwh, each: hour, unit: kWh }
charges:
  fee: { amount: 1, group: fixed }`,
        );
        fc.pre(schedule !== null);
        let ours: Record<string, number>;
        try {
          ours = valuesOf(priceBills(schedule!, load, { periods: [day] })[0]);
        } catch (error) {
          // Only a division by zero or the like has no value.
          expect(error).toBeInstanceOf(PriceError);
          return;
        }
        const values = byHour(`(${text}) * kwh`);
        const whole = values.filter(({ isWhole }) => isWhole).map(({ value }) => value);
        const holds = byHour(`(${condition}) > k`);
        const close = (a: number, b: number): void =>
          expect(Math.abs(a - b)).toBeLessThanOrEqual(1e-7 * Math.max(1, Math.abs(b)));
        close(
          ours['all']!,
          values.reduce((sum, { value }) => sum + value, 0),
        );
        close(
          ours['some']!,
          values.reduce((sum, { value }, i) => sum + (holds[i]!.value !== 0 ? value : 0), 0),
        );
        close(ours['most']!, Math.max(...whole));
        close(ours['least']!, Math.min(...whole));
        compared++;
      }),
      { numRuns: 400 },
    );
    expect(compared).toBeGreaterThan(150);
  });
});
