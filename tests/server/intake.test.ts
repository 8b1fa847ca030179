import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { toConfirm } from '@/schemas/intake';
import { inTx } from '@/server/db/tx';
import { originalPath } from '@/server/drawer';
import { ColumnMapRow } from '@/server/models/ColumnMapRow';
import {
  authorizeIntake,
  giveUpIntake,
  matchIntake,
  openOriginal,
  readIntake,
  readWithMap,
  rememberMap,
} from '@/server/services/intake';
import { intakePicture, keepIntake, undoIntake } from '@/server/services/intake-keep';
import { keptSpans } from '@/server/services/readings';
import { buildActor, buildClient, buildEngagement } from '../setup/build';
import { always, bring, intervalCsv, scene } from '../setup/intake';

describe('files of people who may not', () => {
  it('cannot be brought into an engagement of others', async () => {
    const { code } = await scene();
    const stranger = await buildActor();
    await expect(authorizeIntake(stranger, code)).rejects.toMatchObject({ status: 404 });
    await expect(authorizeIntake(stranger, 'NONE-1')).rejects.toMatchObject({ status: 404 });
  });

  it('do not exist for the client, in no way', async () => {
    const client = await buildClient();
    const consultant = await buildActor();
    const engagement = await buildEngagement({ clientId: client.id, memberIds: [consultant.id], timeZone: 'UTC' });
    const person = await buildActor({ role: 'client', clientId: client.id });
    const view = await bring(consultant, engagement.code, 'intervals', 'a.csv', intervalCsv('2026-01-01', 200));
    const refused = { status: 404, code: 'not-found' };
    const match = { version: view.version, timeZone: 'UTC', columnMap: { kind: 'intervals' as const }, confirmed: [] };
    await expect(authorizeIntake(person, engagement.code)).rejects.toMatchObject(refused);
    await expect(readIntake(person, view.id)).rejects.toMatchObject(refused);
    await expect(openOriginal(person, view.id)).rejects.toMatchObject(refused);
    await expect(matchIntake(person, view.id, match)).rejects.toMatchObject(refused);
    await expect(rememberMap(person, view.id, { name: 'Mine now' })).rejects.toMatchObject(refused);
    await expect(keepIntake(person, view.id, view.version)).rejects.toMatchObject(refused);
    await expect(undoIntake(person, view.id, view.version)).rejects.toMatchObject(refused);
    await expect(giveUpIntake(person, view.id, view.version)).rejects.toMatchObject(refused);
    await expect(intakePicture(person, view.id)).rejects.toMatchObject(refused);
  });

  it('answer 404 where there is none, whatever the number', async () => {
    const { consultant } = await scene();
    await expect(readIntake(consultant, 999_999)).rejects.toMatchObject({ status: 404 });
    await expect(readIntake(consultant, Number.NaN)).rejects.toMatchObject({ status: 404 });
  });

  it('do not come into a closed engagement', async () => {
    const { consultant, engagement, code } = await scene();
    await inTx(() => engagement.update({ closedAt: new Date() }));
    await expect(authorizeIntake(consultant, code)).rejects.toMatchObject({ status: 409 });
  });
});

describe('a file that cannot be read', () => {
  it.each([
    ['a picture', 'plan.png', Buffer.from('89504e470d0a1a0a0000000d49484452', 'hex')],
    ['a PDF', 'bill.pdf', Buffer.from('%PDF-1.7\n%\xe2\xe3\xcf\xd3\n', 'latin1')],
    ['a workbook cut short', 'cut.xlsx', Buffer.from('504b0304140006000800', 'hex')],
  ])('is refused with what, where and what to do, and lies in the drawer: %s', async (_what, fileName, content) => {
    const { consultant, code } = await scene();
    const view = await bring(consultant, code, 'intervals', fileName, content);
    expect(view).toMatchObject({ state: 'refused', preview: null });
    expect(view.problems.length).toBeGreaterThan(0);
    for (const problem of view.problems) {
      expect(problem.message.length, 'what is wrong').toBeGreaterThan(10);
      expect(problem.where.length, 'where').toBeGreaterThan(0);
      expect(problem.remedy.length, 'what to do').toBeGreaterThan(10);
    }
    expect(readFileSync(originalPath(view.sha256))).toEqual(content);
    await expect(keepIntake(consultant, view.id, view.version)).rejects.toMatchObject({ status: 422 });
  });
});

describe('originals', () => {
  it('come back byte for byte, with their own SHA-256', async () => {
    const { consultant, code } = await scene();
    const content = Buffer.concat([
      Buffer.from([0xef, 0xbb, 0xbf]),
      Buffer.from(`${intervalCsv('2026-01-01', 100)}\r\n\u0000`),
    ]);
    const view = await bring(consultant, code, 'intervals', 'Zähler "A".csv', content);
    const original = await openOriginal(consultant, view.id);
    const chunks: Buffer[] = [];
    for await (const chunk of original.stream) chunks.push(chunk as Buffer);
    expect(Buffer.concat(chunks).equals(content)).toBe(true);
    expect(original.sha256).toBe(createHash('sha256').update(content).digest('hex'));
    expect(original).toMatchObject({ fileName: 'Zähler "A".csv', bytes: content.byteLength });
  });
});

describe('matching', () => {
  it('refuses a map of another kind and leaves the file as it was', async () => {
    const { consultant, code } = await scene();
    const view = await bring(consultant, code, 'intervals', 'm.csv', intervalCsv('2026-01-01', 200));
    const input = { version: view.version, timeZone: 'UTC', columnMap: { kind: 'bills' as const }, confirmed: [] };
    await expect(matchIntake(consultant, view.id, input)).rejects.toMatchObject({ status: 422 });
    expect(await readIntake(consultant, view.id)).toEqual(view);
  });

  it('does not keep with a map that cannot be read, and says what is wrong', async () => {
    const { consultant, engagement, code } = await scene();
    const view = await bring(consultant, code, 'intervals', 'm.csv', intervalCsv('2026-01-01', 200));
    const map = view.preview!.columnMap;
    const columns = map.columns?.map((column) => ({ ...column, role: 'ignore' as const }));
    const columnMap = { ...map, columns };
    const input = { version: view.version, timeZone: 'UTC', columnMap, confirmed: [] };
    const matched = await matchIntake(consultant, view.id, input);
    expect(matched.problems.length).toBeGreaterThan(0);
    expect(matched.preview!.report).toBeNull();
    await expect(keepIntake(consultant, matched.id, matched.version)).rejects.toMatchObject({
      status: 422,
      details: { problems: matched.problems },
    });
    expect(await keptSpans(engagement.meterId, ...always)).toEqual([]);
  });

  it('reads the stamps in the zone the person gives', async () => {
    const { consultant, code } = await scene();
    const view = await bring(consultant, code, 'intervals', 'z.csv', intervalCsv('2026-01-01', 200));
    const { columnMap } = view.preview!;
    const input = { version: view.version, timeZone: 'America/Chicago', columnMap, confirmed: [] };
    const matched = await matchIntake(consultant, view.id, input);
    // Chicago is six hours behind UTC in January (IANA time zone database).
    expect(matched.preview!.report!.firstMs - view.preview!.report!.firstMs).toBe(6 * 3_600_000);
    expect(matched.timeZone).toBe('America/Chicago');
  });

  it('takes another role for a column and reads again', async () => {
    const { consultant, code } = await scene();
    const view = await bring(consultant, code, 'intervals', 'r.csv', intervalCsv('2026-01-01', 200));
    const map = view.preview!.columnMap;
    const columns = map.columns?.map((column) =>
      column.index === 2 ? { ...column, role: 'reactive-leading' as const } : column,
    );
    const input = { version: view.version, timeZone: 'UTC', columnMap: { ...map, columns }, confirmed: [] };
    const { report } = (await matchIntake(consultant, view.id, input)).preview!;
    // The sum of (i + 0.1) / 2 for i = 0..199 is (19,900 + 20) / 2 = 9,960.
    expect(report?.totalKvarhLeading).toBeCloseTo(9960, 6);
    expect(report?.totalKvarhLagging).toBeNull();
  });

  it('remembers a map, offers it for the next file of the shape, and reads with it', async () => {
    const { consultant, code } = await scene();
    const first = await bring(consultant, code, 'intervals', 'a.csv', intervalCsv('2026-01-01', 96 * 3));
    expect(first.offered).toEqual([]);
    const remembered = await rememberMap(consultant, first.id, { name: 'OV interval, 3 columns' });
    expect(remembered.readWith).toMatchObject({ name: 'OV interval, 3 columns' });
    await rememberMap(consultant, first.id, { name: 'OV interval, 3 columns' });
    expect(await ColumnMapRow.count({ where: { name: 'OV interval, 3 columns' } })).toBe(1);

    const next = await bring(consultant, code, 'intervals', 'b.csv', intervalCsv('2026-02-01', 96 * 3));
    expect(next.offered.map((map) => map.name)).toEqual(['OV interval, 3 columns']);
    const read = await readWithMap(consultant, next.id, { version: next.version, mapId: next.offered[0]!.id });
    expect(toConfirm(read.preview!, read.confirmed).count).toBe(0);
    expect(await keepIntake(consultant, read.id, read.version)).toMatchObject({ state: 'kept' });
    await expect(readWithMap(consultant, first.id, { version: 0, mapId: 999_999 })).rejects.toThrow();
  });
});
