import { MessageChannel } from 'node:worker_threads';
import { describe, expect, it } from 'vitest';
import { searchYear } from '@/server/workers/search-year';
import { buildMotor } from '../core/machine/build-motor';
import { buildSeries } from '../core/tariff/build';

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
    expect(curve!.chosenA).toBe(142);
    expect(curve!.limitA).toBeCloseTo(142.5, 9);
    expect(curve!.points.find((point) => point.fieldA === 148)).toMatchObject({ admissible: false, total: 30 });
    expect(curve!.tolerance!.highA).toBe(142);
    expect(found.notes.join(' ')).toMatch(/^Raw mill stands at 148 A, outside its limits/);
  });
});
