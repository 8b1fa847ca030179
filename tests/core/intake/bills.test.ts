import { describe, expect, it } from 'vitest';
import { IntakeError, previewBills, readBills, type ColumnMap } from '@/core/intake';
import { bytesOf, workbook } from './files';

const chicago = 'America/Chicago';
const read = (text: string | Uint8Array, timeZone = chicago, columnMap?: ColumnMap) =>
  readBills(typeof text === 'string' ? bytesOf(text) : text, {
    fileName: 'bills.csv',
    timeZone,
    ...(columnMap ? { columnMap } : {}),
  });
const preview = (text: string | Uint8Array, timeZone = chicago) =>
  previewBills(typeof text === 'string' ? bytesOf(text) : text, { fileName: 'bills.csv', timeZone });
const codes = (notes: { code: string }[]) => notes.map((note) => note.code);

const header =
  'Account,Rate class,Service start date,Service end date,Days,Consumption (KWH),On-peak kWh,Max kW,Billed kW,kVARh,Leading kVARh,Power factor,Energy charge,Demand charge,PF penalty,Tax,Total charges';
const table = `${header}
88-104,LP-4,6/10/2025,7/9/2025,29,"1,234,500","410,000","2,610","2,700","1,051,000","12,000",76%,"$61,725.00","$32,400.00","$4,860.00","$1,979.70","$100,964.70"
88-104,LP-4,7/9/2025,8/8/2025,30,"1,180,000","395,500","2,580","2,700","1,002,400",0,77%,"$59,000.00","$32,400.00",($12.30),"$1,827.75","$93,215.45"
88-104,LP-4,8/8/2025,9/9/2025,32,"1,301,000","433,000","2,655","2,700","1,099,000",0,76%,"$65,050.00","$32,400.00","$4,860.00","$2,046.20","$104,356.20"
Total,,,,,"3,715,500",,,,,,,"$185,775.00","$97,200.00","$9,707.70","$5,853.65","$298,536.35"
`;

describe('readBills of a row a bill', () => {
  it('reads periods, quantities, line charges and totals as printed', async () => {
    const { bills, report } = await read(table);
    expect(bills).toHaveLength(3);
    expect(bills[0]).toEqual({
      period: { from: '2025-06-10', to: '2025-07-09' },
      quantities: {
        kwh: 1_234_500,
        kwhPeak: 410_000,
        maxKw: 2610,
        billedKw: 2700,
        kvarh: 1_051_000,
        kvarhLeading: 12_000,
        powerFactor: 0.76,
      },
      charges: [
        { label: 'Energy charge', amount: 61_725 },
        { label: 'Demand charge', amount: 32_400 },
        { label: 'PF penalty', amount: 4860 },
        { label: 'Tax', amount: 1979.7 },
      ],
      total: 100_964.7,
    });
    expect(bills[1]?.charges[2]).toEqual({ label: 'PF penalty', amount: -12.3 });
    expect(report).toMatchObject({
      rowsRead: 3,
      intervals: 0,
      missing: 0,
      duplicates: 0,
      estimated: 0,
      firstMs: 0,
      lastMs: 0,
    });
    expect(report).toMatchObject({ maxKw: 2655, totalKwh: 3_715_500, billRows: [2, 3, 4] });
    expect(report.notes.find((note) => note.code === 'rows-left-out')?.where).toBe('row 5');
    expect(codes(report.notes)).not.toContain('sum-differs');
  });

  it('tells month from day by the periods where no day is above 12', async () => {
    const text = 'From,To,kWh,Total\n1/5/2025,2/4/2025,10,1.00\n2/4/2025,3/6/2025,10,1.00\n3/6/2025,4/4/2025,10,1.00\n';
    const { bills } = await read(text, 'Europe/Madrid');
    expect(bills.map((bill) => bill.period.from)).toEqual(['2025-01-05', '2025-02-04', '2025-03-06']);
  });

  it('includes the last day where the next period begins the day after', async () => {
    const text =
      'Start,End,kWh,Total\n2025-01-01,2025-01-31,10,1\n2025-02-01,2025-02-28,11,2\n2025-03-01,2025-03-31,12,3\n';
    const { bills, report } = await read(text);
    expect(bills.map((bill) => bill.period)).toEqual([
      { from: '2025-01-01', to: '2025-02-01' },
      { from: '2025-02-01', to: '2025-03-01' },
      { from: '2025-03-01', to: '2025-04-01' },
    ]);
    expect(report.columnMap?.periodEnds).toBe('inclusive');
    expect(codes(report.notes)).toContain('period-ends');
  });

  it('decides a single bill by its printed days, and lets a person overrule', async () => {
    const text = 'Start,End,Days,kWh,Total\n2025-01-10,2025-02-08,30,10,1\n';
    expect((await read(text)).bills[0]?.period.to).toBe('2025-02-09');
    const overruled = await read(text, chicago, { kind: 'bills', periodEnds: 'exclusive' });
    expect(overruled.bills[0]?.period.to).toBe('2025-02-08');
  });

  it('runs periods from reading to reading where each bill has one date', async () => {
    const text = 'Read date,kWh,Total\n2025-01-10,9,1\n2025-02-08,10,1\n2025-03-11,11,1\n';
    const { bills, report } = await read(text);
    expect(bills.map((bill) => bill.period)).toEqual([
      { from: '2025-01-10', to: '2025-02-08' },
      { from: '2025-02-08', to: '2025-03-11' },
    ]);
    expect(codes(report.notes)).toContain('period-open');
  });

  it.each([
    ['2025-01', '2025-02', '2025-12'],
    ['Jan 2025', 'Feb 2025', 'Dec 2025'],
    ['January-25', 'February-25', 'December-25'],
    ['01/2025', '02/2025', '12/2025'],
    ['Janvier 2025', 'Février 2025', 'Décembre 2025'],
  ])('reads months written as %s', async (first, second, third) => {
    const text = `Month;kWh;Total\n${first};1.000,5;10,50\n${second};2000;20,00\n${third};3000;30,00\n`;
    const { bills, report } = await read(text, 'Europe/Paris');
    expect(bills.map((bill) => bill.period)).toEqual([
      { from: '2025-01-01', to: '2025-02-01' },
      { from: '2025-02-01', to: '2025-03-01' },
      { from: '2025-12-01', to: '2026-01-01' },
    ]);
    expect(bills[0]).toMatchObject({ quantities: { kwh: 1000.5 }, total: 10.5 });
    expect(codes(report.notes)).toContain('period-gap');
  });

  it('reads decimal commas, thousands points and a trailing currency', async () => {
    const text =
      'Von;Bis;Verbrauch kWh;cos phi;Energiekosten;Gesamt\n01.01.2025;31.01.2025;1.234.567,5;0,87;"1.234,56 €";"1.234,56 €"\n01.02.2025;28.02.2025;1.100.000;0,91;"-12,30 €";"-12,30 €"\n';
    const { bills, report } = await read(text, 'Europe/Berlin');
    expect(bills[0]).toMatchObject({
      quantities: { kwh: 1_234_567.5, powerFactor: 0.87 },
      charges: [{ label: 'Energiekosten', amount: 1234.56 }],
      total: 1234.56,
    });
    expect(bills[1]?.total).toBe(-12.3);
    expect(report.currency).toBe('EUR');
  });

  it('brings every unit to kWh, kW, kVA, kvarh and a fraction', async () => {
    const text =
      'From,To,Energy (MWh),Peak demand (MW),kVA max,Contract kVA,Mvarh lagging,PF (%),Amount\n2025-01-01,2025-02-01,12.5,2.5,2900,3000,6,85,100.00\n2025-02-01,2025-03-01,11,2.4,2800,3000,5,0.9,100.00\n';
    const { bills } = await read(text);
    expect(bills[0]?.quantities).toEqual({
      kwh: 12_500,
      maxKw: 2500,
      maxKva: 2900,
      contractKva: 3000,
      kvarh: 6000,
      powerFactor: 0.85,
    });
    expect(bills[1]?.quantities.powerFactor).toBe(0.9);
  });

  it('leaves blank cells out and keeps noughts', async () => {
    const text =
      'From,To,kWh,kVARh,Energy charge,Reactive charge,Total\n2025-01-01,2025-02-01,100,,10.00,,10.00\n2025-02-01,2025-03-01,100,0,10.00,0.00,\n';
    const { bills } = await read(text);
    expect(bills[0]).toEqual({
      period: { from: '2025-01-01', to: '2025-02-01' },
      quantities: { kwh: 100 },
      charges: [{ label: 'Energy charge', amount: 10 }],
      total: 10,
    });
    expect(bills[1]).toMatchObject({ quantities: { kwh: 100, kvarh: 0 }, total: null });
    expect(bills[1]?.charges).toHaveLength(2);
  });

  it('leaves out rates, balances, payments and subtotals', async () => {
    const text =
      'From,To,kWh,Rate per kWh,Energy charge,Subtotal,Tax,Previous balance,Payment,Total\n2025-01-01,2025-02-01,100,0.1,10.00,10.00,1.00,55.00,-55.00,11.00\n2025-02-01,2025-03-01,100,0.1,10.00,10.00,1.00,11.00,-11.00,11.00\n';
    const { bills, report } = await read(text);
    expect(bills[0]?.charges.map((charge) => charge.label)).toEqual(['Energy charge', 'Tax']);
    expect(codes(report.notes)).not.toContain('sum-differs');
  });

  it('notes lines that do not add up to the total, with the difference', async () => {
    const { report } = await read(table.replace('"$1,979.70"', '"$1,979.07"'));
    const note = report.notes.find((one) => one.code === 'sum-differs');
    // 61,725.00 + 32,400.00 + 4,860.00 + 1,979.07 = 100,964.07
    expect(note).toMatchObject({ where: 'row 2' });
    expect(note?.message).toContain('100964.07');
    expect(note?.message).toContain('0.63 apart');
  });

  it('takes names of two rows where group names stand above', async () => {
    const text =
      'Invented Power Ltd,,,,,\n,,kWh,,Charges,\nFrom,To,On-peak,Off-peak,Energy charge,Total\n2025-01-01,2025-02-01,40,60,10.00,10.00\n2025-02-01,2025-03-01,50,70,12.00,12.00\n';
    const { bills } = await read(text);
    expect(bills[0]?.quantities).toEqual({ kwhPeak: 40, kwhOffPeak: 60 });
  });
});

describe('readBills of a column a month', () => {
  it('turns the table', async () => {
    const text =
      'Item,Jan 2025,Feb 2025,Mar 2025\nkWh,100,110,120\nMax kW,12,13,14\nEnergy charge,$10.00,$11.00,$12.00\nPF penalty,$1.00,$1.10,$1.20\nTotal,$11.00,$12.10,$13.20\n';
    const { bills, report } = await read(text);
    expect(bills).toHaveLength(3);
    expect(bills[1]).toEqual({
      period: { from: '2025-02-01', to: '2025-03-01' },
      quantities: { kwh: 110, maxKw: 13 },
      charges: [
        { label: 'Energy charge', amount: 11 },
        { label: 'PF penalty', amount: 1.1 },
      ],
      total: 12.1,
    });
    expect(report.columnMap?.layout).toBe('transposed');
  });
});

describe('readBills of workbooks', () => {
  it.each(['xlsx', 'biff8', 'ods'] as const)('reads date serials of %s', async (bookType) => {
    // 45,658 is 2025-01-01 in the 1900 system; 45,689 and 45,717 begin February and March.
    const rows = [
      ['From', 'To', 'kWh', 'Energy charge', 'Total'],
      [45_658, 45_689, 1000, 99.5, 99.5],
      [45_689, 45_717, 900, 89.5, 89.5],
    ];
    const { bills, report } = await read(workbook(rows, { bookType, formats: { 0: 'mm/dd/yyyy', 1: 'mm/dd/yyyy' } }));
    expect(report.format).toBe('spreadsheet');
    expect(bills.map((bill) => bill.period)).toEqual([
      { from: '2025-01-01', to: '2025-02-01' },
      { from: '2025-02-01', to: '2025-03-01' },
    ]);
    expect(bills[0]).toMatchObject({
      quantities: { kwh: 1000 },
      charges: [{ label: 'Energy charge', amount: 99.5 }],
      total: 99.5,
    });
  });

  it('reads a month column of serials shown as month and year', async () => {
    const rows = [
      ['Month', 'kWh', 'Total'],
      [45_658, 1000, 99.5],
      [45_689, 900, 89.5],
    ];
    const { bills } = await read(workbook(rows, { formats: { 0: 'mmm-yy' } }));
    expect(bills.map((bill) => bill.period)).toEqual([
      { from: '2025-01-01', to: '2025-02-01' },
      { from: '2025-02-01', to: '2025-03-01' },
    ]);
  });
});

describe('bills that are refused', () => {
  it('names both rows of periods that overlap', async () => {
    const text =
      'From,To,kWh,Total\n2025-01-01,2025-02-01,100,10\n2025-01-15,2025-02-15,90,9\n2025-02-15,2025-03-15,90,9\n';
    const refused = read(text);
    await expect(refused).rejects.toBeInstanceOf(IntakeError);
    await expect(refused).rejects.toThrow(/row 2 .* row 3 .* overlap/);
  });

  it.each([
    [
      'a period that runs backwards',
      'From,To,kWh,Total\n2025-02-01,2025-01-01,100,10\n2025-03-01,2025-04-01,100,10\n',
      /has no day/,
    ],
    [
      'a date that is none',
      'From,To,kWh,Total\n2025-01-01,2025-02-01,1,1\n2025-02-01,2025-03-01,1,1\n2025-03-01,2025-04-01,1,1\n2025-04-01,2025-05-01,1,1\n2025-05-01,2025-06-31,1,1\n',
      /2025-06-31.*row 6/s,
    ],
    [
      'a word in a quantity',
      'From,To,kWh,Total\n2025-01-01,2025-02-01,100,10\n2025-02-01,2025-03-01,pending,10\n2025-03-01,2025-04-01,100,10\n2025-04-01,2025-05-01,100,10\n',
      /“pending” under “kWh”.*row 3/s,
    ],
  ])('names the row of %s', async (_name, text, message) => {
    await expect(read(text)).rejects.toThrow(message);
  });
});

describe('previewBills', () => {
  it('shows evidence for every column and the bills as they would be kept', async () => {
    const shown = await preview(table);
    expect(shown.problems).toEqual([]);
    expect(shown.bills).toHaveLength(3);
    expect(shown.columns.map((column) => [column.name, column.takenAs, column.quantity ?? ''])).toEqual([
      ['Account', 'ignore', ''],
      ['Rate class', 'ignore', ''],
      ['Service start date', 'period-from', ''],
      ['Service end date', 'period-to', ''],
      ['Days', 'days', ''],
      ['Consumption (KWH)', 'quantity', 'kwh'],
      ['On-peak kWh', 'quantity', 'kwhPeak'],
      ['Max kW', 'quantity', 'maxKw'],
      ['Billed kW', 'quantity', 'billedKw'],
      ['kVARh', 'quantity', 'kvarh'],
      ['Leading kVARh', 'quantity', 'kvarhLeading'],
      ['Power factor', 'quantity', 'powerFactor'],
      ['Energy charge', 'charge', ''],
      ['Demand charge', 'charge', ''],
      ['PF penalty', 'charge', ''],
      ['Tax', 'charge', ''],
      ['Total charges', 'total', ''],
    ]);
    expect(shown.guesses.find((guess) => guess.key === 'period-ends')).toMatchObject({
      takenAs: 'last day not included',
      sure: true,
    });
  });

  it('follows a corrected map', async () => {
    const shown = await preview(table);
    const columns = (shown.columnMap.columns ?? []).map((use) =>
      use.name === 'PF penalty' ? { ...use, role: 'ignore' as const } : use,
    );
    const { bills } = await read(table, chicago, { ...shown.columnMap, columns });
    expect(bills[0]?.charges.map((charge) => charge.label)).toEqual(['Energy charge', 'Demand charge', 'Tax']);
  });
});
