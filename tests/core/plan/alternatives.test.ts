import { describe, expect, it } from 'vitest';
import type { Alternative } from '../../../src/core/plan';
import type { LoadSeries } from '../../../src/core/load';
import { operatingPoint } from '../../../src/core/machine';
import { judgePlans, shaftLoadFromSubmeter, simulatePlan, sizeCapacitors } from '../../../src/core/plan';
import { buildMotor } from '../machine/build-motor';
import { buildLoad, buildPlanMotor, field } from './build-plant';

const total = (series: Float64Array) => series.reduce((sum, value) => sum + value, 0);

describe('sizeCapacitors', () => {
  // 400 kvar day and night for a day: 1 per lagging kvarh, 3 per leading: the bank that just meets it is best.
  const load = buildLoad(1, { kvarhLagging: new Float64Array(96).fill(100) });
  const plant = { load, motors: [buildPlanMotor(load)] };
  const totals = (series: LoadSeries) => Float64Array.of(total(series.kvarhLagging) + 3 * total(series.kvarhLeading));
  const step = { stepKvar: 50, lossWPerKvar: 0 };

  it('finds the size that meets a constant load', () => {
    const found = sizeCapacitors({ plant, step, mostSteps: 12, totals });
    expect(found.best).toMatchObject({ steps: 8, kvar: 400, billCost: 0 });
    expect(found.sizes.map((size) => size.billCost)).toEqual([
      9600, 8400, 7200, 6000, 4800, 3600, 2400, 1200, 0, 3600, 7200, 10800, 14400,
    ]);
  });

  it('counts what the bank itself costs a year, and takes none where that outweighs it', () => {
    // A step saves 1200 of bills a day-long year: at 24.01 per kvar 50 kvar cost 1200.5.
    expect(sizeCapacitors({ plant, step, mostSteps: 12, totals, yearlyCostPerKvar: 24.01 }).best.steps).toBe(0);
    expect(sizeCapacitors({ plant, step, mostSteps: 12, totals, yearlyCostPerKvar: 23.9 }).best.steps).toBe(8);
  });

  it('prices as the simulation does, with motors at given fields, and checks resonance', () => {
    const found = sizeCapacitors({
      plant,
      step: { stepKvar: 50, lossWPerKvar: 3, voltagePu: 1.02 },
      mostSteps: 3,
      totals: (series) => Float64Array.of(total(series.kvarhLagging), total(series.kwh)),
      controls: [field(120)],
      shortCircuitKva: 26087,
    });
    const plan = simulatePlan(plant, {
      controls: [field(120)],
      banks: [{ steps: 3, stepKvar: 50, lossWPerKvar: 3, voltagePu: 1.02 }],
    });
    expect(found.sizes[3]!.billCost).toBeCloseTo(total(plan.load.kvarhLagging) + total(plan.load.kwh), 6);
    expect(found.sizes[0]!.resonance).toBeNull();
    expect(found.sizes[3]!.resonance!.order).toBeCloseTo(Math.sqrt(26087 / 150), 9);
  });

  it('tries a controller besides, which never leads, and weighs what it costs', () => {
    // By night 400 kvar are not there: 64 quarter-hours of 400 kvar lagging, 32 of none. Fixed, 50 kvar save 64 x 12.5 = 800 and cost
    // 32 x 3 x 12.5 = 1200 a step, so none pays; switched, eight steps save 64 x 100 = 6400.
    const part = buildLoad(1, { kvarhLagging: Float64Array.from({ length: 96 }, (_, i) => (i < 64 ? 100 : 0)) });
    const size = (yearlyCostOfController: number) =>
      sizeCapacitors({
        plant: { load: part, motors: [] },
        step,
        mostSteps: 12,
        totals,
        holdsPowerFactor: 1,
        yearlyCostOfController,
      });
    expect(size(6000).best).toMatchObject({ steps: 8, switched: true, billCost: 0, yearCost: 6000 });
    expect(size(6500).best).toMatchObject({ steps: 0, switched: false, billCost: 6400 });
  });

  it('checks every number of steps of a switched bank for resonance', () => {
    // 26,087 kVA: 7 x 149 = 1043 kvar resonate at 5.00, 3 x 149 at 7.64, 4 x 149 at 6.62, 5 x 149 at 5.92, 6 x 149 at 5.40.
    const found = sizeCapacitors({
      plant,
      step: { stepKvar: 149, lossWPerKvar: 0 },
      mostSteps: 7,
      totals,
      holdsPowerFactor: 1,
      shortCircuitKva: 26_087,
    });
    const seven = found.sizes.find(({ steps, switched }) => steps === 7 && switched)!;
    expect(seven.resonance).toMatchObject({ steps: 7, near: [5] });
    expect(seven.resonance!.order).toBeCloseTo(Math.sqrt(26_087 / 1043), 9);
  });

  it('can be cancelled', () => {
    const found = sizeCapacitors({ plant, step, mostSteps: 12, totals, onProgress: ({ priced }) => priced < 4 });
    expect(found.cancelled).toBe(true);
    expect(found.sizes).toHaveLength(4);
  });

  it('refuses counts out of range', () => {
    expect(() => sizeCapacitors({ plant, step, mostSteps: 0, totals })).toThrow(/mostSteps/);
    expect(() => sizeCapacitors({ plant, step, mostSteps: 1, totals, yearlyCostPerKvar: -1 })).toThrow(
      /yearlyCostPerKvar/,
    );
  });
});

describe('judgePlans', () => {
  const input = {
    standingCost: 100000,
    years: 10,
    discountRate: 0.08,
    alternatives: [
      { kind: 'capacitors' as const, name: 'Capacitors', yearCost: 88000, capitalCost: 40000, yearlyUpkeep: 500 },
      { kind: 'motor' as const, name: 'Field settings', yearCost: 91000, capitalCost: 6000 },
      { kind: 'both' as const, name: 'Both together', yearCost: 86500, capitalCost: 46000, yearlyUpkeep: 500 },
    ],
  };

  it('ranks by present value and says in one sentence with three numbers which wins', () => {
    // Annuity of 10 years at 8 %: 6.71008. Capacitors 11500 x 6.71008 - 40000 = 37165.9; fields 9000 x 6.71008 - 6000 = 54390.7;
    // both 13000 x 6.71008 - 46000 = 41231.1.
    const verdict = judgePlans(input);
    expect(verdict.winner).toBe('motor');
    expect(verdict.judged.map((row) => Math.round(row.appraisal.npv))).toEqual([54391, 41231, 37166]);
    expect(verdict.judged[0]!.yearlySaving).toBe(9000);
    expect(verdict.words.replaceAll('\u00a0', ' ')).toBe(
      'Field settings gain 54,391 in present value over 10 years; both together gain 41,231 and capacitors gain 37,166.',
    );
    expect(judgePlans({ ...input, wordMoney: (amount) => `$${amount.toFixed(0)}` }).words).toMatch(
      /^Field settings gain \$54391 /,
    );
  });

  it('says when capacitors win, or both', () => {
    const dear = input.alternatives.map((one) => (one.kind === 'motor' ? { ...one, capitalCost: 30000 } : one));
    expect(judgePlans({ ...input, alternatives: dear }).winner).toBe('both');
    expect(judgePlans({ ...input, alternatives: dear.slice(0, 2) }).winner).toBe('capacitors');
  });

  it('leaves the plant alone when nothing earns its cost, and says what each would lose', () => {
    // 200 a year more: -200 x 6.71008 = -1342.0. Capacitors save 300 less 500 of upkeep: -200 x 6.71008 - 40000 = -41342.0.
    const [capacitors, motor] = input.alternatives as [Alternative, Alternative];
    const verdict = judgePlans({
      ...input,
      alternatives: [
        { ...motor, yearCost: 100200, capitalCost: 0 },
        { ...capacitors, yearCost: 99700 },
      ],
    });
    expect(verdict.winner).toBe('neither');
    expect(verdict.words.replaceAll('\u00a0', ' ')).toBe(
      'Leave the plant as it stands: over 10 years field settings lose 1,342 and capacitors lose 41,342.',
    );
    expect(judgePlans({ ...input, alternatives: [] })).toMatchObject({ winner: 'neither', judged: [] });
  });

  it('grows the savings with the price', () => {
    // One alternative, 2 years, no discount: 9000 + 9000 x 1.1 - 6000 = 12900.
    const verdict = judgePlans({
      ...input,
      alternatives: input.alternatives.slice(1, 2),
      years: 2,
      discountRate: 0,
      escalationRate: 0.1,
    });
    expect(verdict.judged[0]!.appraisal.npv).toBeCloseTo(12900, 8);
  });

  it('refuses a horizon that is none and a kind told twice', () => {
    expect(() => judgePlans({ ...input, years: 0 })).toThrow(/years/);
    expect(() => judgePlans({ ...input, escalationRate: -1 })).toThrow(/escalationRate/);
    const twice = [input.alternatives[0]!, input.alternatives[0]!];
    expect(() => judgePlans({ ...input, alternatives: twice })).toThrow(/each kind once at most, got capacitors again/);
  });
});

describe('shaftLoadFromSubmeter', () => {
  const motor = buildMotor();

  it('gives back the loads whose input was metered', () => {
    const loads = [10, 300, 777.7, 1200, 1492];
    const inputKw = Float64Array.from(
      loads,
      (shaftKw) => operatingPoint(motor, { shaftKw, fieldCurrentA: 120, voltagePu: 0.98 }).inputKw,
    );
    const found = shaftLoadFromSubmeter(motor, { inputKw, fieldCurrentA: 120, voltagePu: 0.98 });
    found.shaftKw.forEach((kw, i) => expect(kw).toBeCloseTo(loads[i]!, 5));
    expect(found).toMatchObject({ missing: 0, beyondPullOut: 0 });
  });

  it('takes a near-zero or missing reading for standstill, and counts what is missing or impossible', () => {
    const found = shaftLoadFromSubmeter(motor, { inputKw: Float64Array.of(0, 5, NaN, 99999), fieldCurrentA: 120 });
    expect([...found.shaftKw.slice(0, 3)]).toEqual([0, 0, 0]);
    expect(found.missing).toBe(1);
    expect(found.beyondPullOut).toBe(1);
    expect(() => operatingPoint(motor, { shaftKw: found.shaftKw[3]!, fieldCurrentA: 120 })).not.toThrow();
  });

  it('keeps a motor running at no load apart from one that stands still', () => {
    const idle = operatingPoint(motor, { shaftKw: 0, fieldCurrentA: 120 }).inputKw;
    expect(
      shaftLoadFromSubmeter(motor, { inputKw: Float64Array.of(idle), fieldCurrentA: 120 }).shaftKw[0],
    ).toBeGreaterThan(0);
  });
});
