import { createHash } from 'node:crypto';
import { existsSync, readdirSync } from 'node:fs';
import { Readable } from 'node:stream';
import { text } from 'node:stream/consumers';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { inTx } from '@/server/db/tx';
import { actAs } from '@/server/db/context';
import { originalPath, storeOriginal } from '@/server/drawer';
import { attachment } from '@/server/download';
import { checkedBody, mediaTypeOf } from '@/server/media-type';
import { RequestFile } from '@/server/models/RequestFile';
import { Trail } from '@/server/models/Trail';
import { authorizeAnswer, answerInWords, removeAnswer } from '@/server/services/request-answers';
import { actOnFile, openRequestFile, plateFiles, sourceOfIntake } from '@/server/services/request-files';
import { decideItem } from '@/server/services/request-items';
import { itemOf, openRequest, openRequestAsStaff, openRequestToAnswer } from '@/server/services/request-open';
import { changeRequest } from '@/server/services/request-sending';
import { clientRequest, staffRequest } from '@/server/services/requests';
import { createMotor } from '@/server/services/motors';
import { openEngagement } from '@/server/services/engagements';
import { readIntake } from '@/server/services/intake';
import { todayOf } from '@/server/services/today';
import { kestrelMotors } from '../../db/seeders/demo/scenario';
import { startCatcher, type Catcher } from '../setup/findings';
import { billCsv } from '../setup/intake';
import { ask, buildRequestScene, jpeg, sendAnswer, type RequestScene } from '../setup/requests';

let catcher: Catcher;
let scene: RequestScene;
beforeAll(async () => {
  catcher = await startCatcher();
});
afterAll(() => catcher.close());
beforeEach(async () => {
  scene = await buildRequestScene();
  await ask(scene);
});

const at = (position: number) => ({ code: scene.code, number: 1, position });
const staff = () => openRequestAsStaff(scene.consultant, scene.code, 1);
const view = async () => staffRequest(await staff());
const fileIn = async (position: number, index = 0) => (await view()).items[position - 1]!.files[index]!;
const states = async () => (await view()).items.map(({ state }) => state);

describe('mediaTypeOf', () => {
  const signs = (words: string) => Buffer.from(words, 'latin1');
  const ods = Buffer.concat([
    signs('PK\x03\x04'),
    Buffer.alloc(26),
    signs('mimetypeapplication/vnd.oasis.opendocument.spreadsheet'),
  ]);
  // First bytes as the formats' own specifications give them.
  const table: [string, Buffer, string, string | null][] = [
    ['CSV', signs('From,To,kWh\n2025-11-01,2025-12-01,5\n'), 'a.csv', 'text/plain'],
    ['CSV in UTF-16 with its mark', Buffer.from('\ufeffVon\u2013Bis;kWh\r\n', 'utf16le'), 'a.csv', 'text/plain'],
    ['CSV in UTF-16, big end first', Buffer.from('\ufeffa;b\r\n', 'utf16le').swap16(), 'a.csv', 'text/plain'],
    ['CSV in Windows-1252', signs('Z\xe4hler;kWh\r\n'), 'a.csv', 'text/plain'],
    ['XML with a mark', signs('\xef\xbb\xbf<?xml version="1.0"?><feed/>'), 'a.xml', 'application/xml'],
    ['PDF', signs('%PDF-1.7\n\x00\x01'), 'a.pdf', 'application/pdf'],
    ['JPEG', jpeg, 'a.jpg', 'image/jpeg'],
    ['PNG', signs('\x89PNG\r\n\x1a\n\x00'), 'a.png', 'image/png'],
    ['WebP', signs('RIFF\x10\x00\x00\x00WEBPVP8 '), 'a.webp', 'image/webp'],
    ['HEIC', signs('\x00\x00\x00\x18ftypheic\x00\x00'), 'a.heic', 'image/heic'],
    [
      'xlsx',
      signs('PK\x03\x04\x14\x00'),
      'a.xlsx',
      'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
    ],
    ['ods', ods, 'a.ods', 'application/vnd.oasis.opendocument.spreadsheet'],
    ['ZIP', signs('PK\x03\x04\x14\x00'), 'a.zip', 'application/zip'],
    ['xls', signs('\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1'), 'a.xls', 'application/vnd.ms-excel'],
    ['old document of a word processor', signs('\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1'), 'a.doc', null],
    ['program for Windows named as a table', signs('MZ\x90\x00\x03'), 'a.csv', null],
    ['program for Linux', signs('\x7fELF\x02\x01'), 'a.jpg', null],
    ['web page', signs('  <!DOCTYPE html><html>'), 'a.csv', null],
    ['picture with scripts', signs('<svg xmlns="http://www.w3.org/2000/svg">'), 'a.svg', null],
    ['film', signs('\x00\x00\x00\x18ftypmp42\x00\x00'), 'a.heic', null],
  ];
  it.each(table)('%s', (_, head, fileName, expected) => expect(mediaTypeOf(head, fileName)).toBe(expected));
});

describe('checkedBody', () => {
  const through = (chunks: Buffer[], fileName = 'a.csv') => {
    let told = '';
    const stream = checkedBody(Readable.from(chunks), fileName, (type) => (told = type));
    return { stored: storeOriginal(stream), told: () => told };
  };
  it('lets every byte through in order, however they are cut', async () => {
    const bytes = Buffer.from('x,y\n'.repeat(5000));
    const cut = [bytes.subarray(0, 1), bytes.subarray(1, 4000), bytes.subarray(4000, 4097), bytes.subarray(4097)];
    const { stored, told } = through(cut);
    expect(await stored).toEqual({ bytes: 20_000, sha256: createHash('sha256').update(bytes).digest('hex') });
    expect(told()).toBe('text/plain');
  });
  it('refuses what is not taken, and an empty file, and leaves nothing in the drawer', async () => {
    const folder = originalPath('').replace(/\/$/, '');
    const before = existsSync(folder) ? readdirSync(folder).length : 0;
    await expect(through([Buffer.from('MZ\x90\0\x03'), Buffer.alloc(9000)]).stored).rejects.toMatchObject({
      status: 422,
    });
    await expect(through([]).stored).rejects.toMatchObject({ status: 422 });
    expect(readdirSync(folder)).toHaveLength(before);
  });
});

describe('sending files', () => {
  it('is refused before a byte to those who may not, where the request ended, and where it is full', async () => {
    const other = await buildRequestScene();
    const tries: [typeof scene.asked, number][] = [
      [other.asked, 404],
      [scene.outsideClient, 404],
      [scene.viewer, 403],
      [scene.consultant, 403],
    ];
    for (const [actor, status] of tries)
      await expect(authorizeAnswer(actor, at(1), 1)).rejects.toMatchObject({ status });
    await expect(authorizeAnswer(scene.asked, at(3), 1)).rejects.toMatchObject({ status: 404 });
    await expect(authorizeAnswer(scene.asked, at(1), 1024 ** 3 + 1)).rejects.toMatchObject({ status: 413 });
    const open = await staff();
    await changeRequest(open, { change: 'close', version: open.request.version });
    await expect(authorizeAnswer(scene.asked, at(1), 1)).rejects.toMatchObject({ status: 409 });
  });

  it('takes 200 files and no more, and lets nobody fill the disk by removing and sending', async () => {
    const item = await itemOf(await staff(), 1);
    const row = (index: number, state: 'new' | 'removed') => ({
      key: `${item.id}-${index}-${state}`,
      itemId: item.id,
      fileName: 'a.csv',
      bytes: 10,
      sha256: String(index),
      mediaType: 'text/plain',
      uploadedById: scene.asked.id,
      state,
      intakeId: null,
      motorId: null,
    });
    await inTx(async () => {
      for (let index = 0; index < 199; index++) await RequestFile.create(row(index, 'new'));
    });
    await sendAnswer(scene.asked, at(1), 'last.csv', 'a,b\n1,2\n');
    await expect(authorizeAnswer(scene.asked, at(2), 1)).rejects.toMatchObject({ status: 409 });
    await inTx(async () => {
      for (const file of await RequestFile.findAll({ where: { itemId: item.id } }))
        await file.update({ state: 'removed' });
    });
    await expect(authorizeAnswer(scene.asked, at(2), 1)).resolves.toBeTruthy();
    await inTx(async () => {
      for (let index = 200; index < 400; index++) await RequestFile.create(row(index, 'removed'));
    });
    await expect(authorizeAnswer(scene.asked, at(2), 1)).rejects.toMatchObject({ status: 409 });
  });

  it('answers the item, keeps the bytes, and leaves a row in the trail in the sender’s name', async () => {
    await actAs({ actorId: scene.asked.id, ip: '192.0.2.7' }, () =>
      sendAnswer(scene.asked, at(1), 'june.csv', billCsv),
    );
    expect(await states()).toEqual(['answered', 'asked']);
    const file = await fileIn(1);
    expect(file).toMatchObject({
      fileName: 'june.csv',
      bytes: Buffer.byteLength(billCsv),
      state: 'new',
      by: 'Ada Asked',
    });
    const row = await RequestFile.findOne({ where: { key: file.key }, rejectOnEmpty: true });
    const trail = await Trail.findOne({ where: { subject: 'RequestFile', subjectId: row.id }, rejectOnEmpty: true });
    expect(trail).toMatchObject({ action: 'create', actorId: scene.asked.id, ip: '192.0.2.7' });
    expect(trail.after).toMatchObject({
      fileName: 'june.csv',
      sha256: createHash('sha256').update(billCsv).digest('hex'),
    });
  });

  it('keeps the same bytes for the same thing once, and brings a removed one back', async () => {
    for (let time = 0; time < 2; time++) await sendAnswer(scene.asked, at(1), 'june.csv', billCsv);
    expect((await view()).items[0]?.files).toHaveLength(1);
    const file = await fileIn(1);
    await removeAnswer(await openRequestToAnswer(scene.asked, scene.code, 1), file.key, file.version);
    expect(await states()).toEqual(['asked', 'asked']);
    await sendAnswer(scene.recorder, at(1), 'again.csv', billCsv);
    expect(await fileIn(1)).toMatchObject({ key: file.key, fileName: 'again.csv', by: 'Rex Recorder' });
  });
});

describe('removing and answering in words', () => {
  it('removes what is not taken, against the version seen', async () => {
    await sendAnswer(scene.asked, at(1), 'june.csv', billCsv);
    const file = await fileIn(1);
    const open = await openRequestToAnswer(scene.asked, scene.code, 1);
    await expect(removeAnswer(open, file.key, 99)).rejects.toMatchObject({ status: 409, code: 'stale' });
    await expect(removeAnswer(open, 'no-such-key', 0)).rejects.toMatchObject({ status: 404 });
    await actOnFile(scene.consultant, await staff(), file.key, { act: 'set-aside', version: file.version });
    await expect(removeAnswer(open, file.key, file.version + 1)).rejects.toMatchObject({ status: 409 });
  });

  it('says that a thing is not there, and takes it back', async () => {
    const tell = async (words: string | null) => {
      const open = await openRequestToAnswer(scene.asked, scene.code, 1);
      const item = await itemOf(open, 2);
      await answerInWords(scene.asked, { open, item }, { words, version: item.version });
    };
    await tell('Painted over in 1998.');
    expect((await view()).items[1]).toMatchObject({
      state: 'answered',
      answer: 'Painted over in 1998.',
      answeredBy: 'Ada Asked',
    });
    await tell(null);
    expect(await states()).toEqual(['asked', 'asked']);
  });
});

describe('opening a file', () => {
  it('is for the practice and its sender, as a download nobody guesses at', async () => {
    await sendAnswer(scene.asked, at(2), 'Plate "M-1" é.jpg', jpeg);
    const { key } = await fileIn(2);
    for (const actor of [scene.consultant, scene.asked]) {
      const file = await openRequestFile(actor, await openRequest(actor, scene.code, 1), key);
      const response = attachment(file);
      expect(response.headers.get('content-disposition')).toMatch(/^attachment; /);
      expect(response.headers.get('x-content-type-options')).toBe('nosniff');
      expect(response.headers.get('content-security-policy')).toContain('sandbox');
      expect(Buffer.from(await response.arrayBuffer())).toEqual(jpeg);
    }
    const open = await openRequest(scene.recorder, scene.code, 1);
    await expect(openRequestFile(scene.recorder, open, key)).rejects.toMatchObject({ status: 403 });
    const other = await buildRequestScene();
    await ask(other);
    const elsewhere = await openRequest(other.asked, other.code, 1);
    await expect(openRequestFile(other.asked, elsewhere, key)).rejects.toMatchObject({ status: 404 });
  });
});

describe('what the practice does with a file', () => {
  it('takes a table into intake in the consultant’s name, byte for byte, once', async () => {
    await sendAnswer(scene.asked, at(1), 'bills.csv', billCsv);
    const { key, version } = await fileIn(1);
    const take = async () => actOnFile(scene.consultant, await staff(), key, { act: 'intake', kind: 'bills', version });
    const both = await Promise.allSettled([take(), take()]);
    expect(both.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    const { intakeId } = (
      both.find(({ status }) => status === 'fulfilled') as PromiseFulfilledResult<{ intakeId: number }>
    ).value;
    const intake = await readIntake(scene.consultant, intakeId);
    expect(intake).toMatchObject({ kind: 'bills', fileName: 'bills.csv', broughtBy: 'Tom Renwick' });
    expect(intake.preview).not.toBeNull();
    expect(intake.sha256).toBe(createHash('sha256').update(billCsv).digest('hex'));
    expect(await sourceOfIntake(intakeId)).toMatchObject({ number: 1, by: 'Ada Asked' });
    expect(await fileIn(1)).toMatchObject({ state: 'taken', intakeId });
    expect(await states()).toEqual(['accepted', 'asked']);
    expect((await clientRequest(scene.asked, await staff())).items[0]?.files[0]).toMatchObject({ mayRemove: false });
  });

  it('lays a picture beside a motor of the engagement, and takes it away again', async () => {
    const opened = await openEngagement(scene.consultant, scene.code);
    const motor = await createMotor(opened, kestrelMotors[0]);
    await sendAnswer(scene.asked, at(2), 'plate.jpg', jpeg);
    const file = await fileIn(2);
    const plate = (motorId: number, version: number) => ({ act: 'plate' as const, motorId, version });
    await expect(
      actOnFile(scene.consultant, await staff(), file.key, plate(motor.id + 999, file.version)),
    ).rejects.toMatchObject({ status: 422 });
    await actOnFile(scene.consultant, await staff(), file.key, plate(motor.id, file.version));
    expect(await plateFiles(opened)).toMatchObject([{ fileName: 'plate.jpg', motorId: motor.id, number: 1 }]);
    expect(await states()).toEqual(['asked', 'accepted']);
    await actOnFile(scene.consultant, await staff(), file.key, { act: 'back', version: file.version + 1 });
    expect(await plateFiles(opened)).toEqual([]);
    expect(await states()).toEqual(['asked', 'answered']);
  });

  it('sends a thing back with its reason; what comes then answers it again', async () => {
    await sendAnswer(scene.asked, at(1), 'june.csv', billCsv);
    const decide = async (input: object) => {
      const item = await itemOf(await staff(), 1);
      await decideItem(await staff(), item, { version: item.version, ...input } as never);
    };
    const unanswered = await itemOf(await staff(), 2);
    await expect(
      decideItem(await staff(), unanswered, { to: 'accepted', version: unanswered.version }),
    ).rejects.toMatchObject({ status: 409 });
    await decide({ to: 'sent-back', reason: 'Page 2 is missing.' });
    expect((await view()).items[0]).toMatchObject({ state: 'sent-back', reason: 'Page 2 is missing.' });
    expect(await fileIn(1)).toMatchObject({ state: 'set-aside' });
    await sendAnswer(scene.asked, at(1), 'june-all.csv', `${billCsv}\n`);
    expect(await states()).toEqual(['answered', 'asked']);
    const newest = await fileIn(1, 1);
    await removeAnswer(await openRequestToAnswer(scene.asked, scene.code, 1), newest.key, newest.version);
    expect(await states()).toEqual(['sent-back', 'asked']);
    await sendAnswer(scene.asked, at(1), 'june-all.csv', `${billCsv}\n`);
    await decide({ to: 'accepted' });
    expect((await view()).items[0]).toMatchObject({ state: 'accepted', reason: null });
  });

  it('shows on Today what came, until it is dealt with', async () => {
    const row = async () =>
      (await todayOf(scene.consultant)).waiting.find(({ id }) => id === `request-${scene.engagement.id}-1`);
    await sendAnswer(scene.asked, at(1), 'june.csv', billCsv);
    expect(await row()).toMatchObject({ group: 'yours', title: 'Look at 1 file of the client for request 1' });
    const file = await fileIn(1);
    await actOnFile(scene.consultant, await staff(), file.key, { act: 'intake', kind: 'bills', version: file.version });
    expect(await row()).toMatchObject({ group: 'others', title: 'Request 1 is with the client' });
  });

  it('keeps the original for reading back', async () => {
    await sendAnswer(scene.asked, at(1), 'june.csv', billCsv);
    const file = await openRequestFile(
      scene.asked,
      await openRequest(scene.asked, scene.code, 1),
      (await fileIn(1)).key,
    );
    expect(await text(file.stream)).toBe(billCsv);
  });
});
