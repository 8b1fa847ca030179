import * as XLSX from 'xlsx';
import { describe, expect, it } from 'vitest';
import { IntakeError } from '@/core/intake';
import { bytesOf } from './files';
import { csv, notesOf, previewTable, readTable, type Rows } from './bill-tables';

/** Random figures in [0, 1) from a seed (mulberry32), so that a failure can be run again. */
function seeded(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
}

describe('tables that mean no good', () => {
  it('may name columns after properties of objects', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'kWh', '__proto__', 'constructor', 'toString', 'Total charges'],
      ['2025-01-01', '2025-01-31', 100, '10.00', '20.00', '30.00', '60.00'],
      ['2025-02-01', '2025-02-28', 100, '11.00', '20.00', '30.00', '61.00'],
    ]);
    expect(bills[0]?.charges).toEqual([
      { label: '__proto__', amount: 10 },
      { label: 'constructor', amount: 20 },
      { label: 'toString', amount: 30 },
    ]);
    expect(({} as Record<string, unknown>).amount).toBeUndefined();
    const named = await readTable(
      [
        ['Month', '__proto__', 'Total charges'],
        ['2025-01', 7, '10.00'],
        ['2025-02', 8, '10.00'],
      ],
      {
        columnMap: {
          kind: 'bills',
          columns: [{ index: 1, name: '__proto__', role: 'quantity', quantity: '__proto__' }],
        },
      },
    );
    expect(Object.keys(named.bills[0]?.quantities ?? {})).toEqual(['__proto__']);
    expect(Object.getPrototypeOf(named.bills[0]?.quantities)).toBe(Object.prototype);
  });

  it('may have 500 columns', async () => {
    const extra = Array.from({ length: 494 }, (_, at) => `Rider ${at}`);
    const started = performance.now();
    const { bills } = await readTable([
      ['From', 'To', 'kWh', 'Energy charge', ...extra, 'Total charges'],
      ['2025-01-01', '2025-01-31', 100, '10.00', ...extra.map(() => '0.01'), '14.94'],
      ['2025-02-01', '2025-02-28', 100, '10.00', ...extra.map(() => '0.01'), '14.94'],
    ]);
    expect(bills[0]?.charges).toHaveLength(495);
    expect(performance.now() - started).toBeLessThan(5000);
  });

  it('may have more columns than are read, and are refused for it', async () => {
    const wide = Array.from({ length: 600 }, (_, at) => `Rider ${at}`);
    await expect(
      readTable([
        ['From', 'To', ...wide],
        ['2025-01-01', '2025-01-31', ...wide.map(() => '1.00')],
      ]),
    ).rejects.toBeInstanceOf(IntakeError);
  });

  it.each(['9'.repeat(40), '1e308', '1e999', `1${'0'.repeat(25)}`])('may hold the figure %s', async (huge) => {
    const table: Rows = [
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', huge, '10.00'],
      ['2025-02-01', '2025-02-28', '100', '10.00'],
    ];
    const outcome = await readTable(table).catch((cause: unknown) => cause);
    if (outcome instanceof IntakeError) expect(outcome.message).toContain('row 2');
    else expect((outcome as Awaited<ReturnType<typeof readTable>>).bills[0]?.quantities.kwh).toBe(Number(huge));
  });

  it('may repeat names of columns', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'Charge', 'Charge', 'Total'],
      ['2025-01-01', '2025-01-31', '10.00', '20.00', '30.00'],
      ['2025-02-01', '2025-02-28', '11.00', '20.00', '31.00'],
    ]);
    expect(bills[0]?.charges.map(({ amount }) => amount)).toEqual([10, 20]);
  });

  it('may have thousands of rows of one day', async () => {
    const rows: Rows = Array.from({ length: 3000 }, (_, at) => ['2025-01-01', '2025-01-31', at, `${at}.00`]);
    const started = performance.now();
    await expect(readTable([['From', 'To', 'kWh', 'Total charges'], ...rows])).rejects.toThrow(/overlap/);
    expect(performance.now() - started).toBeLessThan(10_000);
  });

  it('may hold formulas: the values kept with them are read', async () => {
    const sheet = XLSX.utils.aoa_to_sheet([
      ['Month', 'Energy charge', 'Tax', 'Total'],
      ['2025-01', 100, 7, 107],
      ['2025-02', 110, 7.7, 117.7],
    ]);
    for (const at of ['D2', 'D3']) {
      const cell = sheet[at] as XLSX.CellObject;
      cell.f = `B${at.slice(1)}+C${at.slice(1)}`;
    }
    const book = XLSX.utils.book_new();
    XLSX.utils.book_append_sheet(book, sheet, 'Bills');
    const { bills } = await readTable(new Uint8Array(XLSX.write(book, { type: 'array' }) as ArrayBuffer), {
      fileName: 'b.xlsx',
    });
    expect(bills.map(({ total }) => total)).toEqual([107, 117.7]);
  });
});

describe('a table of bills with cells exchanged, lost or spoilt', () => {
  const base: Rows = [
    ['Invoice', 'From', 'To', 'Read type', 'kWh', 'Power factor', 'Energy charge', 'Demand charge', 'Tax', 'Total'],
    ...Array.from({ length: 8 }, (_, at): (string | number)[] => [
      `I-${at}`, `2025-0${at + 1}-01`, `2025-0${at + 2}-01`, 'Actual', 1000 + at, '0.87', `${100 + at}.00`, '50.00', '7.00', `${157 + at}.00`,
    ]),
  ]; // prettier-ignore
  const spoils = [
    '',
    '-',
    'pending',
    '$',
    '(',
    '1e999',
    '-0',
    '=1+1',
    '2025-13-45',
    '💡',
    '\u0000',
    '1,2,3',
    'Total',
    '__proto__',
    '-5.00',
    'NaN',
    '100 kWh',
    '€5',
  ];

  it('is read, or refused with a place and a remedy, and never counts a bill twice', async () => {
    const random = seeded(20_251_201);
    let read = 0;
    let refused = 0;
    for (let run = 0; run < 600; run += 1) {
      const rows = base.map((row) => [...row]);
      const pick = (): [number, number] => [Math.floor(random() * rows.length), Math.floor(random() * 10)];
      for (let edit = 0; edit < 1 + Math.floor(random() * 3); edit += 1) {
        const [row, column] = pick();
        const [otherRow, otherColumn] = pick();
        const own = rows[row];
        const other = rows[otherRow];
        if (!own || !other) continue;
        if (random() < 0.3) [own[column], other[otherColumn]] = [other[otherColumn] ?? null, own[column] ?? null];
        else if (random() < 0.2) rows.splice(row, 1);
        else own[column] = spoils[Math.floor(random() * spoils.length)] ?? '';
      }
      const outcome = await readTable(bytesOf(csv(rows))).catch((cause: unknown) => cause);
      if (outcome instanceof IntakeError) {
        refused += 1;
        for (const problem of outcome.problems)
          expect([problem.message, problem.where, problem.remedy].every((text) => text.length > 3)).toBe(true);
        continue;
      }
      if (outcome instanceof Error) throw outcome;
      read += 1;
      const { bills } = outcome as Awaited<ReturnType<typeof readTable>>;
      bills.slice(1).forEach((bill, at) => expect(bill.period.from >= (bills[at]?.period.to ?? '')).toBe(true));
      for (const { quantities, charges, total } of bills)
        expect(
          [...Object.values(quantities), ...charges.map(({ amount }) => amount), total ?? 0].every(Number.isFinite),
        ).toBe(true);
    }
    expect(read).toBeGreaterThan(100);
    expect(refused).toBeGreaterThan(50);
  });

  it('shows a preview of whatever it is', async () => {
    const random = seeded(7);
    for (let run = 0; run < 200; run += 1) {
      const rows = base.map((row) =>
        row.map((cell) =>
          random() < 0.1 ? (spoils[Math.floor(random() * spoils.length)] ?? '').replace('\u0000', 'x') : cell,
        ),
      );
      const shown = await previewTable(bytesOf(csv(rows)));
      expect(shown.report === null).toBe(shown.problems.length > 0);
    }
  });
});

describe('what a person corrects', () => {
  it('a quantity taken for a line comes back as a line, the notes follow', async () => {
    const table: Rows = [
      ['Month', 'kWh', 'Surge', 'Energy charge', 'Total'],
      ['2025-01', 100, '5.00', '10.00', '15.00'],
      ['2025-02', 100, '5.00', '10.00', '15.00'],
    ];
    const shown = await previewTable(table);
    const columns = (shown.columnMap.columns ?? []).map((use) =>
      use.name === 'Surge' ? { ...use, role: 'ignore' as const } : use,
    );
    const reading = await readTable(table, { columnMap: { ...shown.columnMap, columns } });
    expect(notesOf(reading, 'sum-differs')).toHaveLength(2);
  });
});
