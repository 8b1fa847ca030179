import { MessageChannel } from 'node:worker_threads';
import { describe, expect, it } from 'vitest';
import { searchYear } from '@/server/workers/search-year';
import { buildMotor } from '../core/machine/build-motor';
import { buildSeries } from '../core/tariff/build';

/** A month in which lagging energy is charged at 0.02 by day, leading energy at 0.06 by night, and energy at 0.05. */
const reactiveText = `schedule: lagging-and-leading
currency: EUR
timeZone: Europe/Lisbon
inForce: 2020-01-01
straddle: days
demandWindow: 15 min
windows:
  day: { days: every day, hours: 06:00-22:00 }
  night: { rest: day }
quantities:
  kwh: { sum: kwh }
  lagging: { sum: kvarhLagging, in: day }
  leading: { sum: kvarhLeading, in: night }
charges:
  energy: { group: energy, per: kwh, rate: 0.05 }
  lag: { group: reactive, per: lagging, rate: 0.02 }
  lead: { group: reactive, per: leading, rate: 0.06 }
`;

/** A month in which no field changes the bill: 30 EUR, whatever is metered. */
const scheduleText = `schedule: flat
currency: EUR
timeZone: Europe/Lisbon
inForce: 2020-01-01
straddle: days
demandWindow: 15 min
charges:
  service: { group: fixed, amount: 30 }
`;

describe('a search by shift with capacitors beside', () => {
  it('finds a setting for each shift, tries it, weighs capacitors and bounds what is left', () => {
    const { port1, port2 } = new MessageChannel();
    const load = buildSeries({
      from: '2026-02-01',
      to: '2026-03-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: (_, i) => (i % 24 >= 6 && i % 24 < 22 ? [4000, 3000, 0] : [1600, 200, 0]),
    });
    const shift = { name: 'Day', days: ['every' as const], from: '06:00', to: '22:00' };
    const found = searchYear({
      kind: 'search',
      basis: {
        scheduleText: reactiveText,
        timeZone: 'Europe/Lisbon',
        periods: [{ from: '2026-02-01', to: '2026-03-01' }],
        contract: {},
        given: [{}],
        load,
        meters: [],
        motors: [
          {
            id: 7,
            name: 'Raw mill',
            machine: buildMotor(),
            calendar: {
              rules: [
                {
                  days: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'],
                  fromHour: 0,
                  toHour: 24,
                  load: 1200,
                  unit: 'kW',
                },
              ],
              shutdowns: [],
            },
            fieldTodayA: 105,
            behind: 0,
          },
        ],
      },
      asked: {
        stepA: 5,
        spans: { by: 'clock', spans: [shift], rest: 'Night' },
        bank: { stepKvar: 200, mostSteps: 6, lossWPerKvar: 2, holdsPowerFactor: 1, costPerKvar: 0.2, motorWork: 3 },
      },
      spanRules: { rules: [{ name: 'Night' }, shift], of: [1, 0] },
      fingerprint: 'one',
      port: port1,
    });
    port1.close();
    port2.close();
    const [raw] = found.fields;
    const [day, night] = raw!.controls!.map((control) =>
      control.holds === 'field-current' ? control.fieldCurrentA : NaN,
    );
    // By day lagging is charged and the field goes up; by night 200 kvar are all there is to take away.
    expect(day).toBeGreaterThan(120);
    expect(night).toBeLessThan(120);
    expect(found.curves.map(({ span }) => span)).toEqual(['Day', 'Night']);
    expect(found.saving).toBeGreaterThan(0);
    expect(found.limits![0]).toMatchObject({ name: 'Raw mill', hoursRunning: 28 * 24 });
    expect(found.robustness!.years).toBe(16);
    expect(found.alternatives!.map(({ kind }) => kind).sort()).toEqual(['both', 'capacitors', 'motor']);
    expect(found.alternatives!.map(({ npv }) => npv)).toEqual(
      [...found.alternatives!.map(({ npv }) => npv)].sort((a, b) => b - a),
    );
    // The fields cost their work, a bank 0.2 EUR for each of 200 kvar a step, both together both.
    const capitalOf = (kind: string) => found.alternatives!.find((one) => one.kind === kind)!.capitalCost;
    expect(capitalOf('motor')).toBe(3);
    expect(capitalOf('capacitors')).toBeCloseTo(40 * found.bank!.aloneSteps, 9);
    expect((capitalOf('both') - 3) % 40).toBeCloseTo(0, 9);
    expect(found.verdict).toMatch(/ gain [\d,.]+ EUR in present value over 10 years; .* and .*\.$/);
    expect(found.bound!.total).toBeLessThanOrEqual(found.yearTotal + 1e-6);
    expect(found.bound!.words).toMatch(/% above it/);
  });
});

describe('the stretch of settings that are equally good', () => {
  it('ends at the limits, even where the motor stands beyond them and the cost stays flat', () => {
    const { port1, port2 } = new MessageChannel();
    const load = buildSeries({
      from: '2026-02-01',
      to: '2026-03-01',
      timeZone: 'Europe/Lisbon',
      stepMinutes: 60,
      powers: () => [4000, 3000, 0],
    });
    const found = searchYear({
      kind: 'search',
      basis: {
        scheduleText,
        timeZone: 'Europe/Lisbon',
        periods: [{ from: '2026-02-01', to: '2026-03-01' }],
        contract: {},
        given: [{}],
        load,
        meters: [],
        motors: [
          {
            id: 7,
            name: 'Raw mill',
            // 5 % of 150 A is held back: 142.5 A is the limit, the motor stands at 148 A.
            machine: buildMotor({ limits: { reserve: 0.05 } }),
            calendar: {
              rules: [{ days: ['Mon', 'Tue', 'Wed', 'Thu', 'Fri'], fromHour: 6, toHour: 22, load: 1200, unit: 'kW' }],
              shutdowns: [],
            },
            fieldTodayA: 148,
            behind: 0,
          },
        ],
      },
      asked: { stepA: 1 },
      spanRules: null,
      fingerprint: 'one',
      port: port1,
    });
    port1.close();
    port2.close();
    const [curve] = found.curves;
    // It must be moved within the limits; where every step costs the same, to the one it loses least at.
    expect(curve!.chosenA).toBeLessThan(142.5);
    expect(curve!.points.find((point) => point.fieldA === curve!.chosenA)!.admissible).toBe(true);
    expect(curve!.limitA).toBeCloseTo(142.5, 9);
    expect(curve!.points.find((point) => point.fieldA === 148)).toMatchObject({ admissible: false, total: 30 });
    expect(curve!.tolerance!.highA).toBe(142);
    expect(found.notes.join(' ')).toMatch(/^Raw mill stands at 148 A, outside its limits/);
  });
});
