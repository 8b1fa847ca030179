import { describe, expect, it } from 'vitest';
import { choicesWith } from '../../src/components/intake/BillDocuments';
import { decisionOf } from '../../src/components/intake/decisions';
import {
  rateOptions,
  roleOptions,
  roleValue,
  unitOptions,
  withCharge,
  withRole,
} from '../../src/components/intake/roles';
import { columnMapInput } from '../../src/schemas/intake';
import { previewTable, readTable, type Rows } from '../core/intake/bill-tables';

// Tables of an invented utility in the layouts that bring roles of their own.
const tables: [string, Rows][] = [
  [
    'rates, invoices and read types',
    [
      ['Invoice', 'Meter no', 'From', 'To', 'Days', 'Read type', 'Demand kW', 'Demand rate', 'Demand charge', 'Total'],
      ['1', 'M-1', '2025-01-01', '2025-01-31', 31, 'Estimated', 410, '12.50', '5,125.00', '5,125.00'],
      ['2', 'M-1', '2025-01-01', '2025-01-31', 31, 'Actual', 400, '12.50', '5,000.00', '5,000.00'],
      ['3', 'M-1', '2025-02-01', '2025-02-28', 28, 'Actual', 402, '12.50', '5,025.00', '5,025.00'],
    ],
  ],
  [
    'lines',
    [
      ['Period', 'Description', 'Quantity', 'Unit', 'Rate', 'Amount'],
      ['2025-01-01 to 2025-02-01', 'Energy charge', 1000, 'kWh', 0.1, 100],
      ['2025-01-01 to 2025-02-01', 'Demand charge', 20, 'kW', 5, 100],
      ['2025-02-01 to 2025-03-01', 'Energy charge', 1000, 'kWh', 0.1, 100],
      ['2025-02-01 to 2025-03-01', 'Demand charge', 20, 'kW', 5, 100],
    ],
  ],
  [
    'years beside months, two meters',
    [
      ['Year', 'Month', 'Meter no', 'kWh', 'Total charges'],
      [2025, 'Jan', 'A', 10, '1.00'],
      [2025, 'Jan', 'B', 11, '1.10'],
      [2025, 'Feb', 'A', 12, '1.20'],
      [2025, 'Feb', 'B', 13, '1.30'],
    ],
  ],
];

describe.each(tables)('the map of a table with %s', (_name, rows) => {
  it('passes the check of the endpoint as it is', async () => {
    const { columnMap } = await previewTable(rows);
    expect(columnMapInput.parse(columnMap)).toEqual(columnMap);
  });

  it('finds each of its roles and decisions among those offered', async () => {
    const preview = await previewTable(rows);
    for (const column of preview.columns) {
      const values = roleOptions('bills', column, preview.columnMap.layout).map(({ value }) => value);
      expect(values, column.name).toContain(roleValue(column));
    }
    for (const guess of preview.guesses) {
      const { value, options } = decisionOf(guess, preview);
      expect(
        options.map((option) => option.value),
        guess.key,
      ).toContain(value);
    }
  });
});

describe('what a person chooses in the steps Match and Check', () => {
  const rows = tables[0]?.[1] ?? [];

  it('takes an estimate in place of its correction, and back', async () => {
    const preview = await previewTable(rows);
    const [estimate, correction] = preview.documents;
    expect([estimate?.bill, correction?.bill]).toEqual([null, 0]);
    if (!estimate || !correction) throw new Error('no documents');
    const documents = choicesWith(preview, estimate, true);
    expect(documents).toEqual([
      { row: 2, total: 5125, isTaken: true },
      { row: 3, total: 5000, isTaken: false },
    ]);
    const columnMap = columnMapInput.parse({ ...preview.columnMap, documents });
    expect((await readTable(rows, { columnMap })).bills[0]?.invoice).toBe('1');
    const again = await previewTable(rows, { columnMap });
    const back = choicesWith(again, again.documents[1] ?? correction, true);
    expect((await readTable(rows, { columnMap: { ...columnMap, documents: back } })).bills[0]?.invoice).toBe('2');
  });

  it('gives a rate to another line, and drops the pairing with its role', async () => {
    const preview = await previewTable(rows);
    const columns = preview.columnMap.columns ?? [];
    const rate = columns.find(({ role }) => role === 'rate');
    if (!rate) throw new Error('no rate');
    expect(rateOptions(columns).map(({ value }) => value)).toEqual(['Demand charge']);
    expect(withCharge(rate, 'Demand charge')).toEqual({
      index: 7,
      name: 'Demand rate',
      role: 'rate',
      charge: 'Demand charge',
    });
    expect(withRole(rate, 'charge')).toEqual({ index: 7, name: 'Demand rate', role: 'charge' });
  });

  it('changes the unit of a printed quantity', async () => {
    const table: Rows = [
      ['Month', 'Energy', 'Demand charge', 'Total'],
      ['2025-01', 12.5, '5.00', '5.00'],
      ['2025-02', 12.5, '5.00', '5.00'],
    ];
    const preview = await previewTable(table);
    const energy = preview.columns.find(({ name }) => name === 'Energy');
    expect(energy && unitOptions(energy).map(({ label }) => label)).toEqual(['kWh', 'MWh', 'GWh', 'Wh']);
    const columns = (preview.columnMap.columns ?? []).map((use) =>
      use.name === 'Energy' ? { ...use, unit: 'MWh' } : use,
    );
    const { bills } = await readTable(table, { columnMap: { ...preview.columnMap, columns } });
    expect(bills[0]?.quantities.kwh).toBe(12_500);
  });
});
