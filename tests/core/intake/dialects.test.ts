import { describe, expect, it } from 'vitest';
import { previewIntervals, readIntervals } from '@/core/intake';
import { bytesOf, readText } from './files';

/** Four quarter-hours from 2025-03-13 00:00 in UTC+8 without summer time. */
const stamps = ['2025-03-13 00:00', '2025-03-13 00:15', '2025-03-13 00:30', '2025-03-13 00:45'];
const zone = 'Asia/Singapore';
const start = Date.parse('2025-03-12T16:00:00Z');

async function kwhOf(text: string, timeZone = zone): Promise<number[]> {
  const { load } = await readText(text, timeZone);
  expect(load.startMs).toBe(start);
  expect(load.stepMinutes).toBe(15);
  return [...load.kwh];
}

describe('delimiters and decimal marks', () => {
  it.each([
    ['comma', ',', ['1.5', '2.25', '1000.125', '4']],
    ['semicolon with decimal comma', ';', ['1,5', '2,25', '1000,125', '4']],
    ['semicolon with thousands points', ';', ['1,5', '2,25', '1.000,125', '4,00']],
    ['tab', '\t', ['1.5', '2.25', '1,000.125', '4']],
    ['bar with spaces', ' | ', ['1.5', '2.25', "1'000.125", '4']],
    ['comma with quoted figures', ',', ['"1.5"', '"2.25"', '"1,000.125"', '"4"']],
    ['comma with quoted decimal comma', ',', ['"1,5"', '"2,25"', '"1000,125"', '"4,0"']],
  ])('reads %s', async (_name, delimiter, figures) => {
    const rows = stamps.map((stamp, at) => [stamp, figures[at]].join(delimiter));
    expect(await kwhOf([['Time', 'Energy kWh'].join(delimiter), ...rows].join('\n'))).toEqual([1.5, 2.25, 1000.125, 4]);
  });

  it('is not fooled by a preamble with commas and a footer', async () => {
    const text = `Plant, northern works, meter 7\nExported, by, the, portal\n\nDate;Energy (kWh)\n${stamps
      .map((stamp, at) => `${stamp};${at + 1},5`)
      .join('\n')}\nTotal;12,0\n`;
    const { load, report } = await readText(text, zone);
    expect([...load.kwh]).toEqual([1.5, 2.5, 3.5, 4.5]);
    expect(report.rowsRead).toBe(4);
    expect(report.notes.find((note) => note.code === 'rows-left-out')?.where).toContain('9 (Total)');
  });

  it('says that 1,234 alone leaves the decimal mark open', async () => {
    const text = `Time;kWh\n${stamps.map((stamp) => `${stamp};1,234`).join('\n')}`;
    const preview = await previewIntervals(bytesOf(text), { fileName: 'open.csv', timeZone: zone });
    expect(preview.guesses.find((guess) => guess.key === 'decimal-mark')).toMatchObject({
      takenAs: 'comma',
      sure: false,
    });
  });
});

describe('encodings and line ends', () => {
  const text = `Zeit;Wirkarbeit für Größe (kWh)\n${stamps.map((stamp, at) => `${stamp};${at + 1}`).join('\n')}\n`;
  const utf16 = (bigEndian: boolean): Uint8Array => {
    const bytes = new Uint8Array(2 + text.length * 2);
    const view = new DataView(bytes.buffer);
    [0xfeff, ...Array.from(text, (sign) => sign.charCodeAt(0))].forEach((code, at) =>
      view.setUint16(at * 2, code, !bigEndian),
    );
    return bytes;
  };

  it.each([
    ['UTF-8', 'UTF-8', bytesOf(text)],
    ['UTF-8 with mark', 'UTF-8 with mark', bytesOf(`\uFEFF${text}`)],
    ['UTF-16 little-endian', 'UTF-16 LE', utf16(false)],
    ['UTF-16 big-endian', 'UTF-16 BE', utf16(true)],
    ['UTF-16 without mark', 'UTF-16 LE', utf16(false).subarray(2)],
    ['Windows-1252', 'Windows-1252', Uint8Array.from(text, (sign) => sign.charCodeAt(0))],
  ])('reads %s', async (_name, encoding, bytes) => {
    const preview = await previewIntervals(bytes, { fileName: 'zeit.csv', timeZone: zone });
    expect(preview.dialect.encoding).toBe(encoding);
    expect(preview.columns[1]?.name).toBe('Wirkarbeit für Größe (kWh)');
    expect(preview.report?.totalKwh).toBe(10);
  });

  it.each([
    ['CRLF', '\r\n'],
    ['CR', '\r'],
  ])('reads line ends %s', async (_name, end) => {
    expect(
      await kwhOf(`Time,kWh\n${stamps.map((stamp, at) => `${stamp},${at}`).join('\n')}`.replaceAll('\n', end)),
    ).toEqual([0, 1, 2, 3]);
  });

  it('reads line breaks inside quotes and counts rows as the file does', async () => {
    const bad = `"Time","kWh\n(as metered)"\n${stamps.map((stamp, at) => `"${stamp}","${at}"`).join('\n')}\n"2025-03-13 00:60",1\n`;
    const { load, report } = await readText(bad, zone);
    expect([...load.kwh]).toEqual([0, 1, 2, 3]);
    expect(report.notes.find((note) => note.code === 'stamp-unreadable')?.where).toContain('row 7');
  });
});

describe('dates and times', () => {
  const figures = [1, 2, 3, 4];
  it.each([
    ['year first', stamps],
    ['day first with points', ['13.03.2025 00:00', '13.03.2025 00:15', '13.03.2025 00:30', '13.03.2025 00:45']],
    [
      'month first, twelve-hour clock',
      ['3/13/2025 12:00 AM', '3/13/2025 12:15 AM', '3/13/2025 12:30 AM', '3/13/2025 12:45 AM'],
    ],
    ['month as a word', ['13-Mar-2025 00:00', '13-Mar-2025 00:15', '13-Mar-2025 00:30', '13-Mar-2025 00:45']],
    [
      'month as a word in front',
      ['Mar 13, 2025 0:00', 'Mar 13, 2025 0:15', 'Mar 13, 2025 0:30', 'Mar 13, 2025 0:45'].map((stamp) => `"${stamp}"`),
    ],
    ['without marks', ['202503130000', '202503130015', '202503130030', '202503130045']],
    [
      'seconds and T',
      ['2025-03-13T00:00:00.000', '2025-03-13T00:15:00.000', '2025-03-13T00:30:00.000', '2025-03-13T00:45:00.000'],
    ],
    ['UTC with Z', ['2025-03-12T16:00:00Z', '2025-03-12T16:15:00Z', '2025-03-12T16:30:00Z', '2025-03-12T16:45:00Z']],
    [
      'offset without colon',
      ['2025-03-12T13:00:00-0300', '2025-03-12T13:15:00-0300', '2025-03-12T13:30:00-0300', '2025-03-12T13:45:00-0300'],
    ],
    ['h between', ['13/03/2025 00h00', '13/03/2025 00h15', '13/03/2025 00h30', '13/03/2025 00h45']],
    [
      'spans of stamps',
      [
        '13.03.2025 00:00 - 13.03.2025 00:15',
        '13.03.2025 00:15 - 13.03.2025 00:30',
        '13.03.2025 00:30 - 13.03.2025 00:45',
        '13.03.2025 00:45 - 13.03.2025 01:00',
      ],
    ],
    ['zone letters', ['2025-03-13 00:00 SGT', '2025-03-13 00:15 SGT', '2025-03-13 00:30 SGT', '2025-03-13 00:45 SGT']],
  ])('reads %s', async (_name, written) => {
    expect(
      await kwhOf(`Reading taken,kWh\n${written.map((stamp, at) => `${stamp},${figures[at]}`).join('\n')}`),
    ).toEqual(figures);
  });

  it.each([
    [
      'a date and a time',
      'Date,Time',
      ['13/03/2025,00:00', '13/03/2025,00:15', '13/03/2025,00:30', '13/03/2025,00:45'],
    ],
    [
      'a date and a bare time',
      'Date,Time',
      ['13/03/2025,0', '13/03/2025,15', '13/03/2025,30', '13/03/2025,45', '13/03/2025,100'],
    ],
    [
      'a date and an interval number',
      'Date,Interval',
      [
        '20250313,1',
        '20250313,2',
        '20250313,3',
        '20250313,4',
        ...Array.from({ length: 92 }, (_, at) => `20250313,${at + 5}`),
      ],
    ],
  ])('reads %s', async (_name, header, written) => {
    const text = `${header},kWh\n${written.map((stamp, at) => `${stamp},${at + 1}`).join('\n')}`;
    expect(await kwhOf(text)).toEqual(written.map((_stamp, at) => at + 1));
  });

  it('reads 24:00 as the end of its own day', async () => {
    const rows = Array.from({ length: 96 }, (_, at) => {
      const minute = (at + 1) * 15;
      return `13.03.2025;${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')};${at}`;
    });
    expect(rows.at(-1)).toBe('13.03.2025;24:00;95');
    expect(await kwhOf(`Datum;Uhrzeit;kWh\n${rows.join('\n')}`)).toEqual(rows.map((_row, at) => at));
  });

  it('reads spreadsheet serials and epoch seconds named as times', async () => {
    const serial = (at: number): number => 45_729 + at / 96; // 2025-03-13 is day 45,729 of the 1900 system
    expect(await kwhOf(`Timestamp,kWh\n${figures.map((figure, at) => `${serial(at)},${figure}`).join('\n')}`)).toEqual(
      figures,
    );
    expect(
      await kwhOf(`Timestamp,kWh\n${figures.map((figure, at) => `${start / 1000 + at * 900},${figure}`).join('\n')}`),
    ).toEqual(figures);
  });

  it('settles day and month by continuity where no day is above 12', async () => {
    const days = Array.from({ length: 12 }, (_, at) => `0${at + 1}`.slice(-2));
    const rows = days.flatMap((day) =>
      Array.from({ length: 24 }, (_, hour) => `${day}/02/2025 ${String(hour).padStart(2, '0')}:00,5`),
    );
    const { report } = await readText(`Time,kWh\n${rows.join('\n')}`, 'America/New_York');
    expect(report).toMatchObject({ intervals: 288, missing: 0 });
    expect(new Date(report.firstMs).toISOString()).toBe('2025-02-01T05:00:00.000Z');
  });

  it('asks where nothing tells day from month, and follows the zone meanwhile', async () => {
    const rows = Array.from({ length: 24 }, (_, hour) => `02/03/2025 ${String(hour).padStart(2, '0')}:00,5`);
    const text = `Time,kWh\n${rows.join('\n')}`;
    const inChicago = await previewIntervals(bytesOf(text), { fileName: 'one-day.csv', timeZone: 'America/Chicago' });
    const inMadrid = await previewIntervals(bytesOf(text), { fileName: 'one-day.csv', timeZone: 'Europe/Madrid' });
    const order = (preview: typeof inChicago) => preview.guesses.find((guess) => guess.key === 'date-order');
    expect(order(inChicago)).toMatchObject({ takenAs: 'month, day, year', sure: false });
    expect(order(inMadrid)).toMatchObject({ takenAs: 'day, month, year', sure: false });
    expect(inMadrid.columns[0]?.sure).toBe(false);
  });
});

describe('missing readings', () => {
  it.each(['', '-', 'NA', 'N/A', 'NaN', 'null', '#N/A', '—'])('takes “%s” as missing, not as nought', async (blank) => {
    const text = `Time,kWh\n${stamps.map((stamp, at) => `${stamp},${at === 2 ? blank : at + 1}`).join('\n')}`;
    const { load, report } = await readText(text, zone);
    expect([...load.kwh]).toEqual([1, 2, Number.NaN, 4]);
    expect([...load.quality]).toEqual([0, 0, 2, 0]);
    expect(report).toMatchObject({ missing: 1, totalKwh: 7 });
    expect(report.gaps).toEqual([{ fromMs: start + 1_800_000, toMs: start + 2_700_000, intervals: 1 }]);
  });

  it('fills absent rows as missing and drops repeated ones, keeping the first', async () => {
    const text = `Time,kWh\n2025-03-13 00:00,1\n2025-03-13 00:15,2\n2025-03-13 00:15,2\n2025-03-13 00:15,9\n2025-03-13 00:30,3\n2025-03-13 01:15,4\n2025-03-13 01:30,5\n`;
    const { load, report } = await readText(text, zone);
    expect([...load.kwh]).toEqual([1, 2, 3, Number.NaN, Number.NaN, 4, 5]);
    expect(report).toMatchObject({ duplicates: 2, missing: 2, intervals: 7, rowsRead: 7 });
    expect(report.notes.find((note) => note.code === 'duplicates-differ')?.where).toBe('row 5');
  });
});

describe('invariance', () => {
  it('does not change the bytes it reads', async () => {
    const bytes = bytesOf(`Time,kWh\n${stamps.map((stamp) => `${stamp},1`).join('\n')}`);
    const copy = bytes.slice();
    await readIntervals(bytes, { fileName: 'a.csv', timeZone: zone });
    expect(bytes).toEqual(copy);
  });
});
