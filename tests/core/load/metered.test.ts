import { describe, expect, it } from 'vitest';
import { localDateStartMs, meteredDays, meteredOver, type LoadSeries } from '@/core/load';

const zone = 'America/Chicago';

/** 100 kW and 75 kvar lagging in every interval. */
function steady(from: string, to: string, stepMinutes = 15): LoadSeries {
  const startMs = localDateStartMs(from, zone);
  const count = (localDateStartMs(to, zone) - startMs) / (stepMinutes * 60_000);
  const of = (kw: number) => new Float64Array(count).fill((kw * stepMinutes) / 60);
  return {
    startMs,
    stepMinutes,
    kwh: of(100),
    kvarhLagging: of(75),
    kvarhLeading: of(0),
    quality: new Uint8Array(count),
  };
}

describe('meteredDays', () => {
  it('gives the day of the clock change its 23 hours', () => {
    // Summer time begins on 8 Mar 2026 in the United States (second Sunday of March, 15 U.S.C. 260a): 23 h x 100 kW.
    const days = meteredDays(steady('2026-03-07', '2026-03-10'), { from: '2026-03-07', to: '2026-03-10' }, zone);
    expect(days.map(({ expected }) => expected)).toEqual([96, 92, 96]);
    expect(days.map(({ kwh }) => kwh)).toEqual([2400, 2300, 2400]);
    expect(days[1]?.kvarhLagging).toBe(1725);
  });

  it('tells the highest mean of a quarter-hour, of half an hour and of an hour apart', () => {
    const load = steady('2026-01-01', '2026-01-02');
    // One quarter-hour from 10:15 at 120 kW: half an hour (30 + 25) / 0.5 h = 110 kW, an hour (25 + 30 + 25 + 25) = 105 kW.
    load.kwh[41] = 30;
    const [day] = meteredDays(load, { from: '2026-01-01', to: '2026-01-02' }, zone);
    expect(day?.peaks.map(({ windowMinutes, kw }) => [windowMinutes, kw])).toEqual([
      [15, 120],
      [30, 110],
      [60, 105],
    ]);
    expect(day?.peaks[0]?.kvar).toBe(75);
    // sqrt(120^2 + 75^2) = sqrt(20,025) = 141.51
    expect(day?.peaks[0]?.kva).toBeCloseTo(141.51, 2);
  });

  it('finds the highest kVA where the highest kW is not', () => {
    const load = steady('2026-01-01', '2026-01-02');
    load.kwh[41] = 26; // 104 kW and 75 kvar: 128.22 kVA
    load.kvarhLagging[60] = 50; // 100 kW and 200 kvar: 223.61 kVA
    const peak = meteredDays(load, { from: '2026-01-01', to: '2026-01-02' }, zone)[0]?.peaks[0];
    expect(peak?.kw).toBe(104);
    expect(peak?.kva).toBeCloseTo(223.61, 2);
  });

  it('counts what is missing and sums what is there; a window with a gap in it has no mean', () => {
    const load = steady('2026-01-01', '2026-01-02');
    load.kwh[41] = 30;
    for (const index of [42, 43]) {
      load.kwh[index] = load.kvarhLagging[index] = load.kvarhLeading[index] = NaN;
      load.quality[index] = 2;
    }
    load.quality[50] = 1;
    const [day] = meteredDays(load, { from: '2026-01-01', to: '2026-01-02' }, zone);
    // 94 x 25 + 5 kWh
    expect(day).toMatchObject({ expected: 96, missing: 2, estimated: 1, kwh: 2355 });
    // 10:00 to 10:30 is whole, (25 + 30) / 0.5 h; 10:00 to 11:00 is not.
    expect(day?.peaks.map(({ kw }) => kw)).toEqual([120, 110, 100]);
  });

  it('takes days outside of the readings for missing', () => {
    const days = meteredDays(steady('2026-01-02', '2026-01-03'), { from: '2026-01-01', to: '2026-01-04' }, zone);
    expect(days.map(({ missing }) => missing)).toEqual([96, 0, 96]);
    expect(days[0]?.peaks).toEqual([]);
  });

  it('has no kvar where the meter records none', () => {
    const load = steady('2026-01-01', '2026-01-02');
    load.kvarhLagging.fill(NaN);
    load.kvarhLeading.fill(NaN);
    const [day] = meteredDays(load, { from: '2026-01-01', to: '2026-01-02' }, zone);
    expect(day).toMatchObject({ kwh: 2400, kvarhLagging: null, kvarhLeading: null });
    expect(day?.peaks[0]).toMatchObject({ kw: 100, kvar: null, kva: null });
  });

  it('leaves out windows that hold no whole readings', () => {
    const [day] = meteredDays(steady('2026-01-01', '2026-01-02', 60), { from: '2026-01-01', to: '2026-01-02' }, zone);
    expect(day?.peaks.map(({ windowMinutes }) => windowMinutes)).toEqual([60]);
  });
});

describe('meteredOver', () => {
  it('adds days up and keeps the highest peak with its own kvar', () => {
    const load = steady('2026-01-01', '2026-01-03');
    load.kwh[100] = 40;
    load.kvarhLagging[100] = 10;
    const whole = meteredOver(meteredDays(load, { from: '2026-01-01', to: '2026-01-03' }, zone));
    // 192 x 25 + 15; 192 x 18.75 - 8.75
    expect(whole).toMatchObject({ expected: 192, missing: 0, kwh: 4815, kvarhLagging: 3591.25 });
    expect(whole.peaks[0]).toMatchObject({ kw: 160, kvar: 40 });
  });

  it('is nothing over nothing', () => expect(meteredOver([])).toMatchObject({ expected: 0, kwh: 0, peaks: [] }));
});
