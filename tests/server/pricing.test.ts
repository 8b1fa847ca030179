import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { beforeAll, describe, expect, it } from 'vitest';
import { priceBills, readSchedule, type PricedBill } from '@/core/tariff';
import { configureEnv } from '@/server/env';
import type { Actor } from '@/server/policies/actor';
import type { Engagement } from '@/server/models/Engagement';
import { Bill } from '@/server/models/Bill';
import { inTx } from '@/server/db/tx';
import { openEngagement } from '@/server/services/engagements';
import { pricedYear, pricingInputs } from '@/server/services/pricing';
import { chooseSchedule, tariffStation } from '@/server/services/tariff';
import { explainFigure } from '@/server/services/tariff-why';
import { tariffPage } from '@/server/services/tariff-page';
import { buildActor, buildEngagement } from '../setup/build';
import {
  keepBills,
  keepLoad,
  printAsPriced,
  quarrySchedule,
  steadyLoad,
  twelveMonths,
  type PrintedBill,
} from '../setup/tariff';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-tariffs-'));
writeFileSync(path.join(folder, 'quarry-lp.yaml'), quarrySchedule);
process.env.TARIFF_DIR = folder;
configureEnv({});

const periods = twelveMonths(2025, 11);
// kW by month: a shut-down in February, the year's highest in July.
const kwOf = (month: string) => (month === '2026-02' ? 500 : month === '2026-07' ? 4800 : 3000);
const load = steadyLoad('2025-11-01', '2026-11-01', kwOf);
// October 2024 to October 2025: October 2024 has left every look-back of eleven bills.
const history = { adjKw: [6000, ...Array.from({ length: 12 }, () => 4000)] };
const contract = { contractKw: 500 };
const choice = { scheduleId: 'quarry-lp', contract, history, version: null, takeNewText: false };

const priced = (): PricedBill[] => priceBills(readSchedule(quarrySchedule), load, { periods, contract, history });

interface Scene {
  actor: Actor;
  engagement: Engagement;
}

async function scene(printed: PrintedBill[], options: { withLoad?: boolean; choose?: boolean } = {}): Promise<Scene> {
  const actor = await buildActor();
  const engagement = await buildEngagement({ memberIds: [actor.id] });
  if (printed.length > 0) await keepBills(engagement, printed);
  if (options.withLoad !== false) await keepLoad(engagement, load);
  if (options.choose !== false) await chooseSchedule(actor, engagement.code, choice);
  return { actor, engagement };
}

const openOf = ({ actor, engagement }: Scene) => openEngagement(actor, engagement.code);

/** Changes the amount of a printed line, and the total and tax (2 %) with it where told. */
function plant(bill: PrintedBill, label: string, byMinor: number, taxMinor = 0): void {
  for (const line of bill.lines) {
    if (line[0] === label) line[1] += byMinor;
    if (line[0] === 'Tax charge') line[1] += taxMinor;
  }
  bill.totalMinor! += byMinor + taxMinor;
}

describe('pricingInputs', () => {
  it('sends to the station Bills where no bill is kept', async () => {
    const opened = await openOf(await scene([], { withLoad: false, choose: false }));
    await expect(pricingInputs(opened)).rejects.toMatchObject({ status: 409, details: { station: 'bills' } });
  });

  it('sends to the station Tariff where no schedule is chosen', async () => {
    const opened = await openOf(await scene(priced().map(printAsPriced), { withLoad: false, choose: false }));
    await expect(pricingInputs(opened)).rejects.toMatchObject({ status: 409, details: { station: 'tariff' } });
  });

  it('sends to the station Intervals where no readings are kept', async () => {
    const opened = await openOf(await scene(priced().map(printAsPriced), { withLoad: false }));
    await expect(pricingInputs(opened)).rejects.toMatchObject({ status: 409, details: { station: 'intervals' } });
  });

  it('refuses bills that overlap, naming both', async () => {
    const [first] = priced().map(printAsPriced);
    const opened = await openOf(await scene([first!, { ...first!, from: '2025-11-20', to: '2025-12-20' }]));
    await expect(pricingInputs(opened)).rejects.toThrow('Nov 2025 and Dec 2025 overlap');
  });

  it('lays the kept readings under the bills, local midnight to local midnight', async () => {
    const inputs = await pricingInputs(await openOf(await scene(priced().map(printAsPriced))));
    // 1 Nov 2025 begins at 05:00 UTC (daylight time), 1 Nov 2026 too: 365 days of 96 quarter-hours.
    expect(inputs.grid).toEqual({ startMs: Date.UTC(2025, 10, 1, 5), stepMinutes: 15, count: 365 * 96 });
    expect(inputs.load.kwh).toEqual(load.kwh);
    expect(inputs.periods).toEqual(periods);
    expect(inputs.contract).toEqual(contract);
  });

  it('is the same object until bills, readings or choice change', async () => {
    const opened = await scene(priced().map(printAsPriced));
    const first = await pricingInputs(await openOf(opened));
    expect(await pricingInputs(await openOf(opened))).toBe(first);
    const bill = await Bill.findOne({ where: { engagementId: opened.engagement.id }, rejectOnEmpty: true });
    await inTx(() => bill.update({ totalMinor: 1 }));
    const second = await pricingInputs(await openOf(opened));
    expect(second.dataKey).not.toBe(first.dataKey);
    expect(second.bills[0]?.totalMinor).toBe(1);
  });
});

describe('pricedYear', () => {
  it('prices the same bills as the core, and finds nothing in bills that print them', async () => {
    const opened = await openOf(await scene(priced().map(printAsPriced)));
    const year = await pricedYear(opened);
    expect(year.bills.map((bill) => bill.priced)).toEqual(priced());
    expect(year.findings).toEqual([]);
    expect(year.totals.differenceMinor).toBe(0);
    expect(year.readings).toEqual({ present: 35_040, expected: 35_040 });
    expect(year.route).toBe('intervals');
  });

  describe('with differences planted', () => {
    let opened: Scene;
    let year: Awaited<ReturnType<typeof pricedYear>>;
    beforeAll(async () => {
      const printed = priced().map(printAsPriced);
      // February: 0.75 x 6,000 kW of October 2024 instead of 0.75 x 4,000: 1,500 kW x 6.60 = 9,900.00, tax 198.00.
      plant(printed[3]!, 'Demand charge', 990_000, 19_800);
      // March at the summer rate: 3,000 kW x 0.95 / 0.80 = 3,563 kW; x (8.95 - 6.60) = 8,373.05, tax 167.46.
      plant(printed[4]!, 'Demand charge', 837_305, 16_746);
      // April on Sheet 1: 3,000 x 0.75 x 720 h = 1,620,000 kvarh x (0.0010 - 0.0012) = -324.00, tax -6.48.
      plant(printed[5]!, 'Reactive energy charge', -32_400, -648);
      // May: the printed total is 100.00 more than its lines.
      printed[6]!.totalMinor! += 10_000;
      // September: a line the schedule does not know.
      printed[10]!.lines.push(['Meter rental', 5_000]);
      printed[10]!.totalMinor! += 5_000;
      // October: energy wrong by an amount no cause gives, tax 2.47.
      plant(printed[11]!, 'Energy charge', 12_345, 247);
      // December: four cents on one line stay within tolerance.
      plant(printed[1]!, 'Energy charge', 4);
      opened = await scene(printed);
      year = await pricedYear(await openOf(opened));
    });

    it('finds each, names its cause and its amount with the tax on it', () => {
      const found = year.findings.map(({ letter, kind, amountMinor, lineAmountMinor }) => [
        letter,
        kind,
        amountMinor,
        lineAmountMinor,
      ]);
      expect(found).toEqual([
        ['A', 'ratchet-not-released', 1_009_800, 990_000],
        ['B', 'wrong-season', 854_051, 837_305],
        ['C', 'wrong-version', -33_048, -32_400],
        ['D', 'bill-arithmetic', 10_000, 10_000],
        ['E', 'line-not-in-schedule', 5_000, 5_000],
        ['F', 'unexplained', 12_592, 12_345],
      ]);
    });

    it('says what was tried and how far each missed', () => {
      const [ratchet, season] = year.findings;
      expect(ratchet?.causes[0]).toMatchObject({ fits: true, missMinor: 0 });
      expect(ratchet?.causes[0]?.label).toContain('6,000 kW of Oct 2024 still counted');
      expect(season?.causes[0]).toMatchObject({ fits: true, missMinor: 0, label: 'summer rate for the whole bill' });
      const unexplained = year.findings.at(-1)!;
      expect(unexplained.causes.every((cause) => !cause.fits && cause.missMinor !== 0)).toBe(true);
      expect(unexplained.sentence).toMatch(/misses by/);
    });

    it('adds up: findings make the whole difference but for what stays within tolerance', () => {
      const found = year.findings.reduce((sum, finding) => sum + finding.amountMinor, 0);
      expect(year.totals.differenceMinor - found).toBe(4);
      expect(year.bills[1]?.findings).toEqual([]);
    });

    it('puts the finding into the heading of the page', async () => {
      const page = await tariffPage(opened.actor, opened.engagement.code);
      // 10,098.00 + 8,540.51 - 330.48 + 100.00 + 50.00 + 125.92 = 18,583.95
      expect(page.words.headline).toBe(
        'The utility over-billed 18,583.95\u00a0USD in six of twelve bills; the other six agree within four cents.',
      );
      expect(page.sheet?.rows[3]?.findings).toEqual(['A']);
      expect(page.sheet?.rows[3]?.ratchet).toBe(true);
      expect(page.sheet?.rows[0]?.ratchet).toBe(false);
      expect(page.reactive?.data.bills).toHaveLength(12);
    });

    it('explains a figure: formula, peak day, look-back, causes, source', async () => {
      const billId = year.bills[3]!.bill.id;
      const why = await explainFigure(opened.actor, opened.engagement.code, { bill: billId, figure: 'line:demand' });
      expect(why.title).toContain('19,800.00\u00a0USD');
      expect(why.steps.map((step) => step.label)).toContain('Billed demand');
      expect(why.causes?.[0]).toMatchObject({ off: 'to the cent', fits: true });
      expect(why.day).toMatchObject({ date: '2026-02-01', stepMinutes: 15 });
      expect(why.day?.points).toHaveLength(96);
      expect(why.day?.peak).toMatchObject({ minute: 0, kw: 500, kvarLagging: 375, powerFactor: 0.8 });
      const bars = why.lookBack?.bars ?? [];
      expect(bars.filter((bar) => bar.counted)).toHaveLength(11);
      expect(bars.find((bar) => bar.name === 'Oct 2024')).toMatchObject({ value: 6000, counted: false, used: false });
      expect(bars.at(-1)).toMatchObject({ name: 'Feb 2026', current: true });
      const next = await explainFigure(opened.actor, opened.engagement.code, { bill: billId, figure: 'name:yearKw' });
      expect(next.title).toContain('4,000 kW');
    });

    it('has no figure that is not on the sheet', async () => {
      const billId = year.bills[0]!.bill.id;
      const ask = (figure: string, bill = billId) =>
        explainFigure(opened.actor, opened.engagement.code, { bill, figure });
      await expect(ask('line:nothing')).rejects.toMatchObject({ status: 404 });
      await expect(ask('name:constructor')).rejects.toMatchObject({ status: 404 });
      await expect(ask('total', 999_999)).rejects.toMatchObject({ status: 404 });
    });

    it('is closed to strangers and to the client, as if it were not there', async () => {
      const stranger = await buildActor();
      const client = await buildActor({ role: 'client', clientId: opened.engagement.clientId });
      for (const actor of [stranger, client]) {
        await expect(tariffStation(actor, opened.engagement.code)).rejects.toMatchObject({ status: 404 });
        const query = { bill: year.bills[0]!.bill.id, figure: 'total' };
        await expect(explainFigure(actor, opened.engagement.code, query)).rejects.toMatchObject({ status: 404 });
      }
    });
  });

  it('prices from the printed quantities where no intervals are kept, and says so', async () => {
    // 1,000 kW, 720,000 kWh, 540,000 kvarh, pf 0.80 in November 2025 (winter, Sheet 1); adjusted 1,187.5 -> 1,188 kW;
    // contract 500, no history: 415.00 + 36,000.00 + 7,840.80 + 540.00 = 44,795.80; tax 895.916 -> 895.92.
    const quantities = { kwh: 720_000, kvarh: 540_000, maxKw: 1000, kvarThen: 750, somethingElse: 3 };
    const printed = { from: '2025-11-01', to: '2025-12-01', lines: [], totalMinor: 4_569_172, quantities };
    const actor = await buildActor();
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    await keepBills(engagement, [{ ...printed, lines: [] }]);
    await chooseSchedule(actor, engagement.code, { ...choice, history: null });
    const year = await pricedYear(await openEngagement(actor, engagement.code));
    expect(year.route).toBe('printed');
    expect(year.totals.pricedMinor).toBe(4_569_172);
    expect(year.findings).toEqual([]);
  });

  it('says which bill lacks which quantity on the printed route', async () => {
    const actor = await buildActor();
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    await keepBills(engagement, [
      { from: '2025-11-01', to: '2025-12-01', lines: [], totalMinor: 1, quantities: { kwh: 5 } },
    ]);
    await chooseSchedule(actor, engagement.code, { ...choice, history: null });
    const opened = await openEngagement(actor, engagement.code);
    await expect(pricedYear(opened)).rejects.toMatchObject({ status: 409 });
    const station = await tariffStation(actor, engagement.code);
    expect(station.obstacle?.message).toContain('November 2025');
  });
});

describe('bills whose readings are missing in part', () => {
  const spoilt = async (fromDay: number, days: number, timeZone = 'America/Chicago') => {
    const actor = await buildActor();
    const engagement = await buildEngagement({ memberIds: [actor.id], timeZone });
    await keepBills(engagement, priced().map(printAsPriced));
    const holed = { ...load, kwh: load.kwh.slice(), quality: load.quality.slice() };
    holed.kwh.fill(NaN, fromDay * 96, (fromDay + days) * 96);
    holed.quality.fill(2, fromDay * 96, (fromDay + days) * 96);
    await keepLoad(engagement, holed);
    await chooseSchedule(actor, engagement.code, choice);
    return { actor, engagement };
  };

  it('accuse nobody: the bill right to the cent is compared with nothing, and the page says why', async () => {
    const made = await spoilt(10, 5);
    const opened = await openOf(made);
    const year = await pricedYear(opened);
    expect(year.findings).toEqual([]);
    expect(year.bills.map(({ missingReadings }) => missingReadings)).toEqual([5 * 96, ...Array(11).fill(0)]);
    expect(year.bills[0]?.differenceMinor).toBeNull();
    expect(year.bills[1]?.differenceMinor).toBe(0);
    expect(year.totals.differenceMinor).toBe(0);
    const { words } = await tariffPage(made.actor, made.engagement.code);
    expect(words.headline).toBe('The utility billed rightly: all eleven bills agree to the cent.');
    expect(words.lead).toContain('480 readings are missing: Nov 2025 is priced too low and compared with no bill.');
  });

  it('nor does one accuse whose ratchet would stand on them', async () => {
    // July's 4,800 kW (the load's July ends an hour into August) set three quarters of themselves, 3,600 kW and more, for
    // September and October, whose own 3,000 kW are less: without July both are priced too low.
    const julyDay = Math.floor(load.kwh.indexOf(4800 / 4) / 96);
    const year = await pricedYear(await openOf(await spoilt(julyDay, 32)));
    expect(year.findings).toEqual([]);
    const differences = [...Array(8).fill(0), null, null, null, null];
    expect(year.bills.map(({ differenceMinor }) => differenceMinor)).toEqual(differences);
  });

  it('are none to compare where every bill lacks some', async () => {
    const { actor, engagement } = await spoilt(10, 350);
    const { words } = await tariffPage(actor, engagement.code);
    expect(words.headline).toBe(
      'Readings are missing, so none of the twelve bills can be held against the schedule yet.',
    );
    expect(words.tolerance).toBe('No bill could be compared.');
  });

  it('and a site under another clock than its schedule are told', async () => {
    const abroad = await spoilt(0, 0, 'Europe/Oslo');
    const { words } = await tariffPage(abroad.actor, abroad.engagement.code);
    expect(words.lead).toContain('by the clock of America/Chicago, the site lies under that of Europe/Oslo');
    const here = await spoilt(0, 0);
    expect((await tariffPage(here.actor, here.engagement.code)).words.lead).not.toContain('clock');
  });
});
