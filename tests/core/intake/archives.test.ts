import { describe, expect, it } from 'vitest';
import { readIntervals } from '@/core/intake';
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

  it('names the archive and the file in it where something is wrong', async () => {
    await expect(read(zip([{ name: 'odd.csv', bytes: bytesOf('a,b\n1,2\n') }]))).rejects.toThrow(
      /readings\.zip, odd\.csv/,
    );
  });
});
