import { deflateRawSync } from 'node:zlib';
import { describe, expect, it } from 'vitest';
import { IntakeError, readIntervals } from '@/core/intake';
import { bytesOf, workbook } from './files';
import { table } from './tables';
import { zip } from './zip';

// Small files made to swell, nest or loop. Each must be refused with a place, before it has cost much.
const megabyte = 1024 * 1024;
const noughts = (megabytes: number): Uint8Array => new Uint8Array(megabytes * megabyte).fill(48);
const good = bytesOf(
  table(
    'Time,kWh',
    Array.from({ length: 20 }, (_, at) => [at]),
  ),
);

async function refusalOf(bytes: Uint8Array, fileName: string): Promise<IntakeError> {
  const cause: unknown = await readIntervals(bytes, { fileName, timeZone: 'Etc/UTC' }).then(
    () => null,
    (reason: unknown) => reason,
  );
  expect(cause).toBeInstanceOf(IntakeError);
  const refusal = cause as IntakeError;
  for (const { where, remedy } of refusal.problems) expect(Math.min(where.length, remedy.length)).toBeGreaterThan(3);
  return refusal;
}

describe('archives made to swell', () => {
  it('refuses a member that unpacks to a thousand times its size', async () => {
    const bomb = zip([{ name: 'a.csv', bytes: noughts(40) }]);
    expect(bomb.length).toBeLessThan(megabyte);
    expect((await refusalOf(bomb, 'bomb.zip')).problems[0]?.message).toContain('times its size');
  });

  it('stops at the size the directory gives, if that is a lie', async () => {
    const bomb = zip([{ name: 'a.csv', bytes: noughts(40), claimed: 1000 }]);
    expect((await refusalOf(bomb, 'liar.zip')).problems[0]?.message).toContain('larger than the archive says');
  });

  it('refuses an archive within an archive', async () => {
    const inner = zip([{ name: 'a.csv', bytes: good }]);
    expect((await refusalOf(zip([{ name: 'inner.zip', bytes: inner }]), 'outer.zip')).problems[0]?.message).toContain(
      'another archive',
    );
  });

  it('refuses thousands of members', async () => {
    const many = Array.from({ length: 2100 }, (_, at) => ({ name: `${at}.csv`, bytes: good }));
    expect((await refusalOf(zip(many), 'many.zip')).problems[0]?.message).toContain('2100 members');
  });

  it.each(['[Content_Types].xml', 'content.xml'])(
    'refuses a workbook (%s) whose sheet is larger than it says',
    async (part) => {
      const bomb = zip([
        { name: part, bytes: bytesOf('<Types/>') },
        { name: 'xl/workbook.xml', bytes: noughts(40), claimed: 500 },
      ]);
      await refusalOf(bomb, 'liar.xlsx');
    },
  );

  it('refuses a workbook of which one byte is changed, though it unpacks', async () => {
    const book = workbook([['Time', 'kWh'], ...Array.from({ length: 50 }, (_, at) => [45_000 + at / 96, at])]);
    // Of the members as the writer stored them, one digit of a figure.
    const text = new TextDecoder('latin1').decode(book);
    const at = text.indexOf('<v>45000');
    const bytes = book.slice();
    expect(at).toBeGreaterThan(0);
    bytes[at + 3] = 57;
    expect((await refusalOf(bytes, 'changed.xlsx')).problems[0]?.message).toContain('damaged');
  });
});

describe('XML made to swell', () => {
  const feed = (inside: string, head = ''): Uint8Array =>
    bytesOf(`<?xml version="1.0"?>${head}<feed xmlns="http://www.w3.org/2005/Atom">${inside}</feed>`);

  it('refuses entities that multiply', async () => {
    const levels = Array.from({ length: 12 }, (_, at) => `<!ENTITY a${at + 1} "${`&a${at};`.repeat(10)}">`).join('');
    const bomb = feed('<title>&a12;</title>', `<!DOCTYPE feed [<!ENTITY a0 "ha">${levels}]>`);
    expect((await refusalOf(bomb, 'bomb.xml')).message).toMatch(/DOCTYPE|document type/i);
  });

  it('refuses an entity that is a file', async () => {
    await refusalOf(
      feed('<title>&a;</title>', '<!DOCTYPE feed [<!ENTITY a SYSTEM "file:///etc/hostname">]>'),
      'file.xml',
    );
  });

  it('refuses elements a hundred thousand deep', async () => {
    await refusalOf(feed('<a>'.repeat(100_000) + '</a>'.repeat(100_000)), 'deep.xml');
  });

  it('refuses an element with a hundred thousand attributes, or reads on', async () => {
    const attributes = Array.from({ length: 100_000 }, (_, at) => `b${at}="1"`).join(' ');
    await refusalOf(feed(`<a ${attributes}/>`), 'wide.xml');
  });
});

describe('bytes that are packed twice', () => {
  it('is no text', async () => {
    await refusalOf(new Uint8Array(deflateRawSync(good)), 'packed.csv');
  });
});
