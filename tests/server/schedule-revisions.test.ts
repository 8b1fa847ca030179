import { mkdirSync, mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import { configureEnv } from '@/server/env';
import type { Actor } from '@/server/policies/actor';
import { presentDifference } from '@/server/presenters/text-difference';
import { checkSchedule, monthSources } from '@/server/services/schedule-check';
import { draftOf, dropDraft, keepDraft, othersWriting } from '@/server/services/schedule-drafts';
import { editorView } from '@/server/services/schedule-editor';
import { openRevision, revisionDifference, scheduleHistory } from '@/server/services/schedule-history';
import { beginnings, formPage, formsPage, libraryPage, schedulePage } from '@/server/services/schedule-page';
import { createSchedule, keepRevision, putAway } from '@/server/services/schedule-revisions';
import { listScheduleFiles, openScheduleFile } from '@/server/services/schedules';
import { chooseSchedule, tariffStation } from '@/server/services/tariff';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildEngagement } from '../setup/build';
import { keepBills, keepLoad, quarrySchedule, steadyLoad } from '../setup/tariff';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-tariffs-'));
mkdirSync(path.join(folder, 'forms'));
writeFileSync(path.join(folder, 'quarry-lp.yaml'), quarrySchedule);
const formText = `# yaml-language-server: $schema=../schedule.schema.json

# Demand adjusted
# by power factor at the peak.
#
# Change the reference first.
${quarrySchedule.replace('schedule: quarry-lp', 'schedule: adjusted-demand').replace('title: Large power, adjusted demand', 'title: "Demand: adjusted"')}`;
writeFileSync(path.join(folder, 'forms', 'adjusted-demand.yaml'), formText);
process.env.TARIFF_DIR = folder;
configureEnv({});

let actor: Actor;
let serial = 0;
beforeEach(async () => {
  actor = await buildActor();
  serial += 1;
});
afterAll(closePool);

const today = '2026-12-01';
const fromForm = (slug: string) => ({
  slug,
  title: 'Ours: large power',
  from: { kind: 'form', id: 'adjusted-demand' } as const,
});
const dearer = (text: string) => text.replace('winter: 0.0500', 'winter: 0.0510');

describe('createSchedule', () => {
  it('is no business of a client', async () => {
    const client = await buildActor({ role: 'client' });
    await expect(createSchedule(client, fromForm('theirs'))).rejects.toMatchObject({ status: 404 });
    await expect(formsPage(client)).rejects.toMatchObject({ status: 404 });
    await expect(beginnings(client)).rejects.toMatchObject({ status: 404 });
  });

  it('begins from a form under an id and a title of its own', async () => {
    const slug = await createSchedule(actor, fromForm(`ours-${serial}`));
    const file = await openScheduleFile(actor, slug);
    expect(file).toMatchObject({ revision: 1, problems: [] });
    expect(file.schedule).toMatchObject({ id: slug, title: 'Ours: large power' });
    expect(file.text.startsWith('# Demand adjusted\n')).toBe(true);
    expect((await listScheduleFiles(actor)).map(({ id }) => id)).toContain(slug);
  });

  it('begins blank with a text that can be read', async () => {
    const slug = await createSchedule(actor, {
      slug: `blank-${serial}`,
      title: 'A "new" one',
      from: { kind: 'blank' },
    });
    expect((await openScheduleFile(actor, slug)).schedule?.title).toBe('A "new" one');
  });

  it('refuses an id that is taken, by a file or by a kept schedule', async () => {
    await createSchedule(actor, fromForm(`twin-${serial}`));
    for (const slug of ['quarry-lp', `twin-${serial}`]) {
      await expect(createSchedule(actor, fromForm(slug))).rejects.toMatchObject({
        status: 422,
        fields: { slug: [/already/] },
      });
    }
  });

  it('refuses a form or schedule there is none of', async () => {
    const input = { ...fromForm(`none-${serial}`), from: { kind: 'form', id: '../quarry-lp' } as const };
    await expect(createSchedule(actor, input)).rejects.toMatchObject({ status: 404 });
  });
});

describe('keepRevision', () => {
  const begin = () => createSchedule(actor, fromForm(`kept-${serial}`));
  const keep = async (id: string, change: (text: string) => string, baseNumber: number) => {
    const { text } = await openScheduleFile(actor, id);
    return keepRevision(actor, id, { text: change(text), note: 'Sheet 3', baseNumber });
  };

  it('keeps the next text and leaves the earlier one as it was', async () => {
    const id = await begin();
    expect(await keep(id, dearer, 1)).toBe(2);
    expect((await openScheduleFile(actor, id)).text).toContain('winter: 0.0510');
    expect((await openRevision(actor, id, 1)).text).toContain('winter: 0.0500');
    const { revisions } = await scheduleHistory(actor, id);
    expect(revisions.map(({ number, note, by }) => [number, note, by])).toEqual([
      [2, 'Sheet 3', actor.name],
      [1, 'Begun from the form adjusted-demand', actor.name],
    ]);
  });

  it('makes a file of the folder a kept schedule, its text the first revision', async () => {
    const { text } = await openScheduleFile(actor, 'quarry-lp');
    expect(await keepRevision(actor, 'quarry-lp', { text: dearer(text), note: '', baseNumber: 0 })).toBe(2);
    expect((await openRevision(actor, 'quarry-lp', 1)).text).toBe(quarrySchedule);
    const ids = (await listScheduleFiles(actor)).map(({ id }) => id);
    expect(ids.filter((id) => id === 'quarry-lp')).toHaveLength(1);
  });

  it('refuses errors with their places, a text under another id, and one that says nothing new', async () => {
    const id = await begin();
    const broken = keep(id, (text) => text.replace('max(adjKw;', 'max(adjKW;'), 1);
    await expect(broken).rejects.toMatchObject({
      status: 422,
      details: { problems: [{ path: 'quantities.billedKw.formula' }] },
    });
    const misnamed = keep(id, (text) => text.replace(`schedule: ${id}`, 'schedule: another'), 1);
    await expect(misnamed).rejects.toMatchObject({ status: 422, details: { problems: [{ path: 'schedule' }] } });
    await expect(keep(id, (text) => text, 1)).rejects.toMatchObject({ status: 422 });
    expect((await scheduleHistory(actor, id)).revisions).toHaveLength(1);
  });

  it('refuses a text that misses a worked bill it carries by a cent', async () => {
    const id = await begin();
    // January, 1,000 kW, 750 kvar: pf 0.80, 1,188 kW x 6.60 = 7,840.80; 744,000 x 0.05 = 37,200.00.
    const example = (energy: string) => `examples:
  - title: January 2026
    from: 2026-01-01
    to: 2026-02-01
    quantities: { kwh: 744000, kvarh: 558000, maxKw: 1000, kvarThen: 750 }
    expect: { demand: 7840.80, energy: ${energy} }
`;
    await expect(keep(id, (text) => text + example('37200.01'), 1)).rejects.toMatchObject({
      status: 422,
      fields: { text: [expect.stringContaining('energy is 37200, not 37200.01')] },
    });
    expect(await keep(id, (text) => text + example('37200.00'), 1)).toBe(2);
  });

  it('tells whoever keeps second what the first one kept', async () => {
    const id = await begin();
    await keep(id, dearer, 1);
    await expect(keep(id, (text) => text.replace('415.00', '420.00'), 1)).rejects.toMatchObject({
      status: 409,
      code: 'stale',
      details: { theirs: { revision: 2 } },
    });
  });

  it('moves no figure of an engagement that stands on the earlier text', async () => {
    const id = await begin();
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    const choice = { scheduleId: id, contract: {}, history: null, version: null, takeNewText: false };
    await chooseSchedule(actor, engagement.code, choice);
    await keep(id, dearer, 1);
    const station = await tariffStation(actor, engagement.code);
    expect(station.choice?.library).toBe('changed');
    expect((await scheduleHistory(actor, id)).revisions.find(({ number }) => number === 1)?.uses).toEqual([
      engagement.code,
    ]);
  });
});

describe('drafts', () => {
  it('keep a broken text for the person alone and go when it is kept', async () => {
    const id = await createSchedule(actor, fromForm(`draft-${serial}`));
    const other = await buildActor();
    await keepDraft(actor, id, { text: 'quantites: {', baseNumber: 1 });
    await keepDraft(actor, id, { text: 'quantites: { }', baseNumber: 1 });
    expect((await draftOf(actor, id))?.text).toBe('quantites: { }');
    expect(await draftOf(other, id)).toBeNull();
    expect(await othersWriting(other, id)).toEqual([actor.name]);
    expect((await editorView(actor, id, null)).draft).toMatchObject({ text: 'quantites: { }', baseNumber: 1 });
    const { text } = await openScheduleFile(actor, id);
    await keepRevision(actor, id, { text: dearer(text), note: '', baseNumber: 1 });
    expect(await draftOf(actor, id)).toBeNull();
    await keepDraft(actor, id, { text: dearer(text), baseNumber: 1 });
    expect(await draftOf(actor, id)).toBeNull();
  });

  it('can be thrown away, and are refused where there is no schedule', async () => {
    await keepDraft(actor, 'quarry-lp', { text: 'x', baseNumber: 0 });
    await dropDraft(actor, 'quarry-lp');
    expect(await draftOf(actor, 'quarry-lp')).toBeNull();
    await expect(keepDraft(actor, 'nothing', { text: 'x', baseNumber: 0 })).rejects.toMatchObject({ status: 404 });
    const client = await buildActor({ role: 'client' });
    await expect(keepDraft(client, 'quarry-lp', { text: 'x', baseNumber: 0 })).rejects.toMatchObject({ status: 404 });
  });

  it('are passed over where a kept text is taken up again', async () => {
    const id = await createSchedule(actor, fromForm(`again-${serial}`));
    const { text } = await openScheduleFile(actor, id);
    await keepRevision(actor, id, { text: dearer(text), note: '', baseNumber: 1 });
    const view = await editorView(actor, id, 1);
    expect(view.draft).toMatchObject({ text, baseNumber: 2 });
    expect(view.keptText).toBe(dearer(text));
  });
});

describe('putAway', () => {
  it('takes a schedule out of the lists and brings it back; a file is left where it is', async () => {
    const id = await createSchedule(actor, fromForm(`away-${serial}`));
    await putAway(actor, id, { putAway: true, version: 0 });
    const { library, away } = await libraryPage(actor);
    expect(library.map((row) => row.id)).not.toContain(id);
    expect(away.map((row) => row.id)).toContain(id);
    const page = await schedulePage(actor, id, today);
    expect(page.putAway).toEqual({ isAway: true, version: 1 });
    await expect(putAway(actor, id, { putAway: false, version: 0 })).rejects.toMatchObject({ status: 409 });
    await putAway(actor, id, { putAway: false, version: 1 });
    expect((await listScheduleFiles(actor)).map((file) => file.id)).toContain(id);
    await expect(putAway(actor, 'nothing', { putAway: true, version: 0 })).rejects.toMatchObject({ status: 404 });
  });
});

describe('forms', () => {
  it('tell what they are in the words of their first comment', async () => {
    const [form] = await formsPage(actor);
    expect(form).toMatchObject({
      id: 'adjusted-demand',
      about: 'Demand adjusted by power factor at the peak.',
    });
    const { view, about } = await formPage(actor, 'adjusted-demand', today);
    expect(view.sheet?.title).toBe('Demand: adjusted');
    expect(about).toEqual(['Demand adjusted by power factor at the peak.', 'Change the reference first.']);
    expect((await beginnings(actor)).map(({ value }) => value)).toContain('form:adjusted-demand');
  });
});

describe('checkSchedule', () => {
  it('prices a month under the kept text and under the one being written', async () => {
    const id = await createSchedule(actor, fromForm(`check-${serial}`));
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    await keepLoad(
      engagement,
      steadyLoad('2026-01-01', '2026-02-01', () => 1000),
    );
    const [bill] = await keepBills(engagement, [
      { from: '2026-01-01', to: '2026-02-01', lines: [], totalMinor: 4_704_791 },
    ]);
    const { text } = await openScheduleFile(actor, id);
    const month = { code: engagement.code, billId: bill!.id };
    const view = await checkSchedule(actor, { slug: id, text: dearer(text), month }, today);
    // 1,000 kW and 750 kvar for 744 h: 415.00 + 37,200.00 + 1,188 x 6.60 + 558,000 x 0.0012 = 46,125.40, tax 2 % 922.51.
    // At 0.0510: energy 37,944.00, tax 2 % of 46,869.40 = 937.39.
    expect(view.month).toMatchObject({
      name: 'Jan 2026',
      keptMinor: 4_704_791,
      yoursMinor: 4_780_679,
      billedMinor: 4_704_791,
    });
    const energy = view.month?.lines.find((line) => line.id === 'energy');
    expect(energy).toMatchObject({ keptMinor: 3_720_000, yoursMinor: 3_794_400, quantity: 744_000, unit: 'kWh' });
    const sources = await monthSources(actor, id);
    expect(sources).toEqual([
      { code: engagement.code, title: 'Audit', uses: false, bills: [{ id: bill!.id, name: 'Jan 2026' }] },
    ]);
  });

  it('says what is wrong and goes on pricing the kept text', async () => {
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    const [bill] = await keepBills(engagement, [
      {
        from: '2026-01-01',
        to: '2026-02-01',
        lines: [],
        totalMinor: null,
        quantities: { kwh: 744_000, kvarh: 558_000, maxKw: 1000, kvarThen: 750 },
      },
    ]);
    const { text } = await openScheduleFile(actor, 'quarry-lp');
    const broken = text.replace('max(adjKw;', 'max(adjKW;');
    const month = { code: engagement.code, billId: bill!.id };
    const view = await checkSchedule(actor, { slug: 'quarry-lp', text: broken, month }, today);
    expect(view.problems).toHaveLength(1);
    expect(view.sheet).toBeNull();
    expect(view.month?.yoursMinor).toBeNull();
    expect(view.month?.keptMinor).toBeGreaterThan(0);
  });

  it('says in words why a month cannot be priced', async () => {
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    const [bill] = await keepBills(engagement, [
      { from: '2026-01-01', to: '2026-02-01', lines: [], totalMinor: null, quantities: { kwh: 744_000 } },
    ]);
    const { text } = await openScheduleFile(actor, 'quarry-lp');
    const month = { code: engagement.code, billId: bill!.id };
    const view = await checkSchedule(actor, { slug: 'quarry-lp', text, month }, today);
    expect(view.month?.problem).toContain('January 2026');
    expect(view.month?.problem).toContain('does not give');
  });

  it('opens no engagement of others', async () => {
    const engagement = await buildEngagement();
    const { text } = await openScheduleFile(actor, 'quarry-lp');
    const month = { code: engagement.code, billId: 1 };
    await expect(checkSchedule(actor, { slug: 'quarry-lp', text, month }, today)).rejects.toMatchObject({
      status: 404,
    });
  });

  it('looks over a text that stands for itself', async () => {
    const view = await checkSchedule(actor, { slug: null, text: quarrySchedule, month: null }, today);
    expect(view).toMatchObject({ problems: [], examples: [], month: null });
    expect(view.sheet?.title).toBe('Large power, adjusted demand');
  });
});

describe('differences of texts', () => {
  it('are told by line, and in a changed line by word', async () => {
    const id = await createSchedule(actor, fromForm(`diff-${serial}`));
    const { text } = await openScheduleFile(actor, id);
    await keepRevision(actor, id, { text: dearer(text), note: '', baseNumber: 1 });
    const { lines, added, removed } = await revisionDifference(actor, id, { before: 1, after: 2 });
    expect({ added, removed }).toEqual({ added: 1, removed: 1 });
    const changed = lines
      .filter(({ kind }) => kind === 'added')
      .flatMap(({ pieces }) => pieces.filter((piece) => piece.changed));
    expect(changed.map((piece) => piece.text)).toEqual(['0.0510']);
    await expect(revisionDifference(actor, id, { before: 1, after: 9 })).rejects.toMatchObject({ status: 404 });
  });

  it('lose no line: the kept and the put-in lines are the newer text, the kept and the taken-out the older', () => {
    const before = 'a: 1\nb: 2\nc: 3\n';
    const after = 'a: 1\nx: 9\nc: 4\nd: 5\n';
    const { lines } = presentDifference(before, after);
    const text = (drop: string) =>
      lines
        .filter(({ kind }) => kind !== drop)
        .map(({ pieces }) => pieces.map((piece) => piece.text).join(''))
        .join('\n');
    expect(`${text('added')}\n`).toBe(before);
    expect(`${text('removed')}\n`).toBe(after);
  });
});
