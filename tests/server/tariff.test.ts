import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { beforeEach, describe, expect, it } from 'vitest';
import { chooseInput, noLine } from '@/schemas/tariff';
import { configureEnv } from '@/server/env';
import { inTx } from '@/server/db/tx';
import { Engagement } from '@/server/models/Engagement';
import { LineMemory } from '@/server/models/LineMemory';
import { TariffChoice } from '@/server/models/TariffChoice';
import { Trail } from '@/server/models/Trail';
import type { Actor } from '@/server/policies/actor';
import { originsOf } from '@/server/services/line-memory';
import { listScheduleFiles, openScheduleFile, scheduleUses } from '@/server/services/schedules';
import { chooseSchedule, matchLine, tariffStation } from '@/server/services/tariff';
import { buildActor, buildEngagement } from '../setup/build';
import { quarrySchedule } from '../setup/tariff';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-tariffs-'));
const write = (name: string, text: string) => writeFileSync(path.join(folder, name), text);
write('quarry-lp.yaml', quarrySchedule);
write(
  'broken.yaml',
  quarrySchedule.replace('schedule: quarry-lp', 'schedule: broken').replace('max(adjKw;', 'max(adjKW;'),
);
write('misnamed.yaml', quarrySchedule);
write(
  'euro.yaml',
  quarrySchedule.replace('schedule: quarry-lp', 'schedule: euro').replace('currency: USD', 'currency: EUR'),
);
process.env.TARIFF_DIR = folder;
configureEnv({});

let actor: Actor;
let code: string;
beforeEach(async () => {
  actor = await buildActor();
  code = (await buildEngagement({ memberIds: [actor.id] })).code;
  write('quarry-lp.yaml', quarrySchedule);
});

const input = (given: Partial<Parameters<typeof chooseSchedule>[2]> = {}) => ({
  scheduleId: 'quarry-lp',
  contract: { contractKw: 650 },
  history: null,
  version: null,
  takeNewText: false,
  ...given,
});

describe('listScheduleFiles', () => {
  it('is no business of a client', async () => {
    await expect(listScheduleFiles(await buildActor({ role: 'client' }))).rejects.toMatchObject({ status: 404 });
  });

  it('lists a broken file with the place, the mistake and the remedy, and the others as they are', async () => {
    const files = await listScheduleFiles(actor);
    expect(files.map(({ id, schedule }) => [id, schedule !== null])).toEqual([
      ['broken', false],
      ['euro', true],
      ['misnamed', false],
      ['quarry-lp', true],
    ]);
    const line = quarrySchedule.split('\n').findIndex((text) => text.includes('max(adjKw;')) + 1;
    const problem = files[0]?.problems[0];
    expect(problem).toMatchObject({ line, path: 'quantities.billedKw.formula' });
    expect(problem?.column).toBe(quarrySchedule.split('\n')[line - 1]!.indexOf('adjKw;') + 1);
    expect(`${problem?.message} ${problem?.remedy}`).toContain('Did you mean "adjKw"?');
  });

  it('refuses a schedule under the name of another file', async () => {
    const { problems } = await openScheduleFile(actor, 'misnamed');
    expect(problems[0]).toMatchObject({ line: 1, path: 'schedule' });
    expect(problems[0]?.remedy).toContain('quarry-lp.yaml');
  });

  it('has no file of another name, whatever its path', async () => {
    for (const id of ['nothing', '../quarry-lp', '__proto__']) {
      await expect(openScheduleFile(actor, id)).rejects.toMatchObject({ status: 404 });
    }
  });
});

describe('chooseSchedule', () => {
  it('is closed to those who do not work on the engagement', async () => {
    await expect(chooseSchedule(await buildActor(), code, input())).rejects.toMatchObject({ status: 404 });
    await expect(chooseSchedule(await buildActor({ role: 'client' }), code, input())).rejects.toMatchObject({
      status: 404,
    });
  });

  it('refuses contract inputs beyond their range, unknown ones and wrong ones by field', async () => {
    const choose = (contract: Record<string, number>) => chooseSchedule(actor, code, input({ contract }));
    await expect(choose({ contractKw: 50 })).rejects.toMatchObject({
      status: 422,
      fields: { 'contract.contractKw': ['Contract minimum lies between 100 and 5000 kW.'] },
    });
    await expect(choose({ contractKva: 500 })).rejects.toMatchObject({
      status: 422,
      fields: { 'contract.contractKva': ['The schedule has no contract input "contractKva".'] },
    });
    await expect(choose({ contractKw: NaN })).rejects.toMatchObject({ status: 422 });
    expect(await TariffChoice.count({ where: { scheduleId: 'quarry-lp' } })).toBe(0);
  });

  it('refuses history of something the schedule does not look back at, and values below nought', async () => {
    const choose = (history: Record<string, number[]>) => chooseSchedule(actor, code, input({ history }));
    await expect(choose({ nothing: [1] })).rejects.toMatchObject({
      status: 422,
      fields: { 'history.nothing': [expect.any(String)] },
    });
    await expect(choose({ adjKw: [-1] })).rejects.toMatchObject({
      status: 422,
      fields: { 'history.adjKw': [expect.any(String)] },
    });
  });

  it('refuses a schedule that is not there, cannot be read, or is in another currency', async () => {
    for (const scheduleId of ['nothing', 'broken', 'euro']) {
      const chosen = chooseSchedule(actor, code, input({ scheduleId }));
      await expect(chosen).rejects.toMatchObject({ status: 422, fields: { scheduleId: [expect.any(String)] } });
    }
  });

  it('freezes the text with its digest, fills defaults, and leaves a trail', async () => {
    const view = await chooseSchedule(actor, code, input({ contract: {}, history: { adjKw: [4000, 4100] } }));
    expect(view).toMatchObject({ contract: { contractKw: 500 }, history: { adjKw: [4000, 4100] }, library: 'same' });
    const row = await TariffChoice.findOne({
      where: { sha256: view.sha256 },
      order: [['id', 'DESC']],
      rejectOnEmpty: true,
    });
    expect(row.scheduleText).toBe(quarrySchedule);
    // SHA-256 as Node's own crypto gives it for these bytes.
    const { createHash } = await import('node:crypto');
    expect(view.sha256).toBe(createHash('sha256').update(quarrySchedule).digest('hex'));
    expect(await Trail.count({ where: { subject: 'TariffChoice', subjectId: row.id } })).toBe(1);
  });

  it('keeps the frozen text when the file changes, says so, and takes the new one only when told', async () => {
    const first = await chooseSchedule(actor, code, input());
    write('quarry-lp.yaml', quarrySchedule.replace('amount: 415.00', 'amount: 420.00'));
    expect((await tariffStation(actor, code)).choice?.library).toBe('changed');
    const again = await chooseSchedule(actor, code, input({ version: first.version, contract: { contractKw: 700 } }));
    expect(again).toMatchObject({ sha256: first.sha256, library: 'changed', contract: { contractKw: 700 } });
    const taken = await chooseSchedule(actor, code, input({ version: again.version, takeNewText: true }));
    expect(taken.library).toBe('same');
    expect(taken.sha256).not.toBe(first.sha256);
  });

  it('shows both sides where somebody else chose meanwhile', async () => {
    const first = await chooseSchedule(actor, code, input());
    await chooseSchedule(actor, code, input({ version: first.version, contract: { contractKw: 700 } }));
    const stale = chooseSchedule(actor, code, input({ version: first.version, contract: { contractKw: 800 } }));
    await expect(stale).rejects.toMatchObject({
      status: 409,
      code: 'stale',
      details: { mine: { contract: { contractKw: 800 } }, theirs: { contract: { contractKw: 700 } } },
    });
    await expect(chooseSchedule(actor, code, input())).rejects.toMatchObject({ status: 409 });
  });
});

describe('matchLine', () => {
  it('asks for a schedule first', async () => {
    const match = matchLine(actor, code, { label: 'Demand', lineId: 'demand', version: 0 });
    await expect(match).rejects.toMatchObject({ status: 409, details: { station: 'tariff' } });
  });

  it('refuses a line the schedule does not have, and a version meanwhile changed', async () => {
    const { version } = await chooseSchedule(actor, code, input());
    await expect(matchLine(actor, code, { label: 'kW', lineId: 'nothing', version })).rejects.toMatchObject({
      status: 422,
    });
    await expect(matchLine(actor, code, { label: 'kW', lineId: 'demand', version: version + 7 })).rejects.toMatchObject(
      { status: 409 },
    );
  });

  it('remembers and forgets, and keeps matches while the schedule stays', async () => {
    const chosen = await chooseSchedule(actor, code, input());
    const kept = await matchLine(actor, code, { label: 'kW', lineId: 'demand', version: chosen.version });
    expect(kept.lineMatches).toEqual({ kW: 'demand' });
    const again = await chooseSchedule(actor, code, input({ version: kept.version }));
    expect(again.lineMatches).toEqual({ kW: 'demand' });
    const forgotten = await matchLine(actor, code, { label: 'kW', lineId: null, version: again.version });
    expect(forgotten.lineMatches).toEqual({});
  });
});

describe('matches of the next engagement with the utility', () => {
  const next = async (memberId = actor.id) => (await buildEngagement({ memberIds: [memberId] })).code;
  const choiceAt = async (at: string) => {
    const engagement = await Engagement.findOne({ where: { code: at }, rejectOnEmpty: true });
    return TariffChoice.findOne({ where: { engagementId: engagement.id }, rejectOnEmpty: true });
  };
  const tell = async (label: string, lineId: string | null) => {
    const { version } = await choiceAt(code);
    return matchLine(actor, code, { label, lineId, version });
  };

  it('begin with what was told, named after its engagement to those who may know of it', async () => {
    await chooseSchedule(actor, code, input());
    await tell('Billed capacity', 'demand');
    const second = await next();
    const chosen = await chooseSchedule(actor, second, input());
    expect(chosen.lineMatches).toMatchObject({ 'Billed capacity': 'demand' });
    expect((await originsOf(actor, await choiceAt(second)))['Billed capacity']).toBe(`remembered from ${code}`);
    const stranger = await buildActor();
    const third = await next(stranger.id);
    await chooseSchedule(stranger, third, input());
    expect((await originsOf(stranger, await choiceAt(third)))['Billed capacity']).toBe('remembered');
  });

  it('are their own from then on: a later correction elsewhere changes nothing there', async () => {
    await chooseSchedule(actor, code, input());
    await tell('Capacity fee', 'demand');
    const second = await next();
    await chooseSchedule(actor, second, input());
    await tell('Capacity fee', 'service');
    const choice = await choiceAt(second);
    expect(choice.lineMatches['Capacity fee']).toBe('demand');
    const own = await matchLine(actor, second, { label: 'Capacity fee', lineId: 'energy', version: choice.version });
    expect(own.lineMatches['Capacity fee']).toBe('energy');
    expect((await originsOf(actor, await choiceAt(second)))['Capacity fee']).toBeUndefined();
  });

  it('forget what is taken back, and what the schedule has no line for', async () => {
    await chooseSchedule(actor, code, input());
    await tell('Grid fee', 'demand');
    await tell('Grid fee', null);
    await tell('Lamp fee', noLine);
    const memory = await LineMemory.findOne({ where: { label: 'Lamp fee' }, rejectOnEmpty: true });
    await inTx(() =>
      LineMemory.create({ ...memory.get(), id: undefined, label: 'Old fee', lineId: 'lineOfAnOlderText' }),
    );
    const { lineMatches } = await chooseSchedule(actor, await next(), input());
    expect(lineMatches).not.toHaveProperty('Grid fee');
    expect(lineMatches).not.toHaveProperty('Old fee');
    expect(lineMatches['Lamp fee']).toBe(noLine);
  });
});

describe('the tolerance of a line', () => {
  it('is five cents until one chooses another, and stays so when it is not told', async () => {
    const first = await chooseSchedule(actor, code, input());
    expect(first.toleranceMinor).toBe(5);
    const second = await chooseSchedule(actor, code, input({ version: first.version, toleranceMinor: 12 }));
    expect(second.toleranceMinor).toBe(12);
    expect((await chooseSchedule(actor, code, input({ version: second.version }))).toleranceMinor).toBe(12);
  });

  it('lies in a range that makes sense', () => {
    const fault = (toleranceMinor: number) => chooseInput.safeParse(input({ toleranceMinor })).success;
    expect([-1, 0.5, NaN, 501, 0, 500].map(fault)).toEqual([false, false, false, false, true, true]);
  });
});

describe('scheduleUses', () => {
  it('tells where a schedule is used, as far as the person may know', async () => {
    await chooseSchedule(actor, code, input());
    expect((await scheduleUses(actor)).get('quarry-lp')?.map((use) => use.code)).toEqual([code]);
    expect((await scheduleUses(await buildActor())).get('quarry-lp')).toBeUndefined();
  });
});
