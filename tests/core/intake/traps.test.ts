import { describe, expect, it } from 'vitest';
import * as XLSX from 'xlsx';
import { IntakeError, readBills, readIntervals, type ColumnMap } from '@/core/intake';
import { bytesOf, readText } from './files';

// One small file for each trap; every expected figure is worked out by hand from the rows above it.
const zone = 'UTC';
const codes = (notes: { code: string }[]) => notes.map((note) => note.code);
const stampAt = (at: number) => new Date(Date.UTC(2025, 5, 10) + at * 900_000).toISOString().slice(0, 16);
const rowsOf = (count: number, cells: (at: number) => (number | string)[]) =>
  Array.from({ length: count }, (_, at) => [stampAt(at), ...cells(at)].join(','));
const table = (header: string, rows: string[]) => [header, ...rows].join('\n');

describe('quality', () => {
  it('takes the worst of several columns of marks', async () => {
    const marks = ['A,A', 'E,A', 'A,E', 'A,N', 'A,A'];
    const rows = rowsOf(5, (at) => [
      at,
      (marks[at] ?? '').split(',')[0] ?? '',
      7,
      (marks[at] ?? '').split(',')[1] ?? '',
    ]);
    const { load, report } = await readText(table('Time,kWh,kWh quality,Lagging kvarh,kvarh quality', rows), zone);
    expect([...load.quality]).toEqual([0, 1, 1, 2, 0]);
    expect([...load.kwh]).toEqual([0, 1, 2, Number.NaN, 4]);
    expect(report).toMatchObject({ estimated: 2, missing: 1 });
  });

  it('keeps readings that are blank before the first figure as missing', async () => {
    const blanks = ['-', 'NA', 'NaN', '', 'Null'];
    const rows = rowsOf(12, (at) => [blanks[at] ?? 2]);
    const { load, report } = await readText(table('Time,kWh', rows), zone);
    expect(load.startMs).toBe(Date.UTC(2025, 5, 10));
    expect(report).toMatchObject({ rowsRead: 12, intervals: 12, missing: 5, totalKwh: 14 });
  });
});

describe('rows and columns of other things', () => {
  it('leaves gas rows out', async () => {
    const rows = [...rowsOf(8, (at) => ['Electric usage', at, 'kWh']), ...rowsOf(8, () => ['Gas usage', 5, 'therms'])];
    const { report } = await readText(table('Time,Type,Usage,Units', rows), zone);
    expect(report).toMatchObject({ rowsRead: 8, intervals: 8, missing: 0, totalKwh: 28 });
    expect(codes(report.notes)).toContain('channel-left-out');
  });

  it('works no kvarh out from the rating of a transformer', async () => {
    const { report } = await readText(
      table(
        'Time,kWh,Transformer kVA',
        rowsOf(8, (at) => [at, 1500]),
      ),
      zone,
    );
    expect(report.totalKvarhLagging).toBeNaN();
    expect(codes(report.notes).filter((code) => code === 'channel-absent')).toHaveLength(2);
  });

  it('reads no date from a footer whose word begins like a month', async () => {
    const rows = [...rowsOf(8, (at) => [at]), 'Generated 2025-07-01 10:00,', 'Average,3.5'];
    const { report } = await readText(table('Time,kWh', rows), zone);
    expect(report).toMatchObject({ intervals: 8, totalKwh: 28 });
  });

  it('takes columns named like parts of every object for what they are: other columns', async () => {
    const rows = rowsOf(8, (at) => [1, 2, at, 4]);
    const { report } = await readText(table('Time,__proto__,constructor,kWh,toString', rows), zone);
    expect(report).toMatchObject({ intervals: 8, totalKwh: 28 });
  });

  it('keeps the first of a day sent twice with other figures', async () => {
    const first = rowsOf(192, (at) => [at]);
    const again = rowsOf(192, (at) => [at + 1]).slice(96);
    const { report } = await readText(table('Time,kWh', [...first, ...again]), zone);
    // 0 + 1 + ... + 191
    expect(report).toMatchObject({ rowsRead: 288, intervals: 192, duplicates: 96, totalKwh: 18_336 });
    expect(codes(report.notes)).toContain('duplicates-differ');
  });

  it('notes what it assumed: decimal mark, sense of kvarh', async () => {
    const { report } = await readText(
      table(
        'Time;kWh;kvarh',
        rowsOf(8, () => ['1,234', '2,345']).map((row) => row.replace(/,(\d),(\d{3}),(\d),(\d{3})$/, ';$1,$2;$3,$4')),
      ),
      'Europe/Berlin',
    );
    expect(report.totalKwh).toBeCloseTo(8 * 1.234, 9);
    expect(codes(report.notes)).toEqual(expect.arrayContaining(['decimal-mark-assumed', 'reactive-sense']));
  });
});

describe('an autumn hour written once', () => {
  // America/Chicago, 2 November 2025: 24 hourly rows on a day of 25 hours; the second 01:00 (07:00Z) is missing.
  it('is the first pass even where the file holds no other clock change', async () => {
    const rows = Array.from({ length: 24 }, (_, hour) => `2025-11-02 ${String(hour).padStart(2, '0')}:00,${hour + 1}`);
    const { load, report } = await readText(table('Time,kWh', rows), 'America/Chicago');
    expect(load.startMs).toBe(Date.parse('2025-11-02T05:00Z'));
    expect(report).toMatchObject({ intervals: 25, missing: 1, totalKwh: 300 });
    expect(load.quality[2]).toBe(2);
    expect(codes(report.notes)).toContain('repeated-hour-once');
  });
});

function book(
  sheets: Record<string, (string | number | null)[][]>,
  touch: (workbook: XLSX.WorkBook) => void,
): Uint8Array {
  const workbook = XLSX.utils.book_new();
  for (const [name, rows] of Object.entries(sheets)) {
    const sheet = XLSX.utils.aoa_to_sheet(rows);
    for (const [place, cell] of Object.entries(sheet) as [string, XLSX.CellObject][]) {
      if (place.startsWith('A') && cell.t === 'n')
        cell.z = Number.isInteger(cell.v) ? 'yyyy-mm-dd' : 'yyyy-mm-dd hh:mm';
      if (place.startsWith('B') && cell.t === 'n' && name === 'Merged') cell.z = 'hh:mm';
    }
    XLSX.utils.book_append_sheet(workbook, sheet, name);
  }
  touch(workbook);
  return new Uint8Array(XLSX.write(workbook, { type: 'array', bookType: 'xlsx' }) as ArrayBuffer);
}

describe('sheets', () => {
  const readBook = (bytes: Uint8Array) => readIntervals(bytes, { fileName: 'plant.xlsx', timeZone: zone });
  const tableOf = (first: number, count: number, figure: number) => [
    ['Time', 'kWh'],
    ...Array.from({ length: count }, (_, at) => [first + (at + 0.5) / 48, figure]),
  ];

  it('passes by a hidden sheet, though it is longer', async () => {
    const bytes = book({ Old: tableOf(45_000, 200, 99), Now: tableOf(45_800, 48, 2) }, (workbook) => {
      workbook.Workbook = { Sheets: [{ Hidden: 1 }, { Hidden: 0 }] };
    });
    expect((await readBook(bytes)).report).toMatchObject({ intervals: 48, totalKwh: 96 });
  });

  it('names other sheets that seem to hold as much', async () => {
    const bytes = book({ Jan: tableOf(45_658, 48, 2), Feb: tableOf(45_689, 48, 3) }, () => undefined);
    const { report } = await readBook(bytes);
    expect(report.notes.find((note) => note.code === 'sheets-left-out')?.message).toContain('Feb');
  });

  it('reads a date merged over the rows of its day', async () => {
    const rows = Array.from({ length: 48 }, (_, at) => [at === 0 ? 45_800 : null, at / 48, 2]);
    const bytes = book({ Merged: [['Date', 'Time', 'kWh'], ...rows] }, (workbook) => {
      const sheet = workbook.Sheets.Merged;
      if (sheet) sheet['!merges'] = [{ s: { r: 1, c: 0 }, e: { r: 48, c: 0 } }];
    });
    expect((await readBook(bytes)).report).toMatchObject({ intervals: 48, missing: 0, totalKwh: 96 });
  });
});

describe('bills', () => {
  it('takes a column that is the sum of the others as the total, whatever its name', async () => {
    const text = table('From,To,kWh,KWH Charges,KW Charges,Other charges,Current Charges', [
      '12/24/2024,01/26/2025,128800,"$7,387.97","$2,808.00","$5,200.85","$15,396.82"',
      '01/26/2025,02/24/2025,115200,"$6,607.00","$2,912.00","$5,036.47","$14,555.47"',
    ]);
    const { bills } = await readBills(bytesOf(text), { fileName: 'bills.csv', timeZone: 'America/New_York' });
    expect(bills.map((bill) => bill.total)).toEqual([15_396.82, 14_555.47]);
    expect(bills[0]?.charges.map((charge) => charge.amount)).toEqual([7387.97, 2808, 5200.85]);
  });
});

describe('hostile tables', () => {
  const refusal = async (work: Promise<unknown>): Promise<IntakeError> => {
    const cause: unknown = await work.then(
      () => null,
      (reason: unknown) => reason,
    );
    expect(cause).toBeInstanceOf(IntakeError);
    return cause as IntakeError;
  };
  const options = { fileName: 'hostile.csv', timeZone: zone };

  it('refuses a million columns at once, as readings and as bills', async () => {
    const row = (first: string, cell: string) => `${first},${new Array<string>(1_000_000).fill(cell).join(',')}`;
    const bytes = bytesOf([row('Date', 'kWh'), row('2025-01-01', '1'), row('2025-02-01', '2')].join('\n'));
    for (const read of [readIntervals, readBills]) {
      const { problems } = await refusal(read(bytes, options));
      expect(problems[0]?.message).toContain('at most 512');
    }
  }, 10_000);

  it('takes figures too large for a number as none', async () => {
    const rows = rowsOf(200, (at) => [at === 3 ? '1e400' : 1]);
    const { report } = await readText(table('Time,kWh', rows), zone);
    expect(report).toMatchObject({ missing: 1, totalKwh: 199 });
  });

  it('is not held up by a cell or a name of a million letters', async () => {
    const rows = rowsOf(20, (at) => [at, at === 2 ? 'x'.repeat(1_000_000) : '']);
    const { report } = await readText(table(`Time,kWh,${'('.repeat(100_000)}`, rows), zone);
    expect(report).toMatchObject({ intervals: 20, totalKwh: 190 });
  }, 10_000);

  it('gives a reading or a refusal with its place and remedy for whatever bytes', async () => {
    // A linear congruential generator (Numerical Recipes' constants), so that every run tries the same bytes.
    let state = 7;
    const next = (below: number): number => {
      state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
      return Math.floor((state / 2 ** 32) * below);
    };
    const seeds = [
      bytesOf(
        table(
          'Time,kWh,kvarh,Quality',
          rowsOf(40, (at) => [at, 2, 'A']),
        ),
      ),
      bytesOf(['200,N,E1,,E1,,M,kWh,30,', `300,20250101,${'1,'.repeat(48)}V,,,`, '400,1,48,A,,'].join('\n')),
      bytesOf('<?xml version="1.0"?><feed xmlns="http://www.w3.org/2005/Atom"><entry><title>a</title></entry></feed>'),
      Uint8Array.from({ length: 400 }, () => next(256)),
    ];
    let refused = 0;
    for (let turn = 0; turn < 400; turn += 1) {
      const bytes = (seeds[turn % seeds.length] ?? new Uint8Array()).slice(0, 50 + next(2000));
      for (let edit = 0; edit < 1 + (turn % 9); edit += 1) bytes[next(bytes.length)] = next(256);
      try {
        const { load, report } = await readIntervals(bytes, options);
        expect(load.kwh.length).toBe(report.intervals);
      } catch (cause) {
        if (!(cause instanceof IntakeError)) throw cause;
        refused += 1;
        for (const problem of cause.problems) expect(Object.values(problem).every((text) => text !== '')).toBe(true);
      }
    }
    expect(refused).toBeGreaterThan(100);
  }, 20_000);
});

describe('column maps as plain JSON', () => {
  it('read the same again after a turn through text', async () => {
    const text = table(
      'Time,kWh,kWh quality,Lagging kvarh,kvarh quality',
      rowsOf(8, (at) => [at, 'A', 7, at === 3 ? 'E' : 'A']),
    );
    const one = await readText(text, zone);
    const map = JSON.parse(JSON.stringify(one.report.columnMap)) as ColumnMap;
    const again = await readText(text, zone, map);
    expect(again.load).toEqual(one.load);
  });
});
