import { readdirSync } from 'node:fs';
import path from 'node:path';
import { Readable } from 'node:stream';
import { describe, expect, it } from 'vitest';
import type { BillInput } from '@/schemas/bill';
import { attachmentChange, pagesCapBytes, placesShape } from '@/schemas/attachment';
import { actAs } from '@/server/db/context';
import { inTx } from '@/server/db/tx';
import { getEnv } from '@/server/env';
import { pageTypeOf } from '@/server/page-type';
import { Trail } from '@/server/models/Trail';
import { attachment as handedOut } from '@/server/download';
import { storePages } from '@/server/page-stream';
import {
  changeAttachment,
  listAttachments,
  openAttachment,
  openPages,
  readAttachmentOf,
} from '@/server/services/attachments';
import { addBill, changeBill, listBills, removeBill } from '@/server/services/bills';
import { buildActor, buildClient, buildEngagement } from '../setup/build';
import { attach, jpegHead, pdfHead, pngHead } from '../setup/pages';

const november: BillInput = {
  from: '2025-11-01',
  to: '2025-12-01',
  quantities: { kwh: 2_508_159 },
  lines: [{ label: 'Energy', amountMinor: 13_571_809 }],
  totalMinor: 13_571_809,
};
const december = { ...november, from: '2025-12-01', to: '2026-01-01' };

async function scene() {
  const consultant = await buildActor();
  const engagement = await buildEngagement({ memberIds: [consultant.id] });
  return { consultant, engagement, code: engagement.code };
}

const drawer = () => readdirSync(path.join(getEnv().DATA_DIR, 'originals')).sort();
const placeOn = (attachmentId: number) => ({
  attachmentId,
  page: 1,
  box: [0.5, 0.25, 0.75, 0.3] as [number, number, number, number],
  text: '135,718.09',
});

describe('pages of people who may not see the engagement', () => {
  it('do not exist for consultants who are no members, nor for the client', async () => {
    const client = await buildClient();
    const consultant = await buildActor();
    const engagement = await buildEngagement({ clientId: client.id, memberIds: [consultant.id] });
    const { attachment } = await attach(consultant, engagement.code, {
      fileName: 'nov.pdf',
      bytes: pdfHead('refused'),
    });
    const stranger = await buildActor();
    const person = await buildActor({ role: 'client', clientId: client.id });
    for (const actor of [stranger, person]) {
      await expect(listAttachments(actor, engagement.code)).rejects.toMatchObject({ status: 404 });
      await expect(openPages(actor, attachment.id)).rejects.toMatchObject({ status: 404 });
      await expect(openAttachment(actor, attachment.id)).rejects.toMatchObject({ status: 404 });
      await expect(
        attach(actor, engagement.code, { fileName: 'nov.pdf', bytes: pdfHead('refused') }),
      ).rejects.toMatchObject({ status: 404 });
    }
  });

  it('are not reached through another engagement, by a number that is none, or for a bill of another', async () => {
    const { consultant, code } = await scene();
    const other = await buildEngagement({ memberIds: [consultant.id] });
    const foreign = await addBill(consultant, other.code, november);
    const { attachment } = await attach(consultant, code, { fileName: 'a.pdf', bytes: pdfHead('a') });
    await expect(readAttachmentOf(consultant, other.code, attachment.id)).rejects.toMatchObject({ status: 404 });
    await expect(openAttachment(consultant, Number.NaN)).rejects.toMatchObject({ status: 404 });
    const open = await openAttachment(consultant, attachment.id);
    await expect(changeAttachment(open, { version: 0, billId: foreign.id })).rejects.toMatchObject({ status: 404 });
    await expect(
      attach(consultant, code, { fileName: 'b.pdf', bytes: pdfHead('b'), billId: foreign.id }),
    ).rejects.toMatchObject({ status: 404 });
  });

  it('stay as they are in a closed engagement', async () => {
    const { consultant, engagement, code } = await scene();
    const { attachment } = await attach(consultant, code, { fileName: 'a.pdf', bytes: pdfHead('closed') });
    await inTx(() => engagement.update({ closedAt: new Date() }));
    const open = await openAttachment(consultant, attachment.id);
    await expect(changeAttachment(open, { version: 0, removed: true })).rejects.toMatchObject({ status: 409 });
    await expect(attach(consultant, code, { fileName: 'b.pdf', bytes: pdfHead('b') })).rejects.toMatchObject({
      status: 409,
    });
  });
});

describe('files that are no pages', () => {
  const refused: [string, string, Buffer, RegExp][] = [
    ['an empty file', 'bill.pdf', Buffer.alloc(0), /is empty/],
    ['HTML named .pdf', 'bill.pdf', Buffer.from('<!doctype html><script>alert(1)</script>'), /bill.pdf is a web page/],
    ['an SVG named .png', 'bill.png', Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'), /is a web page/],
    ['a workbook', 'bill.pdf', Buffer.from('PK\x03\x04 and so on'), /Tables of bills go through Bring in a file/],
    ['a photo in HEIC', 'bill.jpg', Buffer.from('\0\0\0\x18ftypheic\0\0\0\0'), /Save or share it as JPEG/],
    ['a scan in TIFF', 'bill.tif', Buffer.from('II*\0\x08\0\0\0'), /Save it as PDF or JPEG/],
    ['a letter', 'bill.txt', Buffer.from('Dear client'), /neither a PDF nor a photo/],
    ['a PNG of 60,000 by 60,000', 'bomb.png', pngHead(60_000, 60_000), /60000 by 60000 pixels.*Save it smaller/],
    ['a JPEG of 65,500 by 65,500', 'bomb.jpg', jpegHead(65_500, 65_500), /65500 by 65500 pixels/],
    ['a PNG cut before its size', 'cut.png', pngHead(10, 10).subarray(0, 12), /does not say how large/],
    ['a JPEG of no height', 'flat.jpg', jpegHead(10, 0), /does not say how large/],
  ];

  it.each(refused)('%s is refused, and nothing of it stays', async (_what, fileName, bytes, message) => {
    const { consultant, code } = await scene();
    await attach(consultant, code, { fileName: 'before.pdf', bytes: pdfHead('before') });
    const before = drawer();
    await expect(attach(consultant, code, { fileName, bytes })).rejects.toMatchObject({
      status: 422,
      message: expect.stringMatching(message) as string,
    });
    expect(drawer()).toEqual(before);
    expect(await listAttachments(consultant, code)).toHaveLength(1);
  });

  it('are refused by size in the stream itself', async () => {
    const { consultant, code } = await scene();
    await attach(consultant, code, { fileName: 'before.pdf', bytes: pdfHead('before') });
    const before = drawer();
    const half = Buffer.concat([pdfHead('large'), Buffer.alloc(pagesCapBytes / 2)]);
    await expect(storePages(Readable.from([half, half]), 'large.pdf')).rejects.toMatchObject({ status: 413 });
    expect(drawer()).toEqual(before);
  });
});

describe('mediaTypeOf', () => {
  const webp = (kind: string, rest: number[]) =>
    Buffer.concat([Buffer.from(`RIFF\0\0\0\0WEBP${kind}\0\0\0\0`), Buffer.from(rest), Buffer.alloc(12)]);

  it.each([
    ['a PDF', pdfHead(), 'application/pdf'],
    ['a PDF behind bytes of a mail gateway', Buffer.concat([Buffer.alloc(900, 0x20), pdfHead()]), 'application/pdf'],
    ['a PNG', pngHead(1200, 1600), 'image/png'],
    ['a JPEG whose size stands behind a segment of the camera', jpegHead(3000, 4000), 'image/jpeg'],
    ['a WebP with extended header', webp('VP8X', [0, 0, 0, 0, 0xcf, 0x07, 0, 0x63, 0, 0]), 'image/webp'],
  ])('knows %s by its bytes', (_what, bytes, mediaType) => expect(pageTypeOf(bytes, 'x')).toBe(mediaType));
});

describe('pages', () => {
  it('lie in the drawer byte for byte and go out as a file to be saved', async () => {
    const { consultant, code } = await scene();
    const bytes = pdfHead('as it came');
    const { attachment } = await attach(consultant, code, { fileName: 'Bill "May".pdf', bytes, pageCount: 2 });
    expect(attachment).toMatchObject({ billId: null, mediaType: 'application/pdf', pageCount: 2, removed: false });
    expect(attachment.attachedBy).toBe(consultant.name);
    const response = handedOut(await openPages(consultant, attachment.id));
    expect(Buffer.from(await response.arrayBuffer())).toEqual(bytes);
    expect(response.headers.get('content-type')).toBe('application/octet-stream');
    expect(response.headers.get('content-disposition')).toMatch(/^attachment; filename="Bill _May_.pdf"/);
    expect(response.headers.get('x-content-type-options')).toBe('nosniff');
    expect(response.headers.get('content-security-policy')).toBe("default-src 'none'; sandbox");
  });

  it('are not attached to one bill twice, may serve two bills, and go to the bill they waited for', async () => {
    const { consultant, engagement, code } = await scene();
    const [first, second] = [await addBill(consultant, code, november), await addBill(consultant, code, december)];
    const file = { fileName: 'year.pdf', bytes: pdfHead('year') };
    const waiting = await attach(consultant, code, file);
    const taken = await attach(consultant, code, { ...file, billId: first.id });
    expect(taken).toMatchObject({ known: false, attachment: { id: waiting.attachment.id, billId: first.id } });
    const again = await attach(consultant, code, { ...file, billId: first.id });
    expect(again).toMatchObject({ known: true, attachment: { id: waiting.attachment.id } });
    const other = await attach(consultant, code, { ...file, billId: second.id });
    expect(other).toMatchObject({ known: false, alsoOf: [first.id] });
    const open = await openAttachment(consultant, other.attachment.id);
    await expect(changeAttachment(open, { version: 0, billId: first.id })).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/has the same file already/) as string,
    });
    const bills = await listBills(engagement.id);
    expect(bills.map(({ pages }) => pages?.map(({ fileName, kind }) => `${kind} ${fileName}`))).toEqual([
      ['PDF year.pdf'],
      ['PDF year.pdf'],
    ]);
  });

  it('can be moved, let wait, removed and brought back, each with its trail', async () => {
    const { consultant, code } = await scene();
    const bill = await addBill(consultant, code, november);
    const { attachment } = await attach(consultant, code, { fileName: 'm.png', bytes: pngHead(40, 30) });
    const change = async (version: number, what: object) =>
      actAs({ actorId: consultant.id, ip: null }, async () =>
        changeAttachment(await openAttachment(consultant, attachment.id), attachmentChange.parse({ version, ...what })),
      );
    expect(await change(0, { billId: bill.id })).toMatchObject({ billId: bill.id, version: 1 });
    await expect(change(0, { billId: null })).rejects.toMatchObject({ status: 409, code: 'stale' });
    expect(await change(1, { removed: true })).toMatchObject({ removed: true });
    expect(await listAttachments(consultant, code)).toEqual([]);
    expect(await change(2, { removed: false })).toMatchObject({ removed: false, billId: bill.id });
    expect(await change(3, { billId: null })).toMatchObject({ billId: null });
    const rows = await Trail.count({
      where: { subject: 'Attachment', subjectId: attachment.id, actorId: consultant.id },
    });
    expect(rows).toBe(4);
  });

  it('come back when the same file is attached after it was removed', async () => {
    const { consultant, code } = await scene();
    const file = { fileName: 'a.pdf', bytes: pdfHead('back') };
    const { attachment } = await attach(consultant, code, file);
    await changeAttachment(await openAttachment(consultant, attachment.id), { version: 0, removed: true });
    expect(await attach(consultant, code, file)).toMatchObject({ known: false, attachment: { id: attachment.id } });
    expect(await listAttachments(consultant, code)).toHaveLength(1);
  });
});

describe('a bill and its pages', () => {
  it('takes waiting pages when it is kept and leaves them waiting when it goes', async () => {
    const { consultant, code, engagement } = await scene();
    const { attachment } = await attach(consultant, code, { fileName: 'a.pdf', bytes: pdfHead('with bill') });
    const places = { 'lines.0.amount': placeOn(attachment.id) };
    const bill = await addBill(consultant, code, { ...november, attachmentIds: [attachment.id], places });
    expect(bill).toMatchObject({ pages: [{ id: attachment.id, fileName: 'a.pdf', kind: 'PDF' }], places });
    expect((await listBills(engagement.id))[0]?.places).toEqual(places);
    await removeBill(consultant, code, bill.id, bill);
    expect(await listAttachments(consultant, code)).toMatchObject([{ id: attachment.id, billId: null }]);
  });

  it('keeps with a change what the change says of places', async () => {
    const { consultant, code } = await scene();
    const { attachment } = await attach(consultant, code, { fileName: 'a.pdf', bytes: pdfHead('change') });
    const bill = await addBill(consultant, code, november);
    const places = { total: placeOn(attachment.id) };
    const changed = await changeBill(consultant, code, bill.id, {
      version: bill.version,
      bill: { ...november, places },
    });
    expect(changed.places).toEqual(places);
  });

  it('takes no pages of another bill and traces no value to pages of another engagement', async () => {
    const { consultant, code } = await scene();
    const other = await scene();
    const first = await addBill(consultant, code, november);
    const { attachment: taken } = await attach(consultant, code, {
      fileName: 'a.pdf',
      bytes: pdfHead('taken'),
      billId: first.id,
    });
    const second = await addBill(consultant, code, { ...december, attachmentIds: [taken.id] });
    expect(second.pages).toEqual([]);
    const foreign = await attach(other.consultant, other.code, { fileName: 'f.pdf', bytes: pdfHead('foreign') });
    const bill = { ...december, places: { total: placeOn(foreign.attachment.id) } };
    await expect(changeBill(consultant, code, second.id, { version: second.version, bill })).rejects.toMatchObject({
      status: 422,
      fields: { 'places.total': [expect.stringMatching(/no such page/)] },
    });
  });

  it.each([
    ['a field of another form', { 'x y': placeOn(1) }],
    ['a place without a width', { total: { ...placeOn(1), box: [0.5, 0.2, 0.5, 0.3] } }],
    ['a place beside the page', { total: { ...placeOn(1), box: [0.5, 0.2, 1.5, 0.3] } }],
    ['page nought', { total: { ...placeOn(1), page: 0 } }],
    ['a text as long as a letter', { total: { ...placeOn(1), text: 'x'.repeat(81) } }],
  ])('refuses %s', (_what, places) => expect(placesShape.safeParse(places).success).toBe(false));
});
