import { describe, expect, it } from 'vitest';
import { containers, notesOf, previewTable, readTable, type Rows } from './bill-tables';

// Tables of the invented Brackwater Electric and its neighbours; expected values are the rows read by eye.

/** A row a line: two invoices of three and four lines, a total and a tax inside. */
const lines: Rows = [
  ['Brackwater Electric', null, null, null, null, null, null, null],
  ['Invoice', 'From', 'To', 'Description', 'Quantity', 'Unit', 'Rate', 'Amount'],
  ['BW-101', '2025-01-01', '2025-02-01', 'Customer charge', 1, 'month', 150, 150],
  ['BW-101', '2025-01-01', '2025-02-01', 'Energy charge', 120_000, 'kWh', 0.05, 6000],
  ['BW-101', '2025-01-01', '2025-02-01', 'Demand charge', 410, 'kW', 12.5, 5125],
  ['BW-101', '2025-01-01', '2025-02-01', 'Sales tax', null, null, null, 112.75],
  ['BW-101', '2025-01-01', '2025-02-01', 'Total', null, null, null, 11_387.75],
  ['BW-102', '2025-02-01', '2025-03-01', 'Customer charge', 1, 'month', 150, 150],
  ['BW-102', '2025-02-01', '2025-03-01', 'Energy charge', 110_000, 'kWh', 0.05, 5500],
  ['BW-102', '2025-02-01', '2025-03-01', 'Demand charge', 402, 'kW', 12.5, 5025],
  ['BW-102', '2025-02-01', '2025-03-01', 'Power factor', 0.83, null, null, null],
  ['BW-102', '2025-02-01', '2025-03-01', 'Sales tax', null, null, null, 106.75],
  ['BW-102', '2025-02-01', '2025-03-01', 'Total', null, null, null, 10_781.75],
];

describe('a row a line of the bill', () => {
  it.each(containers)('becomes one bill an invoice (%s)', async (_name, pack) => {
    const { bills, report } = await readTable(pack(lines));
    expect(report.columnMap?.layout).toBe('items');
    expect(bills).toEqual([
      {
        period: { from: '2025-01-01', to: '2025-02-01' },
        invoice: 'BW-101',
        quantities: { kwh: 120_000, billedKw: 410 },
        charges: [
          { label: 'Customer charge', amount: 150, quantity: 1, unit: 'month', rate: 150 },
          { label: 'Energy charge', amount: 6000, quantity: 120_000, unit: 'kWh', rate: 0.05 },
          { label: 'Demand charge', amount: 5125, quantity: 410, unit: 'kW', rate: 12.5 },
          { label: 'Sales tax', amount: 112.75 },
        ],
        total: 11_387.75,
      },
      {
        period: { from: '2025-02-01', to: '2025-03-01' },
        invoice: 'BW-102',
        quantities: { kwh: 110_000, billedKw: 402, powerFactor: 0.83 },
        charges: [
          { label: 'Customer charge', amount: 150, quantity: 1, unit: 'month', rate: 150 },
          { label: 'Energy charge', amount: 5500, quantity: 110_000, unit: 'kWh', rate: 0.05 },
          { label: 'Demand charge', amount: 5025, quantity: 402, unit: 'kW', rate: 12.5 },
          { label: 'Sales tax', amount: 106.75 },
        ],
        total: 10_781.75,
      },
    ]);
    expect(notesOf({ report }, 'sum-differs')).toEqual([]);
    expect(report.rowsRead).toBe(11);
    expect(report.documents?.map(({ where, invoice, bill }) => [where, invoice, bill])).toEqual([
      ['rows 3 to 7', 'BW-101', 0],
      ['rows 8 to 13', 'BW-102', 1],
    ]);
  });

  it('keeps invoice and period of the first row for the rows beneath, and tells a grand total from a bill’s', async () => {
    const sparse = lines.map((row, at) =>
      at > 1 && row[3] !== 'Customer charge' ? [null, null, null, ...row.slice(3)] : row,
    );
    const { bills, report } = await readTable([
      ...sparse,
      [null, null, null, 'Grand total', null, null, null, 22_169.5],
    ]);
    expect(bills.map(({ invoice, total, charges }) => [invoice, total, charges.length])).toEqual([
      ['BW-101', 11_387.75, 4],
      ['BW-102', 10_781.75, 4],
    ]);
    expect(report.totalKwh).toBe(230_000);
  });

  it('takes units within cells, quantities by time of use and months as periods', async () => {
    const { bills } = await readTable([
      ['Month', 'Line', 'Usage', 'Charge'],
      ['Jan 2025', 'Energy on peak', '40,000 kWh', '$3,200.00'],
      ['Jan 2025', 'Energy off peak', '80,000 kWh', '$4,000.00'],
      ['Jan 2025', 'Fuel adjustment', '120,000 kWh', '($240.00)'],
      ['Jan 2025', 'Billing demand', '1.2 MW', '$12,000.00'],
      ['Feb 2025', 'Energy on peak', '41,000 kWh', '$3,280.00'],
      ['Feb 2025', 'Energy off peak', '82,000 kWh', '$4,100.00'],
      ['Feb 2025', 'Fuel adjustment', '123,000 kWh', '($246.00)'],
      ['Feb 2025', 'Billing demand', '1.3 MW', '$13,000.00'],
    ]);
    expect(bills[0]).toMatchObject({
      period: { from: '2025-01-01', to: '2025-02-01' },
      quantities: { kwhPeak: 40_000, kwhOffPeak: 80_000, kwh: 120_000, billedKw: 1200 },
      total: null,
    });
    expect(bills[1]?.charges[2]).toEqual({ label: 'Fuel adjustment', amount: -246, quantity: 123_000, unit: 'kWh' });
  });

  it('leaves balances, payments and late fees out, each with its row', async () => {
    const { bills, report } = await readTable([
      ['From', 'To', 'Item', 'Amount'],
      ['2025-01-01', '2025-02-01', 'Previous balance', '900.00'],
      ['2025-01-01', '2025-02-01', 'Payment received', '-900.00'],
      ['2025-01-01', '2025-02-01', 'Energy charge', '700.00'],
      ['2025-01-01', '2025-02-01', 'Demand charge', '200.00'],
      ['2025-01-01', '2025-02-01', 'Late fee', '13.50'],
      ['2025-01-01', '2025-02-01', 'Total current charges', '900.00'],
      ['2025-02-01', '2025-03-01', 'Energy charge', '650.00'],
      ['2025-02-01', '2025-03-01', 'Demand charge', '210.00'],
      ['2025-02-01', '2025-03-01', 'Total current charges', '860.00'],
    ]);
    expect(bills[0]?.charges.map(({ label }) => label)).toEqual(['Energy charge', 'Demand charge']);
    expect(bills[0]?.total).toBe(900);
    expect(notesOf({ report }, 'line-left-out').map((note) => note.slice(0, 26))).toEqual([
      'row 2: “Previous balance”,',
      'row 3: “Payment received”,',
      'row 6: “Late fee”, 13.50, ',
    ]);
  });

  it('can be read as a row a bill and back where a person says so', async () => {
    const shown = await previewTable(lines);
    expect(shown.guesses.find((guess) => guess.key === 'layout')).toMatchObject({ takenAs: 'items', sure: true });
    const again = await readTable(lines, { columnMap: shown.columnMap });
    expect(again.bills).toHaveLength(2);
  });
});

describe('names in several rows', () => {
  const grouped: Rows = [
    ['Billing period', null, 'Usage', null, null, 'Charges', null, null],
    ['From', 'To', 'Energy', 'Demand', 'Reactive', 'Energy', 'Demand', 'Total'],
    [null, null, 'kWh', 'kW', 'kvarh', 'EUR', 'EUR', 'EUR'],
    ['2025-01-01', '2025-01-31', 90_000, 300, 60_000, 9000, 3600, 12_600],
    ['2025-02-01', '2025-02-28', 80_000, 310, 55_000, 8000, 3720, 11_720],
  ];

  it.each(containers)('joins groups, names and units (%s)', async (_name, pack) => {
    const { bills, report } = await readTable(pack(grouped), { timeZone: 'Europe/Lisbon' });
    expect(bills[0]).toEqual({
      period: { from: '2025-01-01', to: '2025-02-01' },
      quantities: { kwh: 90_000, maxKw: 300, kvarh: 60_000 },
      charges: [
        { label: 'Charges Energy', amount: 9000 },
        { label: 'Charges Demand', amount: 3600 },
      ],
      total: 12_600,
    });
    expect(report.currency).toBe('EUR');
    expect(report.columnMap?.headerRow).toBe(3);
  });

  it('reads a name that stands in the upper row alone', async () => {
    const { bills } = await readTable([
      ['Start', 'End', 'Consumption', null, 'Charges', null, 'Total due'],
      [null, null, 'kWh', 'Peak kW', 'Energy cost', 'Demand cost', null],
      ['2025-01-01', '2025-01-31', 1000, 12, '100.00', '60.00', '160.00'],
      ['2025-02-01', '2025-02-28', 900, 11, '90.00', '55.00', '145.00'],
    ]);
    expect(bills[1]).toEqual({
      period: { from: '2025-02-01', to: '2025-03-01' },
      quantities: { kwh: 900, maxKw: 11 },
      charges: [
        { label: 'Energy cost', amount: 90 },
        { label: 'Demand cost', amount: 55 },
      ],
      total: 145,
    });
  });

  it('does not take a preamble for a row of groups', async () => {
    const { bills } = await readTable([
      ['Customer:', 'Harrow Mill', null, null],
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 1000, '100.00'],
      ['2025-02-01', '2025-02-28', 900, '90.00'],
    ]);
    expect(bills[0]).toMatchObject({ quantities: { kwh: 1000 }, total: 100 });
  });
});

describe('a column a bill', () => {
  it.each(containers)('reads months as columns, with units in a column of their own (%s)', async (_name, pack) => {
    const { bills, report } = await readTable(
      pack([
        ['Item', 'Unit', 'January 2025', 'February 2025', 'March 2025', 'Total'],
        ['Consumption', 'kWh', 1000, 1100, 1200, 3300],
        ['Demand', 'kW', 20, 21, 22, null],
        ['Power factor', '%', 88, 91, 86, null],
        ['Energy charge', 'USD', 100, 110, 120, 330],
        ['Demand charge', 'USD', 60, 63, 66, 189],
        ['Amount billed', 'USD', 160, 173, 186, 519],
      ]),
    );
    expect(bills).toHaveLength(3);
    expect(bills[2]).toEqual({
      period: { from: '2025-03-01', to: '2025-04-01' },
      quantities: { kwh: 1200, maxKw: 22, powerFactor: 0.86 },
      charges: [
        { label: 'Energy charge', amount: 120 },
        { label: 'Demand charge', amount: 66 },
      ],
      total: 186,
    });
    expect(report.documents?.map(({ where }) => where)).toEqual(['column C', 'column D', 'column E']);
    expect(report.currency).toBe('USD');
  });

  it('reads first and last day as two rows', async () => {
    const { bills } = await readTable([
      ['Period start', '12/03/2024', '01/02/2025', '02/01/2025'],
      ['Period end', '01/02/2025', '02/01/2025', '03/04/2025'],
      ['kWh', '1,000', '1,100', '1,200'],
      ['Energy charge', '$100.00', '$110.00', '$120.00'],
      ['Total', '$100.00', '$110.00', '$120.00'],
    ]);
    expect(bills.map(({ period }) => period)).toEqual([
      { from: '2024-12-03', to: '2025-01-02' },
      { from: '2025-01-02', to: '2025-02-01' },
      { from: '2025-02-01', to: '2025-03-04' },
    ]);
  });
});

describe('several accounts or meters in one table', () => {
  const table: Rows = [
    ['Account', 'Meter no', 'Start date', 'End date', 'kWh', 'Total charges'],
    ['77-1', 'M-A', '2025-01-01', '2025-01-31', 100, '10.00'],
    ['77-1', 'M-B', '2025-01-01', '2025-01-31', 200, '20.00'],
    ['77-1', 'M-A', '2025-02-01', '2025-02-28', 110, '11.00'],
    ['77-1', 'M-B', '2025-02-01', '2025-02-28', 210, '21.00'],
  ];

  it('are listed where none is picked', async () => {
    await expect(readTable(table)).rejects.toThrow(/bills of 2 accounts or meters: M-A, M-B/);
    const shown = await previewTable(table);
    expect(shown.meters).toEqual(['M-A', 'M-B']);
    expect(shown.guesses.find((guess) => guess.key === 'meter')).toMatchObject({ sure: false });
  });

  it('are read one at a time', async () => {
    const { bills } = await readTable(table, { columnMap: { kind: 'bills', meter: 'M-B' } });
    expect(bills.map(({ quantities, total }) => [quantities.kwh, total])).toEqual([
      [200, 20],
      [210, 21],
    ]);
    await expect(readTable(table, { columnMap: { kind: 'bills', meter: 'M-C' } })).rejects.toThrow(
      /“M-C”, of which the file holds no bill/,
    );
  });

  it('are one series where a meter is exchanged between two bills', async () => {
    const { bills, report } = await readTable([
      ['Meter no', 'Start date', 'End date', 'kWh', 'Total charges'],
      ['M-A', '2025-01-01', '2025-01-31', 100, '10.00'],
      ['M-A', '2025-02-01', '2025-02-28', 100, '10.00'],
      ['M-N', '2025-03-01', '2025-03-31', 110, '11.00'],
    ]);
    expect(bills).toHaveLength(3);
    expect(notesOf({ report }, 'meter-changes')[0]).toContain('M-A to M-N');
  });
});

describe('sheets', () => {
  it('names the sheets that are not read', async () => {
    const XLSX = await import('xlsx');
    const book = XLSX.utils.book_new();
    for (const [month, kwh] of [
      ['2025-01', 100],
      ['2025-02', 110],
    ] as const) {
      const rows = [
        ['Month', 'kWh', 'Total charges'],
        [month, kwh, 10],
      ];
      XLSX.utils.book_append_sheet(book, XLSX.utils.aoa_to_sheet(rows), month);
    }
    const bytes = new Uint8Array(XLSX.write(book, { type: 'array', bookType: 'xlsx' }) as ArrayBuffer);
    const { report } = await readTable(bytes, { fileName: 'bills.xlsx' });
    expect(notesOf({ report }, 'sheets-left-out')[0]).toContain('2025-02');
  });
});
