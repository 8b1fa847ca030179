import type { LoadSeries } from '../../../src/core/load';
import type { FieldControl } from '../../../src/core/machine';
import type { PlanMotor } from '../../../src/core/plan';
import { buildMotor } from '../machine/build-motor';

/** A plant load of `days` days of quarter-hours from 2026-01-05 UTC: 3 to 5 MW by day, less by night, about 0.75 power factor. */
export function buildLoad(days: number, overrides: Partial<LoadSeries> = {}): LoadSeries {
  const count = days * 96;
  const kwh = new Float64Array(count);
  const kvarhLagging = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const hour = (i % 96) / 4;
    const busy = hour >= 6 && hour < 22 ? 1 : 0.45;
    const kw = busy * (4000 + 900 * Math.sin((i * 2 * Math.PI) / 96) + 150 * Math.sin(i * 1.7));
    kwh[i] = kw / 4;
    kvarhLagging[i] = (kw * (0.88 + 0.05 * Math.cos(i * 0.9))) / 4;
  }
  return {
    startMs: Date.UTC(2026, 0, 5),
    stepMinutes: 15,
    kwh,
    kvarhLagging,
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
    ...overrides,
  };
}

/** A 2000 hp motor at unity field by day (six to ten) and stopped by night. */
export function buildPlanMotor(load: LoadSeries, overrides: Partial<PlanMotor> = {}): PlanMotor {
  return {
    motor: buildMotor({ limits: { pullOutMargin: 1.3 } }),
    shaftKw: Float64Array.from(load.kwh, (_, i) => (i % 96 >= 24 && i % 96 < 88 ? 1200 : 0)),
    standingFieldA: 105,
    ...overrides,
  };
}

/** One field current for the whole year. */
export function field(fieldCurrentA: number): FieldControl[] {
  return [{ holds: 'field-current', fieldCurrentA }];
}
