import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PullOutError, excitation, pullOut, reactivePower } from '../../../src/core/machine';

describe('excitation', () => {
  it('gives the terminal voltage as emf when nothing is taken', () => {
    const z = { raOhm: 0.1, xdOhm: 5, xqOhm: 3 };
    expect(excitation({ phaseVoltageV: 240, activePowerW: 0, reactivePowerVar: 0 }, z)).toEqual({
      emfV: 240,
      loadAngleRad: 0,
      currentA: 0,
    });
  });

  it('satisfies the phasor equation of the two reactions for random machines', () => {
    fc.assert(
      fc.property(
        machine(),
        fc.double({ min: 0, max: 1.2, noNaN: true }),
        fc.double({ min: -1, max: 0.6, noNaN: true }),
        (m, p, q) => {
          const base = m.v ** 2;
          const found = excitation({ phaseVoltageV: m.v, activePowerW: p * base, reactivePowerVar: q * base }, m.z);
          // V - E - Ra I - j Xd Id - j Xq Iq = 0, with Id and Iq the projections of I on the axes of E.
          const [c, s] = [Math.cos(found.loadAngleRad), Math.sin(found.loadAngleRad)];
          const [re, im] = [(p * base) / m.v, (-q * base) / m.v];
          const iq = re * c - im * s;
          const id = re * s + im * c;
          const real = m.v - found.emfV * c - m.z.raOhm * re - (m.z.xqOhm * iq * s - m.z.xdOhm * id * c);
          const imag = found.emfV * s - m.z.raOhm * im - (m.z.xqOhm * iq * c + m.z.xdOhm * id * s);
          expect(Math.abs(real) / m.v).toBeLessThan(1e-9);
          expect(Math.abs(imag) / m.v).toBeLessThan(1e-9);
        },
      ),
      { numRuns: 10_000 },
    );
  });

  it.each([
    [{ phaseVoltageV: 0, activePowerW: 1, reactivePowerVar: 0 }, /phaseVoltageV must be > 0, got 0/],
    [{ phaseVoltageV: 240, activePowerW: NaN, reactivePowerVar: 0 }, /activePowerW/],
    [{ phaseVoltageV: 240, activePowerW: 1, reactivePowerVar: Infinity }, /reactivePowerVar/],
  ])('refuses %o', (at, message) => {
    expect(() => excitation(at, { raOhm: 0, xdOhm: 1, xqOhm: 1 })).toThrow(RangeError);
    expect(() => excitation(at, { raOhm: 0, xdOhm: 1, xqOhm: 1 })).toThrow(message);
  });

  it.each([
    [{ raOhm: -1, xdOhm: 1, xqOhm: 1 }, /raOhm/],
    [{ raOhm: 0, xdOhm: 0, xqOhm: 1 }, /xdOhm/],
    [{ raOhm: 0, xdOhm: 1, xqOhm: NaN }, /xqOhm/],
  ])('refuses impedance %o', (z, message) => {
    expect(() => excitation({ phaseVoltageV: 240, activePowerW: 0, reactivePowerVar: 0 }, z)).toThrow(message);
  });
});

describe('reactivePower', () => {
  it('undoes excitation on the stable side, for random machines', () => {
    fc.assert(
      fc.property(
        machine(),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: -1, max: 0.3, noNaN: true }),
        (m, p, q) => {
          const unit = m.v ** 2 / m.z.xdOhm;
          const at = { phaseVoltageV: m.v, activePowerW: p * unit, reactivePowerVar: q * unit };
          const forward = excitation(at, m.z);
          fc.pre(forward.emfV > 0);
          const limit = pullOut({ phaseVoltageV: m.v, emfV: forward.emfV }, m.z);
          fc.pre(forward.loadAngleRad < limit.loadAngleRad - 0.02);
          const back = reactivePower({ ...at, emfV: forward.emfV }, m.z);
          expect(Math.abs(back.reactivePowerVar - at.reactivePowerVar) / unit).toBeLessThan(1e-10);
          expect(Math.abs(back.loadAngleRad - forward.loadAngleRad)).toBeLessThan(1e-10);
          expect(Math.abs(back.currentA - forward.currentA)).toBeLessThan(1e-9 * (unit / m.v));
        },
      ),
      { numRuns: 10_000 },
    );
  });

  it('holds exactly the pull-out load and refuses a little more, naming the greatest', () => {
    const z = { raOhm: 0.02, xdOhm: 1.1, xqOhm: 0.7 };
    const limit = pullOut({ phaseVoltageV: 1, emfV: 1.2 }, z);
    expect(
      reactivePower({ phaseVoltageV: 1, emfV: 1.2, activePowerW: limit.activePowerW }, z).loadAngleRad,
    ).toBeCloseTo(limit.loadAngleRad, 6);
    const over = () => reactivePower({ phaseVoltageV: 1, emfV: 1.2, activePowerW: limit.activePowerW * 1.0001 }, z);
    expect(over).toThrow(PullOutError);
    try {
      over();
    } catch (error) {
      expect((error as PullOutError).pullOutPowerW).toBe(limit.activePowerW);
    }
  });

  it('delivers (V E - V^2)/X at no load', () => {
    const found = reactivePower({ phaseVoltageV: 100, emfV: 150, activePowerW: 0 }, { raOhm: 0, xdOhm: 2, xqOhm: 1.2 });
    expect(found.reactivePowerVar).toBeCloseTo(-2500, 9);
  });
});

describe('reactivePower of a generator', () => {
  it('answers down to the most it can generate, and names it beyond', () => {
    // Round rotor without resistance: P = -V E/X at -90 degrees, Q = V^2/X.
    const z = { raOhm: 0, xdOhm: 2, xqOhm: 2 };
    const found = reactivePower({ phaseVoltageV: 100, emfV: 150, activePowerW: -7500 }, z);
    expect(found.loadAngleRad).toBeCloseTo(-Math.PI / 2, 6);
    expect(found.reactivePowerVar).toBeCloseTo(5000, 2);
    const half = reactivePower({ phaseVoltageV: 100, emfV: 150, activePowerW: -3750 }, z);
    expect(half.loadAngleRad).toBeCloseTo(-Math.PI / 6, 12);
    expect(() => reactivePower({ phaseVoltageV: 100, emfV: 150, activePowerW: -7501 }, z)).toThrow(
      /activePowerW must be >= -7500.*got -7501/,
    );
  });
});

describe('pullOut', () => {
  it('meets the closed form cos d = (-a + sqrt(a^2 + 8 b^2))/(4 b) without resistance', () => {
    // dP/dd = a cos d + b cos 2d with a = V E/Xd, b = V^2 (1/Xq - 1/Xd): a quadratic in cos d.
    fc.assert(
      fc.property(machine(), fc.double({ min: 0.05, max: 3, noNaN: true }), (m, emfPu) => {
        const z = { ...m.z, raOhm: 0 };
        fc.pre(z.xdOhm / z.xqOhm > 1.001);
        const a = (m.v * m.v * emfPu) / z.xdOhm;
        const b = m.v ** 2 * (1 / z.xqOhm - 1 / z.xdOhm);
        const cosine = (-a + Math.sqrt(a * a + 8 * b * b)) / (4 * b);
        const found = pullOut({ phaseVoltageV: m.v, emfV: emfPu * m.v }, z);
        expect(Math.cos(found.loadAngleRad)).toBeCloseTo(cosine, 8);
      }),
      { numRuns: 10_000 },
    );
  });

  it('is V E/|Z| + V^2 Ra/|Z|^2 for a round rotor with resistance', () => {
    // Derivation: P = V^2 Ra/Z^2 + (V E/Z) sin(d - atan(Ra/X)).
    const z = { raOhm: 0.5, xdOhm: 3, xqOhm: 3 };
    const found = pullOut({ phaseVoltageV: 69.28, emfV: 87.54 }, z);
    const square = 0.25 + 9;
    expect(found.activePowerW).toBeCloseTo((69.28 * 87.54) / Math.sqrt(square) + (69.28 ** 2 * 0.5) / square, 8);
    expect(found.loadAngleRad).toBeCloseTo(Math.PI / 2 + Math.atan(0.5 / 3), 9);
  });

  it('stands at 45 degrees with no field: reluctance alone', () => {
    expect(pullOut({ phaseVoltageV: 1, emfV: 0 }, { raOhm: 0, xdOhm: 1, xqOhm: 0.6 }).loadAngleRad).toBeCloseTo(
      Math.PI / 4,
      10,
    );
  });

  it('is the greatest of both humps where much resistance and little field raise the second', () => {
    // P = V^2 Ra/D + V E (Xq sin d - Ra cos d)/D + V^2 (Xd - Xq) sin 2d/(2 D), D = Ra^2 + Xd Xq = 0.86, at every 0.001 degree:
    // the copper loss carried through the terminals is greatest with the emf reversed.
    const z = { raOhm: 0.6, xdOhm: 1, xqOhm: 0.5 };
    const power = (d: number) => (0.6 + 0.4 * (0.5 * Math.sin(d) - 0.6 * Math.cos(d)) + 0.25 * Math.sin(2 * d)) / 0.86;
    const most = (from: number, to: number) => {
      let best = -Infinity;
      for (let k = from * 1000; k <= to * 1000; k++) best = Math.max(best, power((k * Math.PI) / 180000));
      return best;
    };
    const first = most(0, 120);
    const second = most(180, 270);
    expect(second).toBeGreaterThan(first + 0.05);
    expect(pullOut({ phaseVoltageV: 1, emfV: 0.4 }, z).activePowerW).toBeCloseTo(second, 8);
    const held = (activePowerW: number) => reactivePower({ phaseVoltageV: 1, emfV: 0.4, activePowerW }, z).loadAngleRad;
    expect(power(held(first - 0.01))).toBeCloseTo(first - 0.01, 10);
    expect(held(first - 0.01)).toBeLessThan(Math.PI / 2);
    expect(power(held(first + 0.02))).toBeCloseTo(first + 0.02, 10);
    expect(held(first + 0.02)).toBeGreaterThan(Math.PI);
    expect(() => held(second + 0.001)).toThrow(PullOutError);
  });

  it('refuses a negative emf', () => {
    expect(() => pullOut({ phaseVoltageV: 1, emfV: -1 }, { raOhm: 0, xdOhm: 1, xqOhm: 1 })).toThrow(
      /emfV must be >= 0, got -1/,
    );
  });
});

/** Random machines of any size: volts from 50 to 10 000 to neutral, reactances around one per unit of any base. */
function machine() {
  return fc
    .record({
      v: fc.double({ min: 50, max: 10000, noNaN: true }),
      xd: fc.double({ min: 0.5, max: 2, noNaN: true }),
      saliency: fc.double({ min: 0.5, max: 1, noNaN: true }),
      ra: fc.double({ min: 0, max: 0.05, noNaN: true }),
    })
    .map(({ v, xd, saliency, ra }) => ({ v, z: { raOhm: ra, xdOhm: xd, xqOhm: xd * saliency } }));
}
