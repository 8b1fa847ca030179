import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import type { LoadSeries } from '@/core/load';
import { compareChoices, compareQuery, type CompareChoice } from '@/schemas/compare';
import { configureEnv } from '@/server/env';
import { comparePage } from '@/server/services/compare';
import { chooseSchedule } from '@/server/services/tariff';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildEngagement } from '../setup/build';
import { keepBills, keepLoad, quarrySchedule, steadyLoad, twelveMonths, type PrintedBill } from '../setup/tariff';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-tariffs-'));
const write = (name: string, text: string) => writeFileSync(path.join(folder, `${name}.yaml`), text);

const head = (id: string, more = '') => `schedule: ${id}
title: ${id.toUpperCase()}, a schedule of the test
currency: USD
timeZone: America/Chicago
source: { status: invented }
inForce: 2025-01-01
demandWindow: 15 min
straddle: days
${more}`;
// 0.05 a kWh, 0.01 a kvarh.
const perKvarh = `${head('per-kvarh')}quantities: { kwh: { sum: kwh }, kvarh: { sum: kvarhLagging } }
charges:
  energy: { per: kwh, rate: 0.05, group: energy, label: Energy }
  reactive: { per: kvarh, rate: 0.01, group: reactive, label: Reactive }
`;
// 0.055 a kWh and a fixed amount the contract supplies.
const flat =
  `${head('flat', 'contract: { rent: { unit: USD, default: 0, range: [0, 900], label: Rent } }\n')}quantities: { allKwh: { sum: kwh } }
charges:
  energy: { per: allKwh, rate: 0.055, group: energy, label: Energy }
  rent: { amount: rent, group: fixed, label: Rent of the meter }
`.replace('rent: { amount: rent', 'meter: { amount: rent');
const kva = `${head('kva')}quantities: { maxKva: { highest: kva, label: Highest apparent power } }
charges: { power: { per: maxKva, rate: 9, group: demand, label: Power } }
`;
write('quarry-lp', quarrySchedule);
write('per-kvarh', perKvarh);
write('flat', flat);
write('kva', kva);
write('euro', perKvarh.replace('per-kvarh', 'euro').replace('USD', 'EUR'));
write('later', perKvarh.replace('per-kvarh', 'later').replace('inForce: 2025-01-01', 'inForce: 2026-01-01'));
write('broken', perKvarh.replace('per-kvarh', 'broken').replace('per: kwh', 'per: kwhh'));
process.env.TARIFF_DIR = folder;
configureEnv({});

const periods = twelveMonths(2025, 11);
/** 1,000 kW and 750 kvar for 8,760 hours: 8,760,000 kWh, 6,570,000 kvarh, power factor 0.8. */
const load = steadyLoad('2025-11-01', '2026-11-01', () => 1000);

async function scene(
  scheduleId: string,
  options: { withLoad?: boolean; printed?: PrintedBill[]; series?: LoadSeries } = {},
) {
  const actor = await buildActor();
  const engagement = await buildEngagement({ memberIds: [actor.id] });
  const bare = periods.map((period): PrintedBill => ({ ...period, lines: [], totalMinor: null }));
  await keepBills(engagement, options.printed ?? bare);
  if (options.withLoad !== false) await keepLoad(engagement, options.series ?? load);
  const choice = { scheduleId, contract: {}, history: null, version: null, takeNewText: false };
  await chooseSchedule(actor, engagement.code, choice);
  return { actor, code: engagement.code };
}

const ask = ({ actor, code }: Awaited<ReturnType<typeof scene>>, address: string) =>
  comparePage(actor, code, new URLSearchParams(address));

afterAll(() => closePool());

describe('comparePage', () => {
  it('is closed to those who do not work on the engagement', async () => {
    const { code } = await scene('per-kvarh');
    for (const stranger of [await buildActor(), await buildActor({ role: 'client' })]) {
      await expect(comparePage(stranger, code, new URLSearchParams())).rejects.toMatchObject({ status: 404 });
    }
  });

  it('says what is missing where the year itself cannot be priced', async () => {
    const actor = await buildActor();
    const { code } = await buildEngagement({ memberIds: [actor.id] });
    const page = await comparePage(actor, code, new URLSearchParams('with=flat'));
    expect(page.obstacle).toMatchObject({ station: 'bills' });
    expect(page.view).toBeNull();
  });

  it('says so where the standing schedule itself cannot price the year', async () => {
    const series = { ...load, kvarhLagging: new Float64Array(load.kwh.length).fill(NaN) };
    const page = await ask(await scene('per-kvarh', { series }), 'with=flat');
    expect(page.obstacle).toMatchObject({ station: 'tariff', message: expect.stringContaining('kvarhLagging') });
    const printed = periods.map((period): PrintedBill => ({ ...period, lines: [], totalMinor: null }));
    const bare = await ask(await scene('per-kvarh', { withLoad: false, printed }), 'with=flat');
    expect(bare.obstacle?.message).toContain('does not give "kwh"');
  });

  it('lists every other schedule with the reason why it cannot be compared', async () => {
    const page = await ask(await scene('per-kvarh'), '');
    expect(page.candidates.map(({ id, chosen }) => [id, chosen])).toEqual([
      ['flat', false],
      ['kva', false],
      ['quarry-lp', false],
    ]);
    const reasons = Object.fromEntries(page.notComparable.map(({ id, reason }) => [id, reason]));
    expect(reasons['euro']).toBe('It prices in EUR, this year is billed in USD.');
    expect(reasons['later']).toBe('It is in force from 1 Jan 2026; the year begins on 1 Nov 2025.');
    expect(reasons['per-kvarh']).toBe('It is the standing schedule.');
    expect(reasons['broken']).toContain('kwhh');
  });

  // Standing: 438,000.00 and 65,700.00; instead 481,800.00. Less by 21,900.00.
  it('prices the year on both, with the finding as its heading', async () => {
    const { view, head: words } = await ask(await scene('per-kvarh'), 'with=flat');
    expect(words.headline).toBe(
      'On FLAT the same year would cost 21,900\u00a0USD less than on PER-KVARH, before any change of field current.',
    );
    const [standing, other] = view!.columns;
    expect(standing).toMatchObject({ totalMinor: 50_370_000, reactiveMinor: 6_570_000, isStanding: true });
    expect(standing!.groups).toMatchObject({ energy: 43_800_000, reactive: 6_570_000, demand: 0 });
    expect(other).toMatchObject({ totalMinor: 48_180_000, differenceMinor: -2_190_000, reactiveMinor: 0 });
    // November 2025 has 721 hours: 721,000 kWh.
    expect(standing!.months[0]).toEqual({ totalMinor: 4_145_750, reactiveMinor: 540_750 });
    expect(other!.months[0]).toEqual({ totalMinor: 3_965_500, reactiveMinor: 0 });
    // 503,700 / 8,760,000.
    expect(standing!.perKwh).toBeCloseTo(0.0575, 9);
    expect(view!.kwh).toBeCloseTo(8_760_000, 3);
  });

  // 65,700 (1 - s) = 43,800: a third of the kvarh must go; then 4,380,000 kvarh, pf 2 / sqrt(5) = 0.894.
  it('says at which power factor the two cost the same', async () => {
    const { view } = await ask(await scene('per-kvarh'), 'with=flat');
    expect(view!.byShare!.words).toEqual([
      {
        id: 'flat',
        name: 'FLAT',
        finding:
          "The two cost the same at an average power factor of 0.89 (33\u00a0% of today's lagging kvarh must go); below it PER-KVARH is dearer, above it FLAT.",
      },
    ]);
    expect(view!.byShare!.marks[0]!.place).toBeCloseTo(1 / 3, 5);
    // No fixed part on either side: what is cheaper does not change with the load.
    expect(view!.byFactor!.words[0]!.finding).toBe("FLAT is cheaper from 0.50 times to 1.50 times today's load.");
  });

  // Rent of 900.00 a month, 10,800.00 a year, against 21,900.00 f: equal at 0.4932, below the range; so cheaper from one half on.
  it('takes what the contract supplies from the address', async () => {
    const { view, candidates } = await ask(await scene('per-kvarh'), 'with=flat&flat.rent=900');
    expect(view!.columns[1]!.totalMinor).toBe(48_180_000 + 1_080_000);
    expect(candidates.find(({ id }) => id === 'flat')).toMatchObject({
      chosen: true,
      start: { contract: { rent: 900 } },
    });
  });

  it('names a schedule whose inputs are refused and prices the others', async () => {
    const { view, unpriced } = await ask(await scene('per-kvarh'), 'with=flat&flat.rent=1000&with=quarry-lp');
    expect(unpriced).toEqual([
      { id: 'flat', title: 'FLAT, a schedule of the test', reason: 'Rent lies between 0 and 900 USD.' },
    ]);
    expect(view!.columns.map(({ name }) => name)).toEqual(['PER-KVARH', 'Large power']);
  });

  it('does not take a name that is no schedule, nor letters for a number', async () => {
    const page = await ask(await scene('per-kvarh'), 'with=nothing&with=flat&flat.rent=much');
    expect(page.unpriced.map(({ id }) => id)).toEqual(['nothing', 'flat']);
    expect(page.view).toBeNull();
  });
});

describe('comparePage without meter intervals', () => {
  const printed = periods.map((period): PrintedBill => ({
    ...period,
    lines: [],
    totalMinor: null,
    quantities: { kwh: 700_000, kvarh: 500_000 },
  }));

  // 12 x (35,000 + 5,000) against 12 x 38,500; 8,400,000 kWh.
  it('prices from the printed quantities what they tell', async () => {
    const { view } = await ask(await scene('per-kvarh', { withLoad: false, printed }), 'with=flat');
    expect(view!.columns.map(({ totalMinor }) => totalMinor)).toEqual([48_000_000, 46_200_000]);
    expect([view!.route, view!.kwh, view!.byShare]).toEqual(['printed', 8_400_000, null]);
    expect(view!.noBreakEvens).toContain('Intervals');
  });

  it('leaves a schedule unpriced whose quantities the bills do not tell, and names them', async () => {
    const {
      view,
      unpriced,
      head: words,
    } = await ask(await scene('per-kvarh', { withLoad: false, printed }), 'with=kva');
    expect(view).toBeNull();
    expect(unpriced[0]!.reason).toBe(
      'The bills do not tell Highest apparent power (kVA), and no meter intervals are kept.',
    );
    expect(words.headline).toContain('cannot be priced');
  });
});

describe('compareQuery', () => {
  it('comes back from the address as it went', () => {
    const choices: CompareChoice[] = [
      { id: 'hv-3', contract: { contractKva: 3000 }, history: { maxKva: [2800, 2900.5] } },
      { id: 'flat', contract: {}, history: null },
    ];
    expect(compareChoices(compareQuery(choices))).toEqual(choices);
  });

  it('takes four at most, each once', () => {
    const query = new URLSearchParams('with=a&with=b&with=a&with=c&with=d&with=e');
    expect(compareChoices(query).map(({ id }) => id)).toEqual(['a', 'b', 'c', 'd']);
  });
});
