import { readFileSync } from 'node:fs';
import { compilePricing, priceBills, readSchedule } from '../../src/core/tariff';
import { calendarMonths, generatedYear } from './pricing';
import type { Measured } from './run';

const repricings = 1000;
const compared = 10;

/**
 * Prices a year (35,040 intervals of 15 minutes, twelve totals) on the heavy schedule a thousand times, every interval's kvar changed at
 * random before each, outside the time taken. Ten of them are priced again by `priceBills` and must agree to the cent.
 */
export function benchRepricing(): Measured[] {
  const schedule = readSchedule(readFileSync(new URL('heavy.yaml', import.meta.url), 'utf8'));
  const standing = generatedYear(schedule.timeZone);
  const { startMs, stepMinutes } = standing;
  const count = standing.kwh.length;
  const options = { periods: calendarMonths() };
  const pricing = compilePricing(schedule, { startMs, stepMinutes, count }, options);
  const changed = { ...standing, kvarhLagging: new Float64Array(count), kvarhLeading: new Float64Array(count) };
  let seed = 99;
  const change = (): void => {
    for (let i = 0; i < count; i++) {
      seed = (seed * 1_103_515_245 + 12_345) % 2_147_483_648;
      const net = standing.kvarhLagging[i]! - standing.kvarhLeading[i]! + 300 * (seed / 2_147_483_648 - 0.5);
      changed.kvarhLagging[i] = Math.max(0, net);
      changed.kvarhLeading[i] = Math.max(0, -net);
    }
  };
  pricing.totals(standing);
  for (let round = 0; round < 50; round++) pricing.totals(changed, { isActiveUnchanged: true });
  let cpuMicroseconds = 0;
  let wallMs = 0;
  const seen = new Set<number>();
  for (let round = 0; round < repricings; round++) {
    change();
    const used = process.cpuUsage();
    const start = performance.now();
    const totals = pricing.totals(changed, { isActiveUnchanged: true });
    wallMs += performance.now() - start;
    const { user, system } = process.cpuUsage(used);
    cpuMicroseconds += user + system;
    seen.add(totals[0]!);
    if (round % (repricings / compared) !== 0) continue;
    const again = priceBills(schedule, changed, options);
    const differs = again.some(({ total }, bill) => Math.round(100 * total) !== Math.round(100 * totals[bill]!));
    if (differs) throw new Error(`re-pricing ${round}: totals differ from priceBills`);
  }
  if (seen.size < repricings / 2) throw new Error('the changes of kvar must change the bills');
  return [
    {
      name: 'heavy: re-pricings of a year after a change of every kvar',
      perSecond: repricings / (cpuMicroseconds / 1e6),
      atLeast: 1000,
      figures: `per second of processor time (${((1000 * repricings) / wallMs).toFixed(0)} by the clock): ${repricings} of 35,040 intervals and 12 totals; ten equal to priceBills to the cent`,
    },
  ];
}
