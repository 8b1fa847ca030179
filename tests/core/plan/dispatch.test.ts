import { describe, expect, it } from 'vitest';
import { cheapestOrder } from '../../../src/core/plan/dispatch';
import type { LossCurve } from '../../../src/core/plan/dispatch';
import { shareByDroop } from '../../../src/core/plan/supply';

/** Losses a q^2 + b q over a range, in fine steps. */
function curve(a: number, b: number, low: number, high: number, pieces = 2000): LossCurve {
  const kvar = Float64Array.from({ length: pieces + 1 }, (_, k) => low + ((high - low) * k) / pieces);
  return { kvar, lossKw: kvar.map((q) => a * q * q + b * q) };
}

describe('cheapestOrder', () => {
  it('puts quadratic losses at equal marginal losses, as economic dispatch does', () => {
    // 2 a1 q1 = 2 a2 q2 with q1 + q2 = 900: 1e-5 against 2e-5 gives 600 and 300, losses 3.6 + 1.8 = 5.4 kW.
    const order = cheapestOrder([curve(1e-5, 0, 0, 1000), curve(2e-5, 0, 0, 1000)]);
    const out = new Float64Array(2);
    order.share(900, out);
    expect(out[0]).toBeCloseTo(600, 0);
    expect(out[1]).toBeCloseTo(300, 0);
    expect(order.lossKw(900)).toBeCloseTo(5.4, 4);
  });

  it('keeps a motor at the end of its range and loads the other on', () => {
    const order = cheapestOrder([curve(1e-5, 0, -100, 400), curve(2e-5, 0, -200, 1000)]);
    const out = new Float64Array(2);
    order.share(900, out);
    expect(out[0]).toBe(400);
    expect(out[1]).toBeCloseTo(500, 9);
    expect(order.lowKvar).toBe(-300);
    expect(order.highKvar).toBeCloseTo(1400, 9);
    order.share(5000, out);
    expect(out[0]).toBeCloseTo(400, 9);
    expect(out[1]).toBeCloseTo(1000, 9);
    order.share(-5000, out);
    expect([...out]).toEqual([-100, -200]);
  });

  it('shares by headroom where a kvar costs the same everywhere', () => {
    const order = cheapestOrder([curve(0, 0.01, 0, 300, 1), curve(0, 0.01, 0, 900, 1)]);
    const out = new Float64Array(2);
    order.share(400, out);
    expect([...out]).toEqual([100, 300]);
    expect(order.lossKw(400)).toBeCloseTo(4, 12);
  });

  it('leaves a motor that cannot move where it is', () => {
    const order = cheapestOrder([{ kvar: Float64Array.of(50), lossKw: Float64Array.of(3) }]);
    const out = new Float64Array(1);
    order.share(700, out);
    expect(out[0]).toBe(50);
    expect([order.lowKvar, order.highKvar, order.lossKw(700)]).toEqual([50, 50, 3]);
  });
});

describe('shareByDroop', () => {
  const holder = { setPu: 1, droopPu: 0.05, ratedKva: 1000, lowKvar: -500, highKvar: 500 };

  it('answers for one motor as Q = (Vset - V0)/(droop/S + x)', () => {
    // (1 - 0.985)/(0.05/1000 + 1/50000) = 0.015/0.00007 = 214.2857 kvar.
    const out = new Float64Array(1);
    shareByDroop(0.985, 1 / 50_000, [holder], out);
    expect(out[0]).toBeCloseTo(214.285714, 5);
  });

  it('stops at the ends of ranges and lets the other carry on', () => {
    // The first stands at 100. V = 0.95 + (100 + Q)/50000 and Q = 1000 (1 - V)/0.05: Q (1 + 0.4) = 1000 - 40, Q = 685.714 > 500.
    const out = new Float64Array(2);
    shareByDroop(0.95, 1 / 50_000, [{ ...holder, highKvar: 100 }, holder], out);
    expect([...out]).toEqual([100, 500]);
    // With 900 allowed it delivers 685.714.
    shareByDroop(
      0.95,
      1 / 50_000,
      [
        { ...holder, highKvar: 100 },
        { ...holder, highKvar: 900 },
      ],
      out,
    );
    expect(out[1]).toBeCloseTo(685.714286, 5);
  });

  it('absorbs where the voltage is high', () => {
    const out = new Float64Array(1);
    shareByDroop(1.05, 0, [holder], out);
    expect(out[0]).toBe(-500);
  });
});
