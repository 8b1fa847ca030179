import { mkdirSync, mkdtempSync, symlinkSync, writeFileSync } from 'node:fs';
import { Writable } from 'node:stream';
import { tmpdir } from 'node:os';
import path from 'node:path';
import pino from 'pino';
import { Op } from 'sequelize';
import { afterAll, describe, expect, it } from 'vitest';
import { mailEditionInput } from '@/schemas/edition';
import { motorInput } from '@/schemas/motor';
import { planInput } from '@/schemas/plan-input';
import { inTx } from '@/server/db/tx';
import { configureEnv } from '@/server/env';
import { readJson } from '@/server/http';
import { logOptions } from '@/server/log';
import { Bill } from '@/server/models/Bill';
import { User } from '@/server/models/User';
import { changeMotor, openMotor } from '@/server/services/motors';
import { planStart } from '@/server/services/plan-start';
import { createPlan, plansOf } from '@/server/services/plans';
import { listScheduleFiles } from '@/server/services/schedules';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildUser } from '../setup/build';
import { millMotor, motorOf } from '../setup/motors';
import { buildPlansStation } from '../setup/plans';
import { quarrySchedule } from '../setup/tariff';

afterAll(closePool);

describe('readJson', () => {
  const body = (text: string) => new Request('http://127.0.0.1/', { method: 'POST', body: text });

  it('refuses a NUL sign in a text, however deep, as the sender’s error', async () => {
    for (const text of ['{"name":"M\\u0000"}', '{"a":[{"b":"\\u0000"}]}']) {
      await expect(readJson(body(text))).rejects.toMatchObject({ status: 422 });
    }
    expect(await readJson(body('{"name":"\\\\u0000"}'))).toEqual({ name: '\\u0000' });
  });

  it('refuses what is no JSON, and what is no text at all', async () => {
    for (const text of ['', '{', '{"name":"\u0000"}']) {
      await expect(readJson(body(text))).rejects.toMatchObject({ status: 422 });
    }
  });
});

describe('the log', () => {
  it('never holds the values of a statement that failed', async () => {
    const { email } = await buildUser();
    const again = inTx(() =>
      User.create({
        email,
        name: 'Twin',
        role: 'consultant',
        clientId: null,
        passwordHash: 'hash-that-must-stay-secret',
        rights: { view: false, record: false, decide: false, pay: false },
        licenceJurisdiction: null,
        licenceNumber: null,
        licenceExpires: null,
        licenceCheckedById: null,
        disabledAt: null,
      }),
    );
    const error = await again.then(
      () => null,
      (reason: unknown) => reason,
    );
    const lines: string[] = [];
    const sink = new Writable({
      write: (chunk: Buffer, _encoding, done) => {
        lines.push(chunk.toString());
        done();
      },
    });
    pino(logOptions, sink).error({ err: error, password: 'copper' }, 'unexpected error');
    expect(lines[0]).toContain('SequelizeUniqueConstraintError');
    expect(lines[0]).not.toMatch(/hash-that-must-stay-secret|copper/);
    expect(lines[0]).not.toContain(email);
  });
});

describe('the library of schedules', () => {
  it('lists what cannot be read as a file with its problem, and keeps the others', async () => {
    const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-odd-'));
    writeFileSync(path.join(folder, 'quarry-lp.yaml'), quarrySchedule);
    mkdirSync(path.join(folder, 'folder.yaml'));
    symlinkSync(path.join(folder, 'nowhere'), path.join(folder, 'gone.yaml'));
    process.env.TARIFF_DIR = folder;
    configureEnv({});
    const files = await listScheduleFiles(await buildActor());
    expect(files.map(({ id, schedule }) => [id, schedule !== null])).toEqual([
      ['folder', false],
      ['gone', false],
      ['quarry-lp', true],
    ]);
    expect(files[0]?.problems[0]?.message).toContain('EISDIR');
    expect(files[1]?.problems[0]?.message).toContain('ENOENT');
  });
});

describe('a plate', () => {
  const faults = (plate: Record<string, unknown>) => {
    const parsed = motorInput.safeParse({ ...millMotor, plate: { ...(millMotor.plate as object), ...plate } });
    return parsed.success ? [] : parsed.error.issues.map((issue) => issue.path.join('.'));
  };
  const point = (fieldCurrentA: number, voltagePu: number) => ({ fieldCurrentA, voltagePu });

  it('takes a curve that rises, with or without the origin, and marks the curve where it does not', () => {
    expect(faults({ openCircuitCurve: [point(0, 0), point(50, 0.5), point(110, 1)] })).toEqual([]);
    expect(faults({ openCircuitCurve: [point(50, 0.5), point(110, 1)] })).toEqual([]);
    for (const curve of [
      [point(0, 0), point(0, 0)],
      [point(0, 0.1), point(50, 0.5)],
      [point(50, 0.5), point(110, 0.5)],
      [point(110, 1), point(50, 0.5)],
    ]) {
      expect(faults({ openCircuitCurve: curve })).toEqual(['plate.openCircuitCurve']);
    }
  });

  it('marks an exciter field at no load that is not below the one at rated field', () => {
    const exciter = { exciterKind: 'brushless', exciterFieldA: 5 };
    expect(faults({ ...exciter, exciterNoLoadA: 2 })).toEqual([]);
    expect(faults({ ...exciter, exciterNoLoadA: 5 })).toEqual(['plate.exciterNoLoadA']);
  });
});

describe('the people an edition is mailed to', () => {
  it('get one letter each, also where they are named twice', () => {
    expect(mailEditionInput.parse({ userIds: [3, 4, 3] }).userIds).toEqual([3, 4]);
  });
});

describe('a plan that cannot be priced any more', () => {
  it('comes back into its form with its costs and its capacitors', async () => {
    const { actor, opened, millId } = await buildPlansStation();
    const stored = planInput.parse({
      name: 'Costly',
      fields: [{ motorId: millId, fieldA: 190 }],
      banks: [{ steps: 2, stepKvar: 150, lossWPerKvar: 0.5, detuningPercent: 7 }],
      workCost: 61_500,
      yearlyUpkeep: 1_200,
      economics: { discountPercent: 6, escalationPercent: 2, horizonYears: 15 },
    });
    const { id } = await createPlan(opened, stored);
    const cooler = motorOf(millMotor);
    const plate = { ...cooler.plate, limits: { ...cooler.plate.limits, fieldCurrentA: 150 } };
    await changeMotor(await openMotor(actor, millId), { ...cooler, plate, version: 0 });
    const year = await plansOf(opened);
    expect(year.unpriced.map((plan) => plan.name)).toEqual(['Costly']);
    const form = await planStart(actor, year, { plan: String(id), search: null });
    const { banks, workCost, yearlyUpkeep, economics } = stored;
    expect(form?.start).toMatchObject({ banks, workCost, yearlyUpkeep, economics });
    expect(form?.start.fields).toContainEqual({ motorId: millId, fieldA: 190 });
  });
});

describe('a year that is not all there', () => {
  it('says what its figures stand for; a whole one says nothing', async () => {
    const { opened } = await buildPlansStation((load) => load.quality.fill(2, 960, 1056));
    const whole = await plansOf(opened);
    expect(whole.gaps).toEqual([
      '96 of 35,040 readings are missing. Nothing is priced in their place: amounts and savings are those of the readings there are.',
    ]);
    const later = await Bill.findAll({
      where: { engagementId: opened.engagement.id, periodFrom: { [Op.gte]: '2026-01-01' } },
    });
    await inTx(() => Promise.all(later.map((bill) => bill.destroy())));
    expect((await plansOf(opened)).gaps[0]).toBe(
      'The bills cover 61 days, not a year: every yearly figure stands for these days alone.',
    );
    expect((await plansOf((await buildPlansStation()).opened)).gaps).toEqual([]);
  });
});
