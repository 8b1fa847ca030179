import { Readable } from 'node:stream';
import { beforeEach, describe, expect, it } from 'vitest';
import { localDateStartMs } from '@/core/load';
import { fixField } from '@/core/machine';
import { shaftLoadInput, submeterQuery, type ShaftLoadInput } from '@/schemas/shaft-load';
import { storeOriginal } from '@/server/drawer';
import type { ServiceError } from '@/server/errors';
import { inTx } from '@/server/db/tx';
import { MotorLoad } from '@/server/models/MotorLoad';
import { SubmeterBlock } from '@/server/models/SubmeterBlock';
import { SubmeterFile } from '@/server/models/SubmeterFile';
import { Trail } from '@/server/models/Trail';
import type { Actor } from '@/server/policies/actor';
import { openEngagement } from '@/server/services/engagements';
import { loadSourcesOf } from '@/server/services/load-sources';
import { changeShaftLoad, shaftLoadViewOf } from '@/server/services/motor-loads';
import {
  changeMotor,
  completedOf,
  createMotor,
  motorsOf,
  openMotor,
  removeMotor,
  type OpenMotor,
} from '@/server/services/motors';
import { calendarOfProfile, gatheredHours, yearLoadOf, shaftLoadOf } from '@/server/services/shaft-load';
import { authorizeSubmeter, removeSubmeter, takeSubmeter } from '@/server/services/submeter';
import { buildActor, buildEngagement } from '../setup/build';
import { millMotor, motorOf } from '../setup/motors';

const zone = 'America/Chicago';
const startMs = localDateStartMs('2026-03-02', zone);

let actor: Actor;
let found: OpenMotor;

beforeEach(async () => {
  actor = await buildActor();
  const year = { yearFrom: '2026-03-02', yearTo: '2026-03-09' };
  const engagement = await buildEngagement({ memberIds: [actor.id], timeZone: zone, ...year });
  const opened = await openEngagement(actor, engagement.code);
  const { id } = await createMotor(opened, motorOf(millMotor));
  found = await openMotor(actor, id);
});

/** The error a piece of work ends with. */
async function refusal(work: Promise<unknown>): Promise<ServiceError> {
  return work.then(
    () => Promise.reject(new Error('this was not refused')),
    (error: ServiceError) => error,
  );
}

/** Rows of the motor of this test. */
const mine = () => ({ where: { motorId: found.motor.id } });

const flat = (load: number) => new Array<number>(24).fill(load);

function asked(given: Partial<ShaftLoadInput>): ShaftLoadInput {
  return shaftLoadInput.parse({
    version: 0,
    source: 'calendar',
    profile: null,
    whenMissing: 'calendar',
    loadTest: [],
    ...given,
  });
}

/** Quarter-hours of the week from Monday 2 March: kW at the motor, blank where not given. */
function submeterCsv(kw: (number | null)[]): string {
  const rows = kw.map((value, index) => {
    const stamp = new Date(startMs + index * 900_000).toISOString().replace('T', ' ').slice(0, 16);
    return `${stamp}+00:00,${value ?? ''}`;
  });
  return ['Interval start,Active power kW', ...rows].join('\n');
}

async function bring(content: string, query: Record<string, string> = {}) {
  const file = await storeOriginal(Readable.from([Buffer.from(content)]));
  return takeSubmeter(actor, found, { ...submeterQuery.parse({ fileName: 'mill.csv', ...query }), ...file });
}

/** Input of the motor at its field of today. [kW] */
function inputAt(shaftKw: number): number {
  const { motor: machine } = completedOf(found.motor);
  return fixField(machine, { fieldCurrentA: found.motor.fieldTodayA }).taken(shaftKw).inputKw;
}

describe('who may say where a load comes from', () => {
  it('is nobody outside the engagement, and nobody once it is closed', async () => {
    const stranger = await buildActor();
    expect(await refusal(authorizeSubmeter(stranger, found.motor.id))).toMatchObject({ status: 404 });
    expect(await refusal(authorizeSubmeter(actor, 99_999))).toMatchObject({ status: 404 });
    await inTx(() => found.opened.engagement.update({ closedAt: new Date() }));
    found = await openMotor(actor, found.motor.id);
    expect(await refusal(authorizeSubmeter(actor, found.motor.id))).toMatchObject({ status: 409 });
    expect(await refusal(changeShaftLoad(found, asked({})))).toMatchObject({ status: 409 });
    expect(await refusal(removeSubmeter(found, 1))).toMatchObject({ status: 409 });
  });
});

describe('a profile', () => {
  const profile = { unit: 'percent' as const, weekday: flat(60).fill(0, 0, 6), saturday: flat(40), sunday: flat(0) };

  it('is refused without 24 hours, above 150 %, or where it is missing', () => {
    const faults = (given: object) =>
      shaftLoadInput.safeParse({ ...asked({}), ...given }).error?.issues.map((issue) => issue.path.join('.'));
    expect(faults({ source: 'profile' })).toEqual(['profile']);
    expect(faults({ profile: { ...profile, saturday: [1, 2] } })).toEqual(['profile.saturday']);
    expect(faults({ profile: { ...profile, sunday: flat(0).with(4, 160) } })).toEqual(['profile.sunday.4']);
  });

  it('is refused at the hours whose load the field of today cannot hold', async () => {
    const heavy = { ...profile, unit: 'kW' as const, weekday: flat(900).with(9, 9_000) };
    const error = await refusal(changeShaftLoad(found, asked({ source: 'profile', profile: heavy })));
    expect(error).toMatchObject({ status: 422 });
    expect(Object.keys(error.fields ?? {})).toEqual(['profile.weekday.9']);
    expect(error.fields?.['profile.weekday.9']?.[0]).toMatch(/9,000 kW: it falls out of step/);
    expect(await MotorLoad.count(mine())).toBe(0);
  });

  it('gives the hours of the year and the usual load of the station', async () => {
    const view = await changeShaftLoad(found, asked({ source: 'profile', profile }));
    // The week of Monday 2 March 2026: five weekdays of 18 h, one Saturday of 24 h; Sunday stands, and the clock change with it.
    expect(view.year).toMatchObject({ hoursRunning: 114, hoursMissing: 0 });
    expect(view.year.usualShaftKw).toBeCloseTo(0.6 * 2000 * 0.7457, 0);
    const [motor] = await motorsOf(found.opened);
    expect(motor).toMatchObject({ hoursRunning: 114, usualShaftKw: view.year.usualShaftKw });
  });

  it('keeps the shutdowns of the calendar', () => {
    const calendar = calendarOfProfile(profile, {
      rules: [],
      shutdowns: [{ from: '2026-03-03', lastDay: '2026-03-03' }],
    });
    const { motor: machine } = completedOf(found.motor);
    const { hours } = yearLoadOf(
      { calendar, machine, fieldTodayA: 109 },
      { from: '2026-03-02', to: '2026-03-09', timeZone: zone },
    );
    expect(hours.map((one) => one.hours)).toEqual([72, 24]);
  });

  it('refuses a field of today that cannot hold it', async () => {
    await changeShaftLoad(found, asked({ source: 'profile', profile: { ...profile, weekday: flat(90) } }));
    const input = { ...motorOf(millMotor, {}, { fieldTodayA: 40 }), version: found.motor.version };
    const rules = input.calendar.rules.map((rule) => ({ ...rule, load: 20 }));
    const error = await refusal(changeMotor(found, { ...input, calendar: { rules, shutdowns: [] } }));
    expect(error.fields?.fieldTodayA?.[0]).toMatch(/its profile reaches 1,34\d kW/);
  });

  it('tells the second of two who save that the first was faster', async () => {
    await changeShaftLoad(found, asked({ source: 'profile', profile }));
    const error = await refusal(changeShaftLoad(found, asked({ source: 'calendar' })));
    expect(error).toMatchObject({ status: 409, details: { theirs: { source: 'profile' } } });
  });
});

describe('a submeter', () => {
  const week = 7 * 96;

  it('is refused where it cannot be read, carries no power, or is not of this motor', async () => {
    expect(await refusal(bring('no table at all'))).toMatchObject({ status: 422 });
    const idle = await refusal(bring(submeterCsv(new Array(week).fill(0))));
    expect(idle.message).toMatch(/carries no energy or power drawn/);
    const watts = await refusal(bring(submeterCsv(new Array(week).fill(900_000))));
    expect(watts.fields?.factor?.[0]).toMatch(/multiplier 0\.001/);
    expect(await SubmeterFile.count(mine())).toBe(0);
    expect(await refusal(changeShaftLoad(found, asked({ source: 'submeter' })))).toMatchObject({
      status: 422,
      fields: { source: [expect.stringContaining('Bring in')] },
    });
    expect(await refusal(removeSubmeter(found, 7))).toMatchObject({ status: 404 });
  });

  it('tells the shaft load: input less the losses at the field of today, gaps by the calendar, as counted', async () => {
    const high = inputAt(1100);
    const low = inputAt(500);
    // Monday and Tuesday at 1,100 kW, Wednesday missing, Thursday at 500 kW, then standstill.
    const kw = Array.from({ length: week }, (_, i) => (i < 192 ? high : i < 288 ? null : i < 384 ? low : 0));
    const view = await bring(submeterCsv(kw.map((value) => value && Number(value.toFixed(6)))));
    expect(view).toMatchObject({ source: 'submeter', version: 1, whenMissing: 'calendar' });
    expect(view.files[0]).toMatchObject({ fileName: 'mill.csv', stepMinutes: 15, intervals: week, missing: 96 });
    expect(view.files[0]!.highestKw).toBeCloseTo(high, 3);
    // On Wednesday the calendar runs 6 to 22 h at 75 %: 16 h.
    expect(view.year).toMatchObject({ hoursMissing: 24, hoursBeyond: 0 });
    expect(view.year.hoursRunning).toBe(48 + 16 + 24);
    expect(view.year.usualShaftKw).toBeCloseTo(1100, 1);
    const [source] = await loadSourcesOf([found.motor]);
    const { motor: machine } = completedOf(found.motor);
    const grid = { startMs, stepMinutes: 60, count: 120 };
    const hourly = shaftLoadOf({ ...source!, machine, fieldTodayA: found.motor.fieldTodayA }, grid, zone);
    expect(hourly.shaftKw[10]).toBeCloseTo(1100, 1);
    expect(hourly.shaftKw[72 + 10]).toBeCloseTo(500, 1);
    expect(hourly.shaftKw[48 + 10]).toBeCloseTo(0.75 * machine.ratedOutputKw, 6);
    expect(hourly.shaftKw[48 + 2]).toBe(0);
    const standing = await changeShaftLoad(found, asked({ version: 1, source: 'submeter', whenMissing: 'standstill' }));
    expect(standing.year.hoursRunning).toBe(48 + 24);
  });

  it('takes the multiplier, lets the later file stand, and goes back to the calendar with the last one', async () => {
    const kw = inputAt(800);
    await bring(submeterCsv(new Array(week).fill(kw / 40)), { factor: '40' });
    const both = await bring(submeterCsv(new Array(96).fill(inputAt(400))), { fileName: 'monday.csv' });
    expect(both.files.map((file) => file.fileName)).toEqual(['mill.csv', 'monday.csv']);
    expect(both.files[0]!.highestKw).toBeCloseTo(kw, 6);
    expect(both.year.hoursRunning).toBe(167);
    const hours = (await motorsOf(found.opened))[0]!;
    expect(hours.usualShaftKw).toBeCloseTo(800, 1);
    const one = await removeSubmeter(found, both.files[0]!.id);
    expect(one).toMatchObject({ source: 'submeter', year: { hoursMissing: 143 } });
    const none = await removeSubmeter(found, both.files[1]!.id);
    expect(none).toMatchObject({ source: 'calendar', files: [] });
    const submeterFileId = both.files.map((file) => file.id);
    expect(await SubmeterBlock.count({ where: { submeterFileId } })).toBe(0);
  });

  it('leaves its trail without its figures, and goes with its motor', async () => {
    const { files } = await bring(submeterCsv(new Array(week).fill(inputAt(800))));
    const submeterFileId = files[0]!.id;
    const block = await SubmeterBlock.findOne({ where: { submeterFileId }, rejectOnEmpty: true });
    const made = await Trail.findOne({ where: { subject: 'SubmeterBlock', action: 'create', subjectId: block.id } });
    expect(made?.after?.values).toBe(`${week * 8} bytes`);
    await removeMotor(found, { version: found.motor.version });
    const left = [
      SubmeterFile.count(mine()),
      MotorLoad.count(mine()),
      SubmeterBlock.count({ where: { submeterFileId } }),
    ];
    expect(await Promise.all(left)).toEqual([0, 0, 0]);
    const gone = { subject: 'SubmeterFile', action: 'delete', subjectId: submeterFileId };
    expect(await Trail.count({ where: gone })).toBe(1);
  });
});

describe('a load test', () => {
  const row = (shaftKw: number, fieldA: number) => {
    const { motor: machine } = completedOf(found.motor);
    const { inputKw, kvar, lineCurrentA } = fixField(machine, { fieldCurrentA: fieldA }).point(shaftKw);
    return {
      fieldA,
      inputKw,
      kvar: Math.abs(kvar),
      sense: kvar < 0 ? ('leading' as const) : ('lagging' as const),
      lineA: lineCurrentA,
    };
  };

  it('is refused with figures no instrument shows', () => {
    const issues = shaftLoadInput.safeParse({
      ...asked({}),
      loadTest: [{ fieldA: 0, inputKw: -1, powerFactor: 2, sense: 'leading' }],
    }).error?.issues;
    expect(issues?.map((issue) => issue.path.join('.'))).toEqual([
      'loadTest.0.fieldA',
      'loadTest.0.inputKw',
      'loadTest.0.powerFactor',
    ]);
  });

  it('gives shaft loads and agrees with the data it was made of', async () => {
    const view = await changeShaftLoad(found, asked({ loadTest: [row(600, 109), row(1100, 150)] }));
    expect(view.test).toMatchObject({ agrees: true, compared: 2, suspects: [] });
    expect(view.test!.rows.map((one) => Math.round(one.shaftKw))).toEqual([600, 1100]);
    expect((await shaftLoadViewOf(found)).loadTest).toHaveLength(2);
  });

  it('names the value that explains readings of another machine', async () => {
    const off = [row(600, 109), row(1100, 150), row(300, 90)].map((one) => ({ ...one, fieldA: one.fieldA * 1.25 }));
    const { test } = await changeShaftLoad(found, asked({ loadTest: off }));
    expect(test!.agrees).toBe(false);
    // Every ampere of field reads 1.25 times too much: so does the rated field current, 204 A, that the data begin from.
    expect(test!.suspects[0]).toMatchObject({ label: 'Rated field current', value: 204 });
    expect(test!.suspects[0]!.fitted).toBeCloseTo(255, 0);
  });
});

describe('gathered hours', () => {
  it('keeps the hours and the ends of many loads', () => {
    const series = Float64Array.from({ length: 4000 }, (_, i) => (i % 4 === 0 ? 0 : 300 + (i % 1000) * 0.7));
    const gathered = gatheredHours(series, 1000);
    expect(gathered.length).toBeLessThan(80);
    expect(gathered.reduce((sum, one) => sum + one.hours, 0)).toBeCloseTo(750, 9);
    const loads = gathered.map((one) => one.shaftKw);
    const running = series.filter((kw) => kw > 0);
    expect(Math.max(...loads)).toBe(Math.max(...running));
    expect(Math.min(...loads)).toBe(Math.min(...running));
  });
});
