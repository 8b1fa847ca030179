import { describe, expect, it } from 'vitest';
import { addBill } from '@/server/services/bills';
import { billsStation } from '@/server/services/bills-station';
import { openEngagement } from '@/server/services/engagements';
import { meteredPeriod } from '@/server/services/meter-check';
import type { LoadSeries } from '@/core/load';
import { buildActor, buildEngagement } from '../setup/build';
import { keepLoad, steadyLoad } from '../setup/tariff';

/**
 * November 2025 at 400 kW, December at 500 kW, kvarh three quarters of the kWh (pf 0.8), Central time.
 *
 * November has 30 days and the hour that comes twice (2 Nov 2025): 721 h x 400 kW = 288,400 kWh, x 0.75 = 216,300 kvarh.
 * December: 744 h x 500 kW = 372,000 kWh, 279,000 kvarh. A day: 9,600 kWh, in December 12,000 kWh.
 */
const november = { from: '2025-11-01', to: '2025-12-01' };
const december = { from: '2025-12-01', to: '2026-01-01' };

async function scene(spoil: (load: LoadSeries) => void = () => undefined) {
  const consultant = await buildActor();
  const engagement = await buildEngagement({
    memberIds: [consultant.id],
    timeZone: 'America/Chicago',
    yearFrom: '2025-11-01',
    yearTo: '2026-11-01',
  });
  const load = steadyLoad('2025-10-31', '2026-01-02', (month) => (month === '2025-12' ? 500 : 400));
  spoil(load);
  await keepLoad(engagement, load);
  const { code } = engagement;
  const add = (period: { from: string; to: string }, quantities: Record<string, number>) =>
    addBill(consultant, code, {
      ...period,
      quantities,
      lines: [{ label: 'Energy', amountMinor: 100_000 }],
      totalMinor: 100_000,
    });
  const checks = async () => {
    const { meterChecks } = await billsStation(await openEngagement(consultant, code));
    return meterChecks.map((one) => ({ ...one, remarks: one.remarks.map((text) => text.replaceAll('\u00a0', ' ')) }));
  };
  return { consultant, code, add, checks };
}

const agreement = ({ figures }: { figures: { name: string; agrees: boolean | null }[] }) =>
  Object.fromEntries(figures.map(({ name, agrees }) => [name, agrees]));

/** Index of a quarter-hour of a local day, Central standard time, since the load begins on 31 Oct, 05:00 UTC. */
const indexOf = (utc: string) => (Date.parse(utc) - Date.parse('2025-10-31T05:00:00Z')) / 900_000;

describe('bills beside the readings', () => {
  it('agree where the bill prints what the meter has, the hour that comes twice included', async () => {
    const { add, checks } = await scene();
    await add(november, { kwh: 288_400, maxKw: 400, kvarh: 216_300, powerFactor: 0.8 });
    const [check] = await checks();
    expect(check).toMatchObject({ expected: 721 * 4, missing: 0, estimated: 0, remarks: [] });
    expect(agreement(check!)).toEqual({ kwh: true, maxKw: true, kvarh: true, powerFactor: true });
  });

  it.each([
    // 288,400 - 9,600 of 30 Nov; 288,400 + 12,000 of 1 Dec
    ['ends a day earlier', { kwh: 278_800, maxKw: 400 }],
    ['ends a day later', { kwh: 300_400, maxKw: 400 }],
    // 288,400 - 9,600 of 1 Nov + 12,000 of 1 Dec
    ['lies a day later', { kwh: 290_800, maxKw: 400 }],
  ])('name that the energy agrees if the period %s', async (words, quantities) => {
    const { add, checks } = await scene();
    await add(november, quantities);
    const [check] = await checks();
    expect(agreement(check!)).toEqual({ kwh: false, maxKw: true });
    expect(check?.remarks).toHaveLength(1);
    expect(check?.remarks[0]).toContain(`It agrees if the period ${words}.`);
  });

  it('say by how much and how many per cent, and that a multiplier was used twice', async () => {
    const { add, checks } = await scene();
    await add(november, { kwh: 310_000 });
    await add(december, { kwh: 744_000 });
    const [one, other] = await checks();
    // 310,000 - 288,400 = 21,600; 21,600 / 288,400 = 7.49 %
    expect(one?.remarks).toEqual(['Energy: 310,000 kWh printed, 288,400 kWh metered (+21,600 kWh, 7.49 % more).']);
    expect(other?.remarks[0]).toContain('That is 2 times the metered: look at the multiplier of the meter.');
  });

  it('find the peak in a longer window, and on the day after the period', async () => {
    // 10:00 to 10:15 on 10 Dec at 600 kW: the half-hour has 550 kW. On 1 Jan 00:00 to 00:15 700 kW.
    const { add, checks } = await scene((load) => {
      load.kwh[indexOf('2025-12-10T16:00:00Z')] = 150;
      load.kwh[indexOf('2026-01-01T06:00:00Z')] = 175;
    });
    const bill = await add(december, { maxKw: 550 });
    expect((await checks())[0]).toMatchObject({
      billId: bill.id,
      figures: [{ name: 'maxKw', printed: 550, metered: 600, agrees: true }],
      remarks: ['Peak demand: it is the highest mean of 30 minutes.'],
    });
    const { add: addOther, checks: others } = await scene((load) => {
      load.kwh[indexOf('2026-01-01T06:00:00Z')] = 175;
    });
    await addOther(december, { maxKw: 700 });
    expect((await others())[0]?.remarks).toEqual([
      'Peak demand: 700 kW printed, 500 kW metered. It is the peak of 1 Jan, the day after the period.',
    ]);
  });

  it('know a power factor of the peak from one of the whole period', async () => {
    // At the peak 600 kW and 1,500 x 0.25 = 375 kvar: 600 / sqrt(600^2 + 375^2) = 0.848; over the period 0.80.
    const spoil = (load: LoadSeries) => void (load.kwh[indexOf('2025-12-10T16:00:00Z')] = 150);
    const ofPeak = await scene(spoil);
    await ofPeak.add(december, { powerFactor: 0.85 });
    expect((await ofPeak.checks())[0]?.remarks).toEqual([]);
    const ofPeriod = await scene(spoil);
    await ofPeriod.add(december, { powerFactor: 0.8 });
    expect((await ofPeriod.checks())[0]).toMatchObject({
      figures: [{ agrees: true }],
      remarks: ['Power factor: it is that of the whole period, not of the peak.'],
    });
    const neither = await scene(spoil);
    await neither.add(december, { powerFactor: 0.9 });
    expect((await neither.checks())[0]?.remarks[0]).toMatch(/0\.9 printed, 0\.848 at the peak and 0\.800 over the/);
  });

  it('say the least there can be where readings are missing, and contradict only what is below it', async () => {
    const { add, checks } = await scene((load) => {
      for (let index = indexOf('2025-12-20T06:00:00Z'); index < indexOf('2025-12-22T06:00:00Z'); index += 1) {
        load.kwh[index] = load.kvarhLagging[index] = load.kvarhLeading[index] = NaN;
        load.quality[index] = 2;
      }
    });
    await add(december, { kwh: 372_000, maxKw: 450 });
    const [check] = await checks();
    // two days of 96 readings; 372,000 - 24,000
    expect(check).toMatchObject({ expected: 2976, missing: 192 });
    expect(agreement(check!)).toEqual({ kwh: null, maxKw: false });
    expect(check?.remarks).toEqual([
      '192 of 2,976 readings are missing: energy is at least 348,000 kWh and the peak at least 500 kW.',
      'Peak demand: the bill prints less than the readings at hand.',
    ]);
  });

  it('tell how many readings are estimated', async () => {
    const { add, checks } = await scene((load) => {
      for (let index = 0; index < 8; index += 1) load.quality[indexOf('2025-12-20T06:00:00Z') + index] = 1;
    });
    await add(december, { kwh: 372_000 });
    expect((await checks())[0]).toMatchObject({
      estimated: 8,
      remarks: ['8 of 2,976 readings are estimated.'],
    });
  });

  it('are left out where no reading of their period is kept', async () => {
    const { add, checks } = await scene();
    await add({ from: '2026-03-01', to: '2026-04-01' }, { kwh: 1 });
    expect(await checks()).toEqual([]);
  });
});

describe('a period asked about while a bill is typed', () => {
  it('does not exist for who may not know of the engagement', async () => {
    const { code } = await scene();
    await expect(meteredPeriod(await buildActor(), code, december)).rejects.toMatchObject({ status: 404 });
  });

  it('gives what the bill should print', async () => {
    const { consultant, code } = await scene();
    expect(await meteredPeriod(consultant, code, december)).toMatchObject({
      kwh: 372_000,
      kvarh: 279_000,
      maxKw: 500,
      maxKva: 625,
      powerFactorAtPeak: 0.8,
      powerFactorOfPeriod: 0.8,
      missing: 0,
    });
    expect(await meteredPeriod(consultant, code, { from: '2026-05-01', to: '2026-06-01' })).toBeNull();
  });
});
