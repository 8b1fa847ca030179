import { describe, expect, it } from 'vitest';
import { operatingPoint } from '../../../src/core/machine';
import { createSimulator, searchSettings, simulatePlan } from '../../../src/core/plan';
import { buildLoad, buildPlanMotor, field } from './build-plant';

// Two meters billed together. The first stands at 1,000 kvarh lagging in each quarter-hour; behind the second a motor runs and its meter
// shows nothing of either sense, so that all it delivers more turns up on that meter's leading register.
const first = buildLoad(1, { kvarhLagging: new Float64Array(96).fill(1000) });
const second = buildLoad(1, { kvarhLagging: new Float64Array(96) });
const motor = buildPlanMotor(second, { shaftKw: new Float64Array(96).fill(1200) });
const at = (fieldCurrentA: number) => operatingPoint(motor.motor, { shaftKw: 1200, fieldCurrentA });
const deliveredKvarh = (at(105).kvar - at(140).kvar) / 4;

describe('several meters summed', () => {
  it('changes the registers of the meter a motor stands behind', () => {
    expect(deliveredKvarh).toBeGreaterThan(100);
    const { load, hoursLeadingBefore } = simulatePlan(
      { load: first, beside: [second], motors: [{ ...motor, behind: 1 }] },
      { controls: [field(140)] },
    );
    expect(hoursLeadingBefore).toBe(0);
    load.kvarhLagging.forEach((lagging) => expect(lagging).toBeCloseTo(1000, 9));
    load.kvarhLeading.forEach((leading) => expect(leading).toBeCloseTo(deliveredKvarh, 9));
    const more = (at(140).inputKw - at(105).inputKw) / 4;
    load.kwh.forEach((kwh, i) => expect(kwh).toBeCloseTo(first.kwh[i]! + second.kwh[i]! + more, 8));
  });

  it('takes the same delivery off the lagging register of the first meter when it stands behind that', () => {
    const { load } = simulatePlan(
      { load: first, beside: [second], motors: [motor] },
      { controls: [field(140)], banks: [{ steps: 1, stepKvar: 400, lossWPerKvar: 0 }] },
    );
    load.kvarhLagging.forEach((lagging) => expect(lagging).toBeCloseTo(1000 - deliveredKvarh - 100, 9));
    load.kvarhLeading.forEach((leading) => expect(leading).toBe(0));
  });

  it('hands each meter the field currents of its own motors, whatever their order', () => {
    const ofFirst = buildPlanMotor(first, { shaftKw: motor.shaftKw });
    const plant = { load: first, beside: [second], motors: [{ ...motor, behind: 1 }, ofFirst] };
    const load = createSimulator(plant).apply([field(105), field(140)]);
    load.kvarhLagging.forEach((lagging) => expect(lagging).toBeCloseTo(1000 - deliveredKvarh, 9));
    load.kvarhLeading.forEach((leading) => expect(leading).toBeCloseTo(0, 9));
  });

  it('searches with the sum: a motor behind a meter that lags nothing is left alone where leading is charged', () => {
    const found = searchSettings({
      plant: {
        load: first,
        beside: [second],
        motors: [{ ...motor, behind: 1, searched: { holds: 'field-current', stepA: 5 } }],
      },
      totals: (load) =>
        Float64Array.of(load.kvarhLagging.reduce((a, b) => a + b) + 3 * load.kvarhLeading.reduce((a, b) => a + b)),
    });
    expect(found.leaveAlone).toBe(true);
  });

  it('refuses a motor behind a meter that is not there', () => {
    const plant = { load: first, beside: [second], motors: [{ ...motor, behind: 2 }] };
    expect(() => createSimulator(plant)).toThrow(/motors\[0\]\.behind must name one of 2 meters/);
  });
});
