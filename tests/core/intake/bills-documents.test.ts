import { describe, expect, it } from 'vitest';
import { containers, notesOf, previewTable, readTable, type Rows } from './bill-tables';

// Tables of invented utilities; what must stand is told from the rows by eye.

const months = ({ bills }: { bills: { period: { from: string } }[] }) =>
  bills.map(({ period }) => period.from.slice(0, 7));

describe('estimated, then corrected', () => {
  const table: Rows = [
    ['Invoice', 'From', 'To', 'Read type', 'kWh', 'Energy charge', 'Total'],
    ['1001', '2025-01-01', '2025-01-31', 'Actual', 1000, '100.00', '100.00'],
    ['1002', '2025-02-01', '2025-02-28', 'Estimated', 1200, '120.00', '120.00'],
    ['1003', '2025-03-01', '2025-03-31', 'Actual', 1100, '110.00', '110.00'],
    ['1004', '2025-02-01', '2025-02-28', 'Corrected', 950, '95.00', '95.00'],
  ];

  it.each(containers)('lets the correction stand and names the estimate (%s)', async (_name, pack) => {
    const reading = await readTable(pack(table));
    expect(reading.bills.map(({ invoice, total }) => [invoice, total])).toEqual([
      ['1001', 100],
      ['1004', 95],
      ['1003', 110],
    ]);
    expect(reading.report.documents?.map(({ row, invoice, kind, bill }) => [row, invoice, kind, bill])).toEqual([
      [2, '1001', 'bill', 0],
      [3, '1002', 'estimate', null],
      [4, '1003', 'bill', 2],
      [5, '1004', 'correction', 1],
    ]);
    expect(notesOf(reading, 'document-left-out')).toEqual([
      'row 3: The estimated bill 1002 of 120.00 is left out. An estimate that row 5 corrects.',
    ]);
    expect(reading.report.columnMap?.periodEnds).toBe('inclusive');
  });

  it('lets a person take the estimate instead, by row and total', async () => {
    const reading = await readTable(table, {
      columnMap: {
        kind: 'bills',
        documents: [
          { row: 3, total: 120, isTaken: true },
          { row: 5, total: 95, isTaken: false },
        ],
      },
    });
    expect(reading.bills.map(({ invoice }) => invoice)).toEqual(['1001', '1002', '1003']);
    expect(reading.report.documents?.[3]).toMatchObject({ bill: null, why: 'A person chose so' });
  });

  it('ignores a choice made on another file, whose row has another total', async () => {
    const { bills } = await readTable(table, {
      columnMap: { kind: 'bills', documents: [{ row: 5, total: 94, isTaken: false }] },
    });
    expect(bills.map(({ invoice }) => invoice)).toEqual(['1001', '1004', '1003']);
  });

  it.each([
    ['a column of E and A', 'E/A', 'E', 'A'],
    ['a question', 'Estimated?', 'Yes', 'No'],
    ['German words', 'Ableseart', 'geschätzt', 'abgelesen'],
    ['Spanish words', 'Tipo de lectura', 'Estimada', 'Real'],
  ])('understands %s', async (_name, head, estimated, actual) => {
    const { bills } = await readTable([
      ['From', 'To', head, 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', estimated, 900, '90.00'],
      ['2025-01-01', '2025-01-31', actual, 1000, '100.00'],
      ['2025-02-01', '2025-02-28', actual, 1000, '101.00'],
    ]);
    expect(bills.map(({ total }) => total)).toEqual([100, 101]);
  });

  it('lets one bill of the readings replace the estimates of its months', async () => {
    const reading = await readTable([
      ['From', 'To', 'Read type', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 'E', 900, '90.00'],
      ['2025-02-01', '2025-02-28', 'E', 900, '90.00'],
      ['2025-01-01', '2025-03-31', 'A', 2900, '290.00'],
      ['2025-04-01', '2025-04-30', 'A', 1000, '101.00'],
    ]);
    expect(reading.bills.map(({ period }) => period)).toEqual([
      { from: '2025-01-01', to: '2025-04-01' },
      { from: '2025-04-01', to: '2025-05-01' },
    ]);
  });

  it('keeps an estimate that nothing corrects', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'Read type', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 'E', 900, '90.00'],
      ['2025-02-01', '2025-02-28', 'A', 900, '91.00'],
    ]);
    expect(bills).toHaveLength(2);
  });

  it('refuses two bills of the same days that nothing tells apart, and shows both to choose from', async () => {
    const same: Rows = [
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 900, '90.00'],
      ['2025-01-01', '2025-01-31', 950, '95.00'],
      ['2025-02-01', '2025-02-28', 900, '91.00'],
    ];
    await expect(readTable(same)).rejects.toThrow(/row 2 .* row 3 .* overlap/);
    const shown = await previewTable(same);
    expect(shown.problems[0]?.remedy).toContain('table of documents');
    expect(shown.documents).toHaveLength(3);
    expect(shown.report).toBeNull();
    const chosen = await readTable(same, {
      columnMap: { kind: 'bills', documents: [{ row: 2, total: 90, isTaken: false }] },
    });
    expect(chosen.bills.map(({ total }) => total)).toEqual([95, 91]);
  });
});

describe('credit notes', () => {
  const table: Rows = [
    ['Document', 'Start date', 'End date', 'kWh', 'Energy charge', 'Invoice total'],
    ['INV-7', '2025-01-01', '2025-01-31', 1000, '$100.00', '$100.00'],
    ['INV-8', '2025-02-01', '2025-02-28', 9000, '$900.00', '$900.00'],
    ['CN-1', '2025-02-01', '2025-02-28', -9000, '($900.00)', '($900.00)'],
    ['INV-9', '2025-02-01', '2025-02-28', 900, '$90.00', '$90.00'],
    ['INV-10', '2025-03-01', '2025-03-31', 1000, '$100.00', '$100.00'],
  ];

  it.each(containers)('cancel an invoice, and its rebill stands (%s)', async (_name, pack) => {
    const reading = await readTable(pack(table));
    expect(reading.bills.map(({ invoice, total }) => [invoice, total])).toEqual([
      ['INV-7', 100],
      ['INV-9', 90],
      ['INV-10', 100],
    ]);
    expect(reading.report.documents?.map(({ invoice, kind, why }) => [invoice, kind, why])).toEqual([
      ['INV-7', 'bill', 'A bill of its own'],
      ['INV-8', 'cancelled', 'Cancelled by the credit note in row 4'],
      ['CN-1', 'credit-note', 'Cancels the invoice in row 3'],
      ['INV-9', 'bill', 'A bill of its own'],
      ['INV-10', 'bill', 'A bill of its own'],
    ]);
    expect(reading.report.totalKwh).toBe(2900);
  });

  it('of a part are left out, or joined to their bill where a person says so', async () => {
    const part: Rows = [
      table[0] ?? [],
      ...table.slice(1, 3),
      ['CN-2', '2025-02-01', '2025-02-28', null, '($50.00)', '($50.00)'],
    ];
    const plain = await readTable(part);
    expect(plain.bills.map(({ total }) => total)).toEqual([100, 900]);
    expect(notesOf(plain, 'document-left-out')[0]).toContain(
      'row 4: The credit note CN-2 of -50.00 is left out. Credits a part of row 3',
    );
    const taken = await readTable(part, {
      columnMap: { kind: 'bills', documents: [{ row: 4, total: -50, isTaken: true }] },
    });
    expect(taken.bills[1]).toMatchObject({
      charges: [
        { label: 'Energy charge', amount: 900 },
        { label: 'Credit note CN-2', amount: -50 },
      ],
      total: 850,
    });
    expect(taken.report.documents?.[2]).toMatchObject({ bill: 1 });
  });

  it('are none because a remark speaks of a credit', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'Remarks', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 'credit for outage', 900, '90.00'],
      ['2025-02-01', '2025-02-28', 'estimated', 900, '91.00'],
    ]);
    expect(bills.map(({ total }) => total)).toEqual([90, 91]);
  });

  it('may be printed without a sign where the file names them', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'Document type', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 'Invoice', 900, '90.00'],
      ['2025-01-01', '2025-01-31', 'Credit note', 900, '90.00'],
      ['2025-01-01', '2025-01-31', 'Invoice', 800, '80.00'],
      ['2025-02-01', '2025-02-28', 'Invoice', 900, '91.00'],
    ]);
    expect(bills.map(({ total }) => total)).toEqual([80, 91]);
  });

  it('a bill below nought that is alone in its days is a bill', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 900, '90.00'],
      ['2025-02-01', '2025-02-28', 20, '12.50 CR'],
    ]);
    expect(bills.map(({ total }) => total)).toEqual([90, -12.5]);
  });
});

describe('parts of invoices', () => {
  it('with the total of the whole on each row become one bill', async () => {
    // Old tariff to 14 June, new from 15 June: 400.00 + 520.00 = 920.00, printed twice.
    const { bills, report } = await readTable([
      ['Invoice no', 'From', 'To', 'kWh', 'Max kW', 'Energy charge', 'Total'],
      ['A-5', '2025-05-01', '2025-06-01', 9000, 40, '900.00', '900.00'],
      ['A-6', '2025-06-01', '2025-06-15', 4000, 41, '400.00', '920.00'],
      ['A-6', '2025-06-15', '2025-07-01', 5000, 43, '520.00', '920.00'],
      ['A-7', '2025-07-01', '2025-08-01', 9000, 42, '936.00', '936.00'],
    ]);
    expect(bills.map(({ period, total }) => [period.from, period.to, total])).toEqual([
      ['2025-05-01', '2025-06-01', 900],
      ['2025-06-01', '2025-07-01', 920],
      ['2025-07-01', '2025-08-01', 936],
    ]);
    expect(bills[1]).toMatchObject({
      quantities: { kwh: 9000, maxKw: 43 },
      charges: [
        { label: 'Energy charge', amount: 400 },
        { label: 'Energy charge', amount: 520 },
      ],
    });
    expect(report.documents?.map(({ kind, bill }) => [kind, bill])).toEqual([
      ['bill', 0],
      ['part', 1],
      ['part', 1],
      ['bill', 2],
    ]);
    expect(notesOf({ report }, 'sum-differs')).toEqual([]);
  });

  it('are known without a number where only together their lines come to the total', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'kWh', 'Energy charge', 'Tax', 'Total'],
      ['2025-05-01', '2025-06-01', 9000, '900.00', '9.00', '909.00'],
      ['2025-06-01', '2025-06-15', 4000, '400.00', '4.00', '929.20'],
      ['2025-06-15', '2025-07-01', 5000, '520.00', '5.20', '929.20'],
      ['2025-07-01', '2025-08-01', 9000, '936.00', '9.36', '945.36'],
    ]);
    expect(bills).toHaveLength(3);
    expect(bills[1]).toMatchObject({ period: { from: '2025-06-01', to: '2025-07-01' }, total: 929.2 });
  });

  it('with totals of their own stay two bills, and are named', async () => {
    const reading = await readTable([
      ['From', 'To', 'kWh', 'Energy charge', 'Total'],
      ['2025-05-01', '2025-06-01', 9000, '900.00', '900.00'],
      ['2025-06-01', '2025-06-15', 4000, '400.00', '400.00'],
      ['2025-06-15', '2025-07-01', 5000, '520.00', '520.00'],
    ]);
    expect(months(reading)).toEqual(['2025-05', '2025-06', '2025-06']);
    expect(notesOf(reading, 'bill-split')[0]).toMatch(/^row 3 and row 4: Two short periods/);
  });

  it('the same flat amount month after month is no repeat', async () => {
    const { bills } = await readTable([
      ['From', 'To', 'Standing charge', 'Total'],
      ['2025-05-01', '2025-06-01', '150.00', '150.00'],
      ['2025-06-01', '2025-07-01', '150.00', '150.00'],
    ]);
    expect(bills).toHaveLength(2);
  });
});

describe('repeats, noughts and rows that are no bills', () => {
  it('leaves the second of two equal rows out', async () => {
    const reading = await readTable([
      ['Invoice', 'From', 'To', 'kWh', 'Total charges'],
      ['1', '2025-01-01', '2025-01-31', 900, '90.00'],
      ['1', '2025-01-01', '2025-01-31', 900, '90.00'],
      ['2', '2025-02-01', '2025-02-28', 900, '91.00'],
    ]);
    expect(reading.bills).toHaveLength(2);
    expect(reading.report.documents?.[1]).toMatchObject({
      kind: 'repeat',
      bill: null,
      why: 'The same to the cent as row 2',
    });
  });

  it('keeps a month of noughts, and leaves noughts out beside a bill of the same days', async () => {
    const alone = await readTable([
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 0, '0.00'],
      ['2025-02-01', '2025-02-28', 900, '91.00'],
    ]);
    expect(alone.bills).toHaveLength(2);
    expect(notesOf(alone, 'nought-bill')[0]).toContain('row 2');
    const beside = await readTable([
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 0, '0.00'],
      ['2025-01-01', '2025-01-31', 800, '81.00'],
      ['2025-02-01', '2025-02-28', 900, '91.00'],
    ]);
    expect(beside.bills.map(({ total }) => total)).toEqual([81, 91]);
    expect(beside.report.documents?.[0]?.kind).toBe('nought');
  });

  it('takes no row of sums for a bill, though it carries the dates of the year', async () => {
    const { bills } = await readTable([
      ['Account', 'From', 'To', 'kWh', 'Total charges'],
      ['8', '2025-01-01', '2025-01-31', 900, '90.00'],
      ['8', '2025-02-01', '2025-02-28', 900, '91.00'],
      ['Total', '2025-01-01', '2025-02-28', 1800, '181.00'],
    ]);
    expect(bills).toHaveLength(2);
  });
});
