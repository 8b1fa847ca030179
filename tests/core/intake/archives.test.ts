import { describe, expect, it } from 'vitest';
import { previewIntervals, readIntervals } from '@/core/intake';
import { bytesOf, workbook } from './files';
import { zip } from './zip';

const table = bytesOf(
  `Time,kWh\n${Array.from({ length: 24 }, (_, hour) => `2025-03-13 ${String(hour).padStart(2, '0')}:00,${hour + 1}`).join('\n')}`,
);
const read = (bytes: Uint8Array) => readIntervals(bytes, { fileName: 'readings.zip', timeZone: 'Etc/UTC' });

describe('archives', () => {
  it.each([
    ['packed', false],
    ['stored', true],
  ])('reads the one file in it, %s', async (_name, isStored) => {
    const { report } = await read(zip([{ name: 'a/b/readings.csv', bytes: table, isStored }]));
    // 1 + 2 + ... + 24
    expect(report).toMatchObject({ format: 'delimited', totalKwh: 300, intervals: 24 });
  });

  it('passes by folders, hidden files and what is no table', async () => {
    const { report } = await read(
      zip([
        { name: 'a/', bytes: new Uint8Array() },
        { name: '__MACOSX/._readings.csv', bytes: table },
        { name: 'logo.png', bytes: bytesOf('x') },
        { name: 'readings.csv', bytes: table },
      ]),
    );
    expect(report.totalKwh).toBe(300);
  });

  it('reads a workbook in an archive', async () => {
    const book = workbook(
      [['Time', 'kWh'], ...Array.from({ length: 24 }, (_, hour) => [45_729 + hour / 24, hour + 1])],
      { formats: { 0: 'yyyy-mm-dd hh:mm' } },
    );
    const { report } = await read(zip([{ name: 'readings.xlsx', bytes: book, isStored: true }]));
    expect(report).toMatchObject({ format: 'spreadsheet', totalKwh: 300 });
  });

  it.each([
    [
      'two files',
      zip([
        { name: 'a.csv', bytes: table },
        { name: 'b.csv', bytes: table },
      ]),
      /2 files: a\.csv, b\.csv/,
    ],
    ['no file', zip([{ name: 'a/', bytes: new Uint8Array() }]), /holds no file/],
    [
      'an archive in an archive',
      zip([{ name: 'a.dat', bytes: zip([{ name: 'b.csv', bytes: table }]) }]),
      /another archive/,
    ],
    [
      'a file larger than its directory says',
      zip([{ name: 'a.csv', bytes: table, claimed: 100 }]),
      /larger than the archive says/,
    ],
    ['a file smaller than its directory says', zip([{ name: 'a.csv', bytes: table, claimed: 5000 }]), /damaged/],
    ['a bomb by its ratio', zip([{ name: 'a.csv', bytes: new Uint8Array(4_000_000) }]), /times its size/],
    ['one that is cut off', zip([{ name: 'a.csv', bytes: table }]).subarray(0, 150), /cannot be read/],
  ])('refuses %s', async (_name, bytes, message) => {
    await expect(read(bytes)).rejects.toThrow(message);
  });

  describe('with several files', () => {
    const small = bytesOf('Time,kWh\n2025-03-13 00:00,7\n2025-03-13 01:00,8\n2025-03-13 02:00,9\n');
    const both = zip([
      { name: 'april/b.csv', bytes: small },
      { name: 'a.csv', bytes: table },
      { name: 'readme.md', bytes: bytesOf('x') },
    ]);
    const options = { fileName: 'readings.zip', timeZone: 'Etc/UTC' };

    it('shows the largest, unsure, and names them all', async () => {
      const preview = await previewIntervals(both, options);
      expect(preview.dialect.members).toEqual(['a.csv', 'april/b.csv']);
      expect(preview.guesses[0]).toMatchObject({ key: 'member', takenAs: 'a.csv', sure: false });
      expect(preview).toMatchObject({ problems: [], report: { totalKwh: 300 } });
      const { report } = await readIntervals(both, { ...options, columnMap: preview.columnMap });
      expect(report.totalKwh).toBe(300);
    });

    it('reads the one that is chosen and says so in its map', async () => {
      const columnMap = { kind: 'intervals' as const, member: 'april/b.csv' };
      const { report } = await readIntervals(both, { ...options, columnMap });
      // 7 + 8 + 9
      expect(report).toMatchObject({ totalKwh: 24, columnMap: { member: 'april/b.csv' } });
      const preview = await previewIntervals(both, { ...options, columnMap });
      expect(preview.guesses[0]).toMatchObject({ key: 'member', sure: true });
    });

    it('refuses one it does not hold', async () => {
      const columnMap = { kind: 'intervals' as const, member: 'c.csv' };
      await expect(readIntervals(both, { ...options, columnMap })).rejects.toThrow(/no file “c\.csv”.*a\.csv/s);
    });
  });

  it('names the archive and the file in it where something is wrong', async () => {
    await expect(read(zip([{ name: 'odd.csv', bytes: bytesOf('a,b\n1,2\n') }]))).rejects.toThrow(
      /readings\.zip, odd\.csv/,
    );
  });
});
