import { describe, expect, it } from 'vitest';
import { operatingPoint } from '@/core/machine';
import type { AssumedSaving } from '@/schemas/assumed-saving';
import type { AssumedValue, MotorView } from '@/schemas/motor';
import { kvarAt } from '@/components/charts/field-control';
import { vCurveEnds } from '@/components/charts/v-curve';
import { fieldControlData, fieldControlFinding } from '@/components/motors/control-lines';
import { vCurveData } from '@/components/motors/curves';
import { fieldMeter } from '@/components/motors/field-meter';
import { lossData, lossFinding } from '@/components/motors/loss-data';
import { hoursByNearest, planeData, planeFinding } from '@/components/motors/plane';
import { measureFirst, swingsOf, swingsTable } from '@/components/motors/swings';
import { motorsHeadline } from '@/components/motors/words';
import { openEngagement } from '@/server/services/engagements';
import { createMotor } from '@/server/services/motors';
import { buildActor, buildEngagement } from '../setup/build';
import { compressorMotor, millMotor, motorOf } from '../setup/motors';

async function motorsOfPlant(...inputs: ReturnType<typeof motorOf>[]): Promise<MotorView[]> {
  const actor = await buildActor();
  const { code } = await buildEngagement({ memberIds: [actor.id] });
  const opened = await openEngagement(actor, code);
  const motors: MotorView[] = [];
  for (const input of inputs) motors.push(await createMotor(opened, input));
  return motors;
}

const plain = (text: string) => text.replaceAll('\u00a0', ' ');
const brushless = { exciterKind: 'brushless', exciterFieldA: 5.1, exciterNoLoadA: 2.1 };

describe('the headline of the station', () => {
  it('says what each motor can deliver, what they do today, and who has little to give', async () => {
    // 5.5 A of 12 A make 0.46 of the rated emf, about 0.85 of the voltage: it absorbs at any load.
    const small = { output: 20, currentA: null, efficiencyPercent: null, fieldCurrentA: 12, fieldVoltageV: 20 };
    const motors = await motorsOfPlant(
      motorOf(millMotor),
      motorOf(compressorMotor),
      motorOf(compressorMotor, small, { name: 'M-3', fieldTodayA: 5.5 }),
    );
    const { title, lead } = motorsHeadline(motors);
    expect(plain(title)).toMatch(
      /^M-1 can deliver [\d,]+ kvar at its usual load, M-2 another \d+; today all absorb\. M-3 has little to give\.$/,
    );
    expect(plain(lead)).toMatch(
      /^Rated for 0\.80 leading, run at 109 A, 70 A, and 5\.5 A of field: between them they add/,
    );
  });
});

describe('pictures of a brushless motor', () => {
  it('are in the amperes its panel shows', async () => {
    const [motor] = await motorsOfPlant(motorOf(millMotor, brushless, { fieldTodayA: 3, fieldReadAt: 'panel' }));
    const meter = fieldMeter(motor!.machine);
    expect(meter.name).toBe('Exciter field current');
    expect(plain(meter.words(motor!.fieldTodayA))).toBe('3 A');
    // Rated field, 204 A, is shown as 5.1 A; a setting typed as 4.5 A comes back as 4.5
    expect(meter.shownA(204)).toBeCloseTo(5.1, 9);
    expect(meter.shownA(meter.fieldA(4.5))).toBeCloseTo(4.5, 9);
    const curves = vCurveData(motor!, null);
    expect(curves.fieldName).toBe('Exciter field current');
    expect(curves.limits.fieldA).toBeCloseTo(5.1, 9);
    expect(curves.today?.fieldA).toBeCloseTo(3, 5);
    expect(curves.curves.flatMap((curve) => curve.points).every((p) => p.fieldA >= 0)).toBe(true);
    expect(vCurveEnds(curves).field[1]).toBeLessThan(7);
  });
});

describe('the year in the plane of active and reactive power', () => {
  it('holds every running hour once, and names the nearest limit of each', async () => {
    const rules = [
      { days: ['Mon', 'Tue', 'Wed'], fromHour: 0, toHour: 24, load: 75, unit: 'percent' },
      { days: ['Thu'], fromHour: 0, toHour: 24, load: 40, unit: 'percent' },
    ];
    const [motor] = await motorsOfPlant(motorOf(millMotor, {}, { calendar: { rules, shutdowns: [] } }));
    const plane = planeData(motor!, { name: 'tried', fieldA: 180 });
    expect(plane.clouds.map((cloud) => cloud.shape)).toEqual(['circle', 'diamond']);
    for (const cloud of plane.clouds) {
      expect(cloud.squares.reduce((sum, square) => sum + square.hours, 0)).toBe(motor!.hoursRunning);
      expect(cloud.squares).toHaveLength(2);
    }
    const nearest = hoursByNearest(motor!, 180);
    expect(nearest.field + nearest.armature + nearest['pull-out']).toBe(motor!.hoursRunning);
    expect(plain(planeFinding(motor!, { name: 'tried', fieldA: 180 }))).toMatch(/at 180 A they do too\.$/);
  });

  it('counts hours beyond a limit, and those in which the field cannot hold the load', async () => {
    const margin = { limits: { pullOutMargin: 2 } };
    const [motor] = await motorsOfPlant(motorOf(millMotor, margin));
    const hours = motor!.hoursRunning.toLocaleString('en-US');
    const words = plain(planeFinding(motor!, { name: 'tried', fieldA: 20 }));
    // Today's pull-out of 1.67 lies under the 2 that was set; at 20 A the motor falls out of step
    expect(words).toBe(
      `Today ${hours} h lie below a pull-out margin of 2; at 20 A ${hours} h lie below a pull-out margin of 2.`,
    );
  });
});

describe('kvar over the shaft load for each thing held', () => {
  it('agrees at the usual load, and cold volts drive more current by the ratio of the resistances', async () => {
    const [motor] = await motorsOfPlant(motorOf(millMotor));
    const data = fieldControlData(motor!, { name: 'tried', fieldA: 150 });
    const [current, cold, factor, kvar] = data.lines;
    const usual = kvarAt(current!.points, 75)!;
    expect(kvarAt(factor!.points, 75)).toBeCloseTo(usual, 6);
    expect(kvarAt(kvar!.points, 75)).toBeCloseTo(usual, 6);
    expect(kvarAt(kvar!.points, 25)).toBeCloseTo(usual, 6);
    // Copper from 95 to 25 degC: (234.5 + 95) / (234.5 + 25) = 1.269750 times the current
    const same = operatingPoint(motor!.machine, { shaftKw: 0, fieldCurrentA: 150 * 1.26975 });
    expect(kvarAt(cold!.points, 0)).toBeCloseTo(-same.kvar, 2);
    // A held power factor delivers in proportion to the input, about: less at half load, more at full
    expect(kvarAt(factor!.points, 50)!).toBeLessThan(usual);
    expect(kvarAt(factor!.points, 100)!).toBeGreaterThan(usual);
    expect(plain(fieldControlFinding(data))).toMatch(
      /^From half to full load a held current goes from \d+ to \d+ kvar/,
    );
  });

  it('keeps regulators within the limits, and says which binds', async () => {
    const [motor] = await motorsOfPlant(motorOf(millMotor, { limits: { exciterOutputA: 160, leastPanelA: 60 } }));
    const data = fieldControlData(motor!, { name: 'tried', fieldA: 160 });
    expect(data.fieldBy).toBe('exciter');
    const kvar = data.lines.find((line) => line.name.includes('kvar'))!;
    for (const { loadPercent, kvarDelivered } of kvar.points) {
      const most = data.most.find((point) => point.loadPercent === loadPercent);
      if (most) expect(kvarDelivered).toBeLessThanOrEqual(most.kvarDelivered + 1e-6);
    }
    expect(data.least.some((point) => point.binding === 'least-field')).toBe(true);
  });
});

describe('loss per kvar', () => {
  it('counts from today and marks the least loss below it', async () => {
    const [motor] = await motorsOfPlant(motorOf(millMotor));
    const losses = lossData(motor!, { name: 'tried', fieldA: 164 })!;
    expect(losses.today.kvarDelivered).toBeCloseTo(motor!.kvarToday, 9);
    expect(losses.tried?.fieldA).toBeCloseTo(164, 6);
    expect(losses.least.lossKw).toBeLessThanOrEqual(losses.today.lossKw);
    const extraW = 1000 * (losses.tried!.lossKw - losses.today.lossKw);
    const gained = losses.tried!.kvarDelivered - losses.today.kvarDelivered;
    expect(losses.tried!.averageWPerKvar).toBeCloseTo(extraW / gained, 6);
    expect(plain(lossFinding(losses))).toMatch(/^At 164 A the next kvar costs \d+\.\d W; those gained since today/);
    expect(plain(lossFinding(lossData(motor!, null)!))).toMatch(/^Today the next kvar costs/);
  });
});

describe('what to measure first', () => {
  const assumed = (label: string, kvarEffect: [number, number]): AssumedValue => ({
    motorId: 1,
    motorName: 'M-1',
    field: label,
    label,
    value: 1.1,
    unit: 'pu',
    range: [0.8, 1.5],
    kvarMost: 1000,
    kvarEffect,
    why: '',
  });
  const values = [assumed('Xq', [-40, 10]), assumed('Xd', [-20, 25]), assumed('Ra', [0, 1])];

  it('is what moves the kvar most until the saving is worked out', () => {
    const swings = swingsOf(values, null);
    expect(swings.map((one) => one.assumed.label)).toEqual(['Xq', 'Xd', 'Ra']);
    expect(plain(measureFirst(swings, null))).toBe('Measure Xq of M-1 first: it moves what M-1 may deliver by 4 %.');
    expect(measureFirst([], null)).toContain('Nothing is assumed');
    expect(measureFirst(swingsOf([assumed('Ra', [0, 1])], null), null)).toContain('the rated power factor decides');
  });

  it('is what moves the saving most where it is, which may be another value', () => {
    const saving: AssumedSaving = {
      planName: 'Plan A',
      currency: 'USD',
      savingMinor: 10_000_000,
      fingerprint: '',
      swings: [
        { motorId: 1, field: 'Xq', atLowMinor: 9_900_000, atHighMinor: 10_050_000 },
        { motorId: 1, field: 'Xd', atLowMinor: 10_300_000, atHighMinor: 9_100_000 },
        { motorId: 1, field: 'Ra', atLowMinor: null, atHighMinor: 10_000_000 },
      ],
    };
    const swings = swingsOf(values, saving);
    expect(plain(measureFirst(swings, saving))).toBe(
      'Measure Xd of M-1 first: it moves the saving of Plan A by 9 %, 9,000 USD a year, and what M-1 may deliver by 2.5 %.',
    );
    const table = swingsTable(swings, saving);
    expect(table.rows[0]?.cells.share).toBeCloseTo(9, 9);
    expect(table.rows.map((row) => row.cells.saving)).toContain('not admissible');
  });
});
