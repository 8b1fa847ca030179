import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import type { LoadSeries } from '@/core/load';
import { meterInput, type MeterInput } from '@/schemas/engagement';
import { inTx } from '@/server/db/tx';
import type { ServiceError } from '@/server/errors';
import type { Engagement } from '@/server/models/Engagement';
import type { Actor } from '@/server/policies/actor';
import { openEngagement } from '@/server/services/engagements';
import { addMeter, metersOf, removeMeter } from '@/server/services/meters';
import { changeMotor, createMotor, openMotor } from '@/server/services/motors';
import { planBasis, priceSettings } from '@/server/services/plan-basis';
import { priceOn } from '@/server/services/price-basis';
import { pricedYear, pricingBasis } from '@/server/services/pricing';
import { keepSeries } from '@/server/services/reading-blocks';
import { engagementFrame } from '@/server/services/stations';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildEngagement, buildIntake } from '../setup/build';
import { millMotor, motorOf } from '../setup/motors';
import { chooseSchedule } from '../setup/plans';
import { keepBills, keepLoad, quarrySchedule, steadyLoad } from '../setup/tariff';

const summed = quarrySchedule.replace('demandWindow:', 'meters: summed\ndemandWindow:');
const november = { from: '2025-11-01', to: '2025-12-01' };
const newMeter = (label: string): MeterInput => meterInput.parse({ kind: 'new', label, serviceVoltageKv: 4.16 });

let actor: Actor;
let engagement: Engagement;
beforeEach(async () => {
  actor = await buildActor();
  engagement = await buildEngagement({ memberIds: [actor.id] });
});
afterAll(closePool);

const open = () => openEngagement(actor, engagement.code);

async function refusal(work: Promise<unknown>): Promise<ServiceError> {
  return work.then(
    () => Promise.reject(new Error('this was not refused')),
    (error: ServiceError) => error,
  );
}

/** November of 2025 of one meter: so many kW and kvar, with a peak of other kW in one interval. */
function loadOf(kw: number, kvar: number, peak: { at: number; kw: number }): LoadSeries {
  const load = steadyLoad(november.from, november.to, () => kw, kvar / kw);
  load.kwh[peak.at] = peak.kw / 4;
  return load;
}

async function keepAt(meterId: number, load: LoadSeries): Promise<void> {
  const intake = await buildIntake({ engagementId: engagement.id, meterId });
  await inTx(() => keepSeries(meterId, intake.id, load));
}

describe('meters of an engagement', () => {
  it('are of its site, each once; those of the site are offered', async () => {
    const stranger = await buildActor();
    expect(await refusal(addMeter(stranger, engagement.code, newMeter('B')))).toMatchObject({ status: 404 });
    const { meters } = await addMeter(actor, engagement.code, newMeter('Feeder 2'));
    expect(meters.map(({ label }) => label)).toEqual([(await open()).meter.label, 'Feeder 2']);
    const again = await refusal(addMeter(actor, engagement.code, { kind: 'known', id: meters[1]!.id }));
    expect(again).toMatchObject({ status: 409 });
    expect(await refusal(addMeter(actor, engagement.code, newMeter('Feeder 2')))).toMatchObject({ status: 422 });
    const other = await buildEngagement({ memberIds: [actor.id] });
    expect(await refusal(addMeter(actor, engagement.code, { kind: 'known', id: other.meterId }))).toMatchObject({
      status: 422,
    });
    const left = await removeMeter(actor, engagement.code, meters[1]!.id);
    expect(left.others.map(({ label }) => label)).toEqual(['Feeder 2']);
  });

  it('are named in the strip', async () => {
    await addMeter(actor, engagement.code, newMeter('Feeder 2'));
    const { strip, opened } = await engagementFrame(actor, engagement.code);
    expect(strip).toContainEqual({ label: 'Meters, summed', value: `${opened.meter.label} + Feeder 2` });
  });

  it('keep the first, and one that a motor stands behind or whose readings are kept', async () => {
    const { meters } = await addMeter(actor, engagement.code, newMeter('Feeder 2'));
    expect(await refusal(removeMeter(actor, engagement.code, meters[0]!.id))).toMatchObject({ status: 409 });
    expect(await refusal(removeMeter(actor, engagement.code, 9_999_999))).toMatchObject({ status: 404 });
    const motor = await createMotor(await open(), motorOf(millMotor, {}, { meterId: meters[1]!.id }));
    expect((await refusal(removeMeter(actor, engagement.code, meters[1]!.id))).message).toMatch(
      /M-1 stands behind Feeder 2/,
    );
    const opened = await openMotor(actor, motor.id);
    await changeMotor(opened, { ...motorOf(millMotor, {}, { meterId: meters[0]!.id }), version: motor.version });
    await keepAt(meters[1]!.id, loadOf(1000, 0, { at: 0, kw: 1000 }));
    expect((await refusal(removeMeter(actor, engagement.code, meters[1]!.id))).message).toMatch(/Undo it first/);
    expect((await metersOf(await open())).meters).toHaveLength(2);
  });

  it('are where motors stand: no other', async () => {
    const other = await buildEngagement();
    const motor = motorOf(millMotor, {}, { meterId: other.meterId });
    expect(await refusal(createMotor(await open(), motor))).toMatchObject({ status: 422 });
  });
});

describe('a bill of two meters', () => {
  // The first meter: 3,000 kW and 900 kvar, once 3,200 kW; the second 1,000 kW and 600 kvar, once 1,500 kW, in another interval. Together
  // they peak at 3,000 + 1,500 = 4,500 kW, not at 3,200 + 1,500. November has 30 days of 24 hours and the hour that comes twice: 721 h.
  const first = loadOf(3000, 900, { at: 1000, kw: 3200 });
  const second = loadOf(1000, 600, { at: 2000, kw: 1500 });

  async function buildTwo(scheduleText: string) {
    const { meters } = await addMeter(actor, engagement.code, newMeter('Feeder 2'));
    await keepLoad(engagement, first);
    await keepBills(engagement, [{ ...november, lines: [], totalMinor: null }]);
    await chooseSchedule(engagement.id, scheduleText);
    return meters[1]!.id;
  }

  it('is not priced before both meters have readings', async () => {
    await buildTwo(summed);
    const refused = await refusal(pricingBasis(await open()));
    expect(refused).toMatchObject({ status: 409, details: { station: 'intervals' } });
    expect(refused.message).toMatch(/No readings of meter Feeder 2/);
  });

  it('is not priced by a schedule of one meter', async () => {
    const meterId = await buildTwo(quarrySchedule);
    await keepAt(meterId, second);
    const refused = await refusal(pricingBasis(await open()));
    expect(refused).toMatchObject({ status: 409, details: { station: 'tariff' } });
    expect(refused.message).toMatch(/meters: summed/);
  });

  it('is priced on the sum of both, the peak that of both together', async () => {
    const meterId = await buildTwo(summed);
    await keepAt(meterId, second);
    const basis = await pricingBasis(await open());
    const [bill] = priceOn(basis, basis.schedule);
    // kWh: 721 h x 4,000 kW + (200 + 500) kW / 4 h; kvarh: 721 h x 1,500 kvar.
    expect(bill!.quantities.kwh!.value).toBeCloseTo(721 * 4000 + 175, 6);
    expect(bill!.quantities.kvarh!.value).toBeCloseTo(721 * 1500, 6);
    expect(bill!.quantities.maxKw!.value).toBeCloseTo(4500, 9);
  });

  it('changes with a motor by the registers of the meter it stands behind', async () => {
    const meterId = await buildTwo(summed);
    // The second meter draws no kvar: what a motor behind it delivers more is leading there and takes no lagging kvarh off the bill.
    await keepAt(meterId, loadOf(1000, 0, { at: 2000, kw: 1500 }));
    const motor = await createMotor(await open(), motorOf(millMotor, {}, { meterId }));
    const price = async () => {
      const basis = await planBasis(await open());
      const controls = [{ motorId: motor.id, controls: [{ holds: 'field-current' as const, fieldCurrentA: 160 }] }];
      const [standing, set] = await priceSettings(basis, [{}, { controls }]);
      return [standing, set].map((setting) => setting!.bills[0]!.quantities.kvarh!.value);
    };
    const [standing, behindSecond] = await price();
    expect(standing).toBeCloseTo(721 * 900, 6);
    expect(behindSecond).toBeCloseTo(standing!, 6);
    const opened = await openMotor(actor, motor.id);
    await changeMotor(opened, {
      ...motorOf(millMotor, {}, { meterId: engagement.meterId }),
      version: motor.version,
    });
    const [, behindFirst] = await price();
    expect(behindFirst).toBeLessThan(standing! - 100_000);
  });
});

describe('a meter whose files carry different registers', () => {
  it('has a month without kvarh named as missing, and the next one priced', async () => {
    const load = steadyLoad('2025-11-01', '2026-01-01', () => 3000, 0.3);
    // The first file, of November, carried kWh alone: 721 hours of four readings.
    load.kvarhLagging.fill(Number.NaN, 0, 4 * 721);
    load.kvarhLeading.fill(Number.NaN, 0, 4 * 721);
    await keepLoad(engagement, load);
    const december = { from: '2025-12-01', to: '2026-01-01' };
    await keepBills(
      engagement,
      [november, december].map((period) => ({ ...period, lines: [], totalMinor: null })),
    );
    await chooseSchedule(engagement.id);
    const { bills } = await pricedYear(await open());
    expect(bills.map(({ missingReadings }) => missingReadings)).toEqual([4 * 721, 0]);
    expect(bills[1]!.priced.quantities.kvarh!.value).toBeCloseTo(744 * 900, 6);
  });
});
