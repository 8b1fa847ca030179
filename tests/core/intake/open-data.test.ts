import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { previewIntervals, readIntervals } from '@/core/intake';
import { openDataCases } from '../../published/intake-open-data';
import { hasShared, sharedFile } from '../../setup/shared';

const utc = (ms: number) => new Date(ms).toISOString();

/** `actual` within `tolerance` of `expected`; NaN stands for an absent channel. */
function expectWithin(actual: number, expected: number, tolerance: number): void {
  if (Number.isNaN(expected)) expect(actual).toBeNaN();
  else expect(Math.abs(actual - expected)).toBeLessThanOrEqual(tolerance);
}

describe.skipIf(!hasShared)('readIntervals on open data (the folder beside the checkout)', () => {
  it.each(openDataCases)('reads $given.file as a separate program did', async ({ given, expected, tolerance }) => {
    const bytes = new Uint8Array(readFileSync(sharedFile('data', given.folder, given.file)));
    const { load, report } = await readIntervals(bytes, { fileName: given.file, timeZone: given.timeZone });
    expect(report.format).toBe(expected.format);
    expect(load.stepMinutes).toBe(expected.stepMinutes);
    expect(report.intervals).toBe(expected.intervals);
    expect(load.kwh).toHaveLength(expected.intervals);
    expect(report.missing).toBe(expected.missing);
    expect(report.duplicates).toBe(0);
    expect(report.estimated).toBe(expected.estimated ?? 0);
    expect(utc(report.firstMs)).toBe(expected.first);
    expect(utc(report.lastMs)).toBe(expected.last);
    expectWithin(report.totalKwh, expected.totalKwh, tolerance.energy);
    expectWithin(report.totalKvarhLagging, expected.totalKvarhLagging, tolerance.energy);
    expectWithin(report.totalKvarhLeading, expected.totalKvarhLeading, tolerance.energy);
    expectWithin(report.maxKw, expected.maxKw, tolerance.power);
    if (expected.peak) expect(utc(report.peak?.ms ?? 0)).toBe(expected.peak);
  });

  it.each(openDataCases)(
    'reads $given.file again with the map its preview gives',
    async ({ given, expected, tolerance }) => {
      const bytes = new Uint8Array(readFileSync(sharedFile('data', given.folder, given.file)));
      const options = { fileName: given.file, timeZone: given.timeZone };
      const preview = await previewIntervals(bytes, options);
      expect(preview.problems).toEqual([]);
      const columnMap = JSON.parse(JSON.stringify(preview.columnMap)) as typeof preview.columnMap;
      const { report } = await readIntervals(bytes, { ...options, columnMap });
      expect(report.intervals).toBe(expected.intervals);
      expectWithin(report.totalKwh, expected.totalKwh, tolerance.energy);
    },
  );

  it('puts every reading of the steel plant where its row says, midnight last in its own day', async () => {
    const bytes = new Uint8Array(readFileSync(sharedFile('data', 'steel-plant', 'steel-plant-2018.csv')));
    const { load } = await readIntervals(bytes, { fileName: 'year.csv', timeZone: 'Asia/Seoul' });
    const lines = new TextDecoder().decode(bytes).trim().split(/\r?\n/).slice(1);
    expect(lines).toHaveLength(load.kwh.length);
    // The rows stand in the order of time without a gap, so row k is interval k.
    lines.forEach((line, at) => {
      const [, kwh, lagging, leading] = line.split(',').map(Number);
      expect([load.kwh[at], load.kvarhLagging[at], load.kvarhLeading[at]]).toEqual([kwh, lagging, leading]);
    });
  });
});
