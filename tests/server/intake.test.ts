import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { Readable } from 'node:stream';
import { beforeAll, describe, expect, it } from 'vitest';
import { toConfirm, type IntakeView } from '@/schemas/intake';
import { inTx } from '@/server/db/tx';
import { originalPath, storeOriginal } from '@/server/drawer';
import { BillLine } from '@/server/models/BillLine';
import { ColumnMapRow } from '@/server/models/ColumnMapRow';
import { Intake } from '@/server/models/Intake';
import { ReadingBlock } from '@/server/models/ReadingBlock';
import { Trail } from '@/server/models/Trail';
import type { Actor } from '@/server/policies/actor';
import { addBill, listBills } from '@/server/services/bills';
import {
  authorizeIntake,
  giveUpIntake,
  matchIntake,
  openOriginal,
  readIntake,
  readWithMap,
  receiveFile,
  rememberMap,
} from '@/server/services/intake';
import { intakePicture, keepIntake, undoIntake } from '@/server/services/intake-keep';
import { intervalsStation } from '@/server/services/intervals';
import { openEngagement } from '@/server/services/engagements';
import { keptSpans, loadSeries } from '@/server/services/readings';
import { buildActor, buildClient, buildEngagement } from '../setup/build';
import { hasShared, sharedFile } from '../setup/shared';

const stepMs = 15 * 60_000;
const always: [number, number] = [-8.64e15, 8.64e15];

/** Quarter-hours in UTC from a day on; the reading of interval i is i + 0.1 kWh, lagging half of it, or blank. */
function intervalCsv(day: string, count: number, blank: number[] = []): string {
  const start = Date.parse(`${day}T00:00:00Z`);
  const rows = Array.from({ length: count }, (_, index) => {
    const stamp = new Date(start + index * stepMs).toISOString().replace('T', ' ').slice(0, 16);
    return blank.includes(index) ? `${stamp},,` : `${stamp},${index + 0.1},${(index + 0.1) / 2}`;
  });
  return ['Interval start,Active energy kWh,Reactive lagging kvarh', ...rows].join('\n');
}

const billCsv = `From,To,kWh,Max kW,Energy charge USD,Demand charge USD,Total USD
2025-11-01,2025-11-30,2508159,5092,135718.09,33607.20,169325.29
2025-12-01,2025-12-31,2389204,4996,129919.56,32973.60,162893.16
`;

async function scene(timeZone = 'UTC') {
  const consultant = await buildActor();
  const engagement = await buildEngagement({ memberIds: [consultant.id], timeZone });
  return { consultant, engagement, code: engagement.code };
}

async function bring(
  actor: Actor,
  code: string,
  kind: 'intervals' | 'bills',
  fileName: string,
  content: string | Buffer,
) {
  const opened = await authorizeIntake(actor, code);
  const file = await storeOriginal(Readable.from([Buffer.from(content)]));
  return receiveFile(actor, opened, { kind, fileName, ...file });
}

/** Gives the word for whatever is not sure. */
async function confirmAll(actor: Actor, view: IntakeView): Promise<IntakeView> {
  const { preview, timeZone, version } = view;
  if (!preview) throw new Error('no preview to confirm');
  const left = toConfirm(preview, view.confirmed);
  if (left.count === 0) return view;
  const confirmed = [
    ...left.columns.map((column) => `column:${column.index}`),
    ...left.guesses.map((guess) => `guess:${guess.key}`),
  ];
  return matchIntake(actor, view.id, { version, timeZone, columnMap: preview.columnMap, confirmed });
}

async function bringAndKeep(
  actor: Actor,
  code: string,
  kind: 'intervals' | 'bills',
  fileName: string,
  content: string,
) {
  const ready = await confirmAll(actor, await bring(actor, code, kind, fileName, content));
  return keepIntake(actor, ready.id, ready.version);
}

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

describe('keeping intervals', () => {
  it('stores every value bit for bit and takes back exactly these when undone, and again', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'intervals', 'first.csv', intervalCsv('2026-01-01', 96 * 3));
    const kept = await bringAndKeep(
      consultant,
      code,
      'intervals',
      'gap.csv',
      intervalCsv('2026-01-30', 96 * 4, [7, 8]),
    );
    expect(kept.state).toBe('kept');
    const fromMs = Date.parse('2026-01-30T00:00:00Z');
    const toMs = fromMs + 96 * 4 * stepMs;
    const load = await loadSeries(engagement.meterId, fromMs, toMs);
    expect(load.kwh[0]).toBe(0.1);
    expect(load.kwh[383]).toBe(383.1);
    expect(load.kvarhLagging[383]).toBe(383.1 / 2);
    expect(Number.isNaN(load.kwh[7])).toBe(true);
    expect([...load.quality.slice(6, 10)]).toEqual([0, 2, 2, 0]);
    const before = await keptSpans(engagement.meterId, ...always);
    expect(before.map((span) => span.count)).toEqual([288, 192, 192]);

    const undone = await undoIntake(consultant, kept.id, kept.version);
    expect(undone.state).toBe('undone');
    expect((await keptSpans(engagement.meterId, ...always)).map((span) => span.count)).toEqual([288]);
    expect(await ReadingBlock.count({ where: { intakeId: kept.id } })).toBe(0);

    await keepIntake(consultant, kept.id, undone.version);
    expect(await keptSpans(engagement.meterId, ...always)).toEqual(before);
    const again = await loadSeries(engagement.meterId, fromMs, toMs);
    expect(Buffer.from(again.kwh.buffer).equals(Buffer.from(load.kwh.buffer))).toBe(true);
  });

  it('leaves a row in the trail for every block that comes or goes', async () => {
    const { consultant, code } = await scene();
    const kept = await bringAndKeep(consultant, code, 'intervals', 'trail.csv', intervalCsv('2026-02-01', 192));
    const blocks = await ReadingBlock.findAll({ where: { intakeId: kept.id }, attributes: ['id'] });
    expect(blocks).toHaveLength(4);
    await undoIntake(consultant, kept.id, kept.version);
    for (const { id } of blocks) {
      const rows = await Trail.findAll({ where: { subject: 'ReadingBlock', subjectId: id }, order: ['id'] });
      expect(rows.map((row) => row.action)).toEqual(['create', 'delete']);
    }
  });

  it('refuses what overlaps kept readings, naming the range and the file, and stores nothing', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'intervals', 'january.csv', intervalCsv('2026-01-01', 96 * 31));
    const late = await confirmAll(
      consultant,
      await bring(consultant, code, 'intervals', 'late.csv', intervalCsv('2026-01-31', 96 * 2)),
    );
    await expect(keepIntake(consultant, late.id, late.version)).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/31 Jan 2026, 00:00 to 1 Feb 2026, 00:00.*january\.csv.*Undo/) as string,
    });
    expect((await Intake.findByPk(late.id))?.state).toBe('read');
    expect(await keptSpans(engagement.meterId, ...always)).toHaveLength(1);
  });

  it('lets readings begin exactly where others end', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'intervals', 'one.csv', intervalCsv('2026-01-01', 96));
    await bringAndKeep(consultant, code, 'intervals', 'two.csv', intervalCsv('2026-01-02', 96));
    const load = await loadSeries(engagement.meterId, Date.parse('2026-01-01Z'), Date.parse('2026-01-03Z'));
    expect(load.quality.some((mark) => mark !== 0)).toBe(false);
  });

  it('refuses a second time, an old version and what was given up', async () => {
    const { consultant, code } = await scene();
    const kept = await bringAndKeep(consultant, code, 'intervals', 'once.csv', intervalCsv('2026-03-01', 96 * 2));
    await expect(keepIntake(consultant, kept.id, kept.version)).rejects.toMatchObject({ status: 409 });
    await expect(undoIntake(consultant, kept.id, kept.version - 1)).rejects.toMatchObject({
      status: 409,
      code: 'stale',
    });
    await expect(giveUpIntake(consultant, kept.id, kept.version)).rejects.toMatchObject({ status: 409 });
    const other = await bring(consultant, code, 'intervals', 'other.csv', intervalCsv('2026-04-01', 96 * 2));
    const given = await giveUpIntake(consultant, other.id, other.version);
    expect(given.state).toBe('given-up');
    await expect(keepIntake(consultant, other.id, given.version)).rejects.toMatchObject({ status: 409 });
    await expect(undoIntake(consultant, other.id, given.version)).rejects.toMatchObject({ status: 409 });
  });

  it('keeps one of two who press Keep at once', async () => {
    const { consultant, engagement, code } = await scene();
    const ready = await confirmAll(
      consultant,
      await bring(consultant, code, 'intervals', 'race.csv', intervalCsv('2026-05-01', 96 * 2)),
    );
    const ends = await Promise.allSettled([
      keepIntake(consultant, ready.id, ready.version),
      keepIntake(consultant, ready.id, ready.version),
    ]);
    expect(ends.map((end) => end.status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await keptSpans(engagement.meterId, ...always)).toHaveLength(1);
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

describe('keeping bills', () => {
  it('turns amounts into minor units, keeps quantities and rows, and undoes all of it', async () => {
    const { consultant, engagement, code } = await scene();
    const kept = await bringAndKeep(consultant, code, 'bills', 'bills.csv', billCsv);
    const [november, december] = await listBills(engagement.id);
    expect(november).toMatchObject({
      from: '2025-11-01',
      to: '2025-12-01',
      totalMinor: 16_932_529,
      differenceMinor: 0,
      source: { intakeId: kept.id, fileName: 'bills.csv', row: 'row 2' },
    });
    expect(november?.lines.map((line) => line.amountMinor)).toEqual([13_571_809, 3_360_720]);
    expect(november?.quantities).toMatchObject({ kwh: 2_508_159, maxKw: 5092 });
    expect(december).toMatchObject({ from: '2025-12-01', to: '2026-01-01', totalMinor: 16_289_316 });

    await undoIntake(consultant, kept.id, kept.version);
    expect(await listBills(engagement.id)).toEqual([]);
    const lineIds = [...(november?.lines ?? []), ...(december?.lines ?? [])].map((line) => line.id);
    expect(await BillLine.count({ where: { id: lineIds } })).toBe(0);
  });

  it('refuses bills that overlap a kept one, naming both periods, and stores none of them', async () => {
    const { consultant, engagement, code } = await scene();
    const typed = { from: '2025-12-20', to: '2026-01-20', quantities: {}, lines: [], totalMinor: 100 };
    await addBill(consultant, code, typed);
    const ready = await confirmAll(consultant, await bring(consultant, code, 'bills', 'late.csv', billCsv));
    await expect(keepIntake(consultant, ready.id, ready.version)).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/1 Dec 2025 to 31 Dec 2025.*20 Dec 2025 to 19 Jan 2026/) as string,
    });
    expect(await listBills(engagement.id)).toHaveLength(1);
    expect((await Intake.findByPk(ready.id))?.state).toBe('read');
  });
});

describe.skipIf(!hasShared)('a real year of a steel plant (skipped where ../shared is absent)', () => {
  let view: IntakeView;
  let actor: Actor;
  let code: string;
  const content = hasShared ? readFileSync(sharedFile('data', 'steel-plant', 'steel-plant-2018.csv')) : Buffer.alloc(0);

  beforeAll(async () => {
    actor = await buildActor();
    const year = { yearFrom: '2018-01-01', yearTo: '2019-01-01', timeZone: 'Asia/Seoul' };
    code = (await buildEngagement({ memberIds: [actor.id], ...year })).code;
    view = await confirmAll(actor, await bring(actor, code, 'intervals', 'steel-plant-2018.csv', content));
  });

  // Expected figures: README of the data set (UCI Machine Learning Repository 851), computed with a separate program.
  it('is read as it is', () => {
    const { report } = view.preview!;
    expect(report).toMatchObject({ intervals: 35_040, missing: 0, stepMinutes: 15 });
    expect(report!.totalKwh).toBeCloseTo(959_636.71, 2);
    expect(report!.totalKvarhLagging).toBeCloseTo(456_759.84, 2);
    expect(report!.totalKvarhLeading).toBeCloseTo(135_638.04, 2);
    expect(new Date(report!.firstMs).toISOString()).toBe('2017-12-31T15:00:00.000Z');
  });

  it('is kept whole, and the station tells its year', async () => {
    await keepIntake(actor, view.id, view.version);
    const { year, kept, picture } = await intervalsStation(await openEngagement(actor, code));
    expect(year).toMatchObject({ stepMinutes: 15, intervals: 35_040, present: 35_040, gapCount: 0 });
    expect(year!.peak).toMatchObject({ date: '2018-11-22', minute: 9 * 60 + 30 });
    expect(year!.peak!.kw).toBeCloseTo(628.72, 2);
    expect(year!.months).toHaveLength(12);
    expect(year!.months.reduce((sum, month) => sum + (month.kwh ?? 0), 0)).toBeCloseTo(959_636.71, 2);
    expect(kept).toMatchObject([{ fileName: 'steel-plant-2018.csv', intervals: 35_040, missing: 0 }]);
    expect(picture!.days).toHaveLength(365);
    expect(picture!.days.every((day) => day.readings.length === 96)).toBe(true);
  });
});
