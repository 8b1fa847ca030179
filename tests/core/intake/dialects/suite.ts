import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { wallOf } from '../files';
import { expectRead, type Dialect } from './dialect';
import { espiDialects } from './espi';
import { meaningDialects } from './meaning';
import { nemDialects } from './nem12';
import { numberDialects } from './numbers';
import { seriesOf } from './series';
import { severalDialects } from './several';
import { shapeDialects } from './shapes';
import { sheetDialects } from './sheets';
import { timeDialects } from './times';
import { wideDialects } from './wide';

/** Every way to write the series down. */
export const dialects: Dialect[] = [
  ...shapeDialects,
  ...numberDialects,
  ...timeDialects,
  ...severalDialects,
  ...wideDialects,
  ...meaningDialects,
  ...sheetDialects,
  ...nemDialects,
  ...espiDialects,
];

/** Reads the series of some zones back from every dialect, the process itself in another zone. */
export function readsEveryDialect(processZone: string, zones: string[]): void {
  const before = process.env.TZ;
  beforeAll(() => {
    process.env.TZ = processZone;
  });
  afterAll(() => {
    process.env.TZ = before;
  });

  it(`runs in ${processZone}`, () => {
    // January and July of 2025: the machine's clock against the platform's calendar of the zone.
    for (const ms of [Date.UTC(2025, 0, 15), Date.UTC(2025, 6, 15)]) {
      const { date, time } = wallOf(ms, processZone);
      expect(0 - new Date(ms).getTimezoneOffset()).toBe((Date.parse(`${date}T${time}:00Z`) - ms) / 60_000);
    }
  });

  it('has forty dialects and more, no name twice', () => {
    expect(new Set(dialects.map(({ name }) => name)).size).toBe(dialects.length);
    expect(dialects.length).toBeGreaterThanOrEqual(40);
  });

  describe.each(zones)('the series of %s is read from', (zone) => {
    it.each(dialects.filter(({ stepMinutes, fits }) => fits?.(seriesOf(zone, stepMinutes)) ?? true))(
      '$name',
      (dialect) => expectRead(dialect, zone),
    );
  });
}
