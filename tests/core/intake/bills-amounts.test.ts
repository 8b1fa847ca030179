import { describe, expect, it } from 'vitest';
import { containers, notesOf, previewTable, readTable, type Rows } from './bill-tables';

describe('quantities', () => {
  it.each([
    ['percent with a sign', '85 %', '91%', 0.85, 0.91],
    ['percent without one', '85', '91', 0.85, 0.91],
    ['percent with decimals', '85.3', '91.25', 0.853, 0.9125],
    ['fractions', '0.85', '.91', 0.85, 0.91],
    ['fractions with their sense', '0.85 lag', '0.91 ind.', 0.85, 0.91],
    ['cos phi', 'cos φ 0.85', 'cos phi 0.91', 0.85, 0.91],
    ['unity', '1.00', '100%', 1, 1],
  ])('read the power factor as %s', async (_name, first, second, one, other) => {
    const { bills } = await readTable([
      ['Month', 'kWh', 'Power factor', 'Total charges'],
      ['2025-01', 100, first, '10.00'],
      ['2025-02', 100, second, '10.00'],
    ]);
    expect(bills.map(({ quantities }) => quantities.powerFactor)).toEqual([one, other]);
  });

  it('keep a leading power factor apart, and name its row', async () => {
    const reading = await readTable([
      ['Month', 'kWh', 'Power factor', 'Total charges'],
      ['2025-01', 100, '0.85 lag', '10.00'],
      ['2025-02', 100, '0.97 lead', '10.00'],
    ]);
    expect(reading.bills[1]?.quantities).toEqual({ kwh: 100, powerFactorLeading: 0.97 });
    expect(notesOf(reading, 'pf-leading')[0]).toContain('row 3');
  });

  it.each(containers)('carry their units in the cells (%s)', async (_name, pack) => {
    const { bills } = await readTable(
      pack([
        ['Month', 'Consumption', 'Demand', 'Reactive', 'Power factor', 'Total charges'],
        ['2025-01', '2,726,444 kWh', '4.61 MW', '1,900.5 Mvarh', '82 %', '$214,000.00'],
        ['2025-02', '2,5 MWh'.replace(',', '.'), '4,580 kW', '1,850,000 kvarh', '83 %', '$210,000.00'],
      ]),
    );
    expect(bills[0]?.quantities).toEqual({ kwh: 2_726_444, maxKw: 4610, kvarh: 1_900_500, powerFactor: 0.82 });
    expect(bills[1]?.quantities).toEqual({ kwh: 2500, maxKw: 4580, kvarh: 1_850_000, powerFactor: 0.83 });
  });

  it('are scaled from MWh, Mvarh and W named in the heads', async () => {
    const { bills } = await readTable([
      ['Month', 'Energy [MWh]', 'Reactive energy [Mvarh]', 'Max demand [W]', 'Billed demand [kVA]', 'Amount [USD]'],
      ['2025-01', '812.5', '601.25', '1,450,000', '1,600', '90.00'],
      ['2025-02', '800', '600', '1,400,000', '1,600', '90.00'],
    ]);
    expect(bills[0]?.quantities).toEqual({ kwh: 812_500, kvarh: 601_250, maxKw: 1450, billedKva: 1600 });
  });
});

describe('money as text', () => {
  it.each([
    ['1.234,56 €', '1.234,56-', 'Europe/Berlin', 1234.56, -1234.56],
    ['$1,234.56', '$(1,234.56)', 'America/Chicago', 1234.56, -1234.56],
    ['1,234.56 DR', '1,234.56 CR', 'America/Chicago', 1234.56, -1234.56],
    ["CHF 1'234.55", "CHF -1'234.55", 'Europe/Zurich', 1234.55, -1234.55],
    ['1 234,56', '-1 234,56', 'Europe/Warsaw', 1234.56, -1234.56],
  ])('reads %s and %s', async (first, second, timeZone, one, other) => {
    const { bills } = await readTable(
      [
        ['Month', 'kWh', 'Energy charge', 'Total'],
        ['2025-01', '1000', first, first],
        ['2025-02', '1000', second, second],
      ],
      { timeZone },
    );
    expect(bills.map(({ total }) => total)).toEqual([one, other]);
    expect(bills.map(({ charges }) => charges[0]?.amount)).toEqual([one, other]);
  });

  it.each([
    [['Energy charge', 'Total (CAD)'], ['$10.00', '$10.00'], 'CAD'],
    [['Energy charge', 'Total'], ['£10.00', '£10.00'], 'GBP'],
    [['Energy charge', 'Total'], ['10.00 zł', '10.00 zł'], 'PLN'],
    [['Energy charge', 'Total'], ['$10.00', '$10.00'], undefined],
    [['Currency', 'Total charges'], ['NOK', '10.00'], 'NOK'],
  ])('tells the currency under %s by %s', async (heads, cells, currency) => {
    const { report } = await readTable([
      ['Month', ...heads],
      ['2025-01', ...cells],
      ['2025-02', ...cells],
    ]);
    expect(report.currency).toBe(currency);
  });

  it('refuses amounts in two currencies, and says where', async () => {
    await expect(
      readTable([
        ['Month', 'kWh', 'Energy charge', 'Total'],
        ['2025-01', 100, '$10.00', '$10.00'],
        ['2025-02', 100, '€10.00', '€10.00'],
      ]),
    ).rejects.toThrow(/more than one currency: \$ in row 2, € in row 3/);
    await expect(
      readTable([
        ['Month', 'Currency', 'Total charges'],
        ['2025-01', 'EUR', '10.00'],
        ['2025-02', 'CHF', '10.00'],
      ]),
    ).rejects.toThrow(/EUR in row 2, CHF in row 3/);
  });
});

describe('quantity, rate and charge in three columns', () => {
  // 410 kW x 12.50 = 5,125.00; 402 x 12.50 = 5,025.00; 120,000 kWh x 0.0512 = 6,144.00; 110,000 x 0.0512 = 5,632.00.
  const table: Rows = [
    [
      'From',
      'To',
      'Demand kW',
      'Demand rate',
      'Demand charge',
      'Energy kWh',
      'Energy rate ($/kWh)',
      'Energy charge',
      'Total',
    ],
    ['2025-01-01', '2025-01-31', 410, '12.50', '5,125.00', '120,000', '0.0512', '6,144.00', '11,269.00'],
    ['2025-02-01', '2025-02-28', 402, '12.50', '5,025.00', '110,000', '0.0512', '5,632.00', '10,657.00'],
    ['2025-03-01', '2025-03-31', 405, '12.50', '5,062.50', '115,000', '0.0512', '5,888.00', '10,950.50'],
  ];

  it.each(containers)('go with the charge they make (%s)', async (_name, pack) => {
    const { bills, report } = await readTable(pack(table));
    expect(bills[0]?.charges).toEqual([
      { label: 'Demand charge', amount: 5125, quantity: 410, unit: 'kW', rate: 12.5 },
      { label: 'Energy charge', amount: 6144, quantity: 120_000, unit: 'kWh', rate: 0.0512 },
    ]);
    expect(bills[0]?.quantities).toEqual({ maxKw: 410, kwh: 120_000 });
    expect(report.rateFaults).toEqual([]);
  });

  it('say so in the evidence', async () => {
    const shown = await previewTable(table);
    expect(shown.columns[3]).toMatchObject({
      takenAs: 'rate',
      why: 'Times “Demand kW” it makes “Demand charge” in 3 of 3 bills',
      sure: true,
    });
  });

  it('are compared, and a difference of more than a cent is shown with its working, not corrected', async () => {
    const wrong = table.map((row, at) =>
      at === 3
        ? row.map((cell) => (cell === '5,062.50' ? '5,262.50' : cell === '10,950.50' ? '11,150.50' : cell))
        : row,
    );
    const reading = await readTable(wrong);
    expect(reading.bills[2]?.charges[0]).toEqual({
      label: 'Demand charge',
      amount: 5262.5,
      quantity: 405,
      unit: 'kW',
      rate: 12.5,
    });
    expect(reading.report.rateFaults).toEqual([
      { bill: 2, where: 'row 4', label: 'Demand charge', quantity: 405, unit: 'kW', rate: 12.5, amount: 5262.5 },
    ]);
    expect(notesOf(reading, 'rate-differs')).toEqual([
      'row 4: “Demand charge”: 405 kW times 12.5 make 5062.50, printed are 5262.50: 200.00 apart.',
    ]);
  });

  it('understand rates in cents and for a thousand units', async () => {
    const { bills } = await readTable([
      [
        'Month',
        'Energy kWh',
        'Energy ct/kWh',
        'Energy charge',
        'Reactive Mvarh',
        'Reactive price per Mvarh',
        'Reactive charge',
        'Total',
      ],
      ['2025-01', 120_000, 5.12, 6144, 10, 4.5, 45, 6189],
      ['2025-02', 110_000, 5.12, 5632, 12, 4.5, 54, 5686],
    ]);
    expect(bills[0]?.charges).toEqual([
      { label: 'Energy charge', amount: 6144, quantity: 120_000, unit: 'kWh', rate: 0.0512 },
      { label: 'Reactive charge', amount: 45, quantity: 10, unit: 'Mvarh', rate: 4.5 },
    ]);
    expect(bills[0]?.quantities.kvarh).toBe(10_000);
  });

  it('are read from lines of a bill, each with its own fault', async () => {
    const reading = await readTable([
      ['From', 'To', 'Charge', 'Quantity', 'Unit', 'Rate', 'Amount'],
      ['2025-01-01', '2025-02-01', 'Energy charge', 1000, 'kWh', 0.1, 100],
      ['2025-01-01', '2025-02-01', 'Demand charge', 20, 'kW', 5, 110],
      ['2025-02-01', '2025-03-01', 'Energy charge', 1000, 'kWh', 0.1, 100],
      ['2025-02-01', '2025-03-01', 'Demand charge', 20, 'kW', 5, 100],
    ]);
    expect(reading.report.rateFaults?.map(({ bill, where, label, amount }) => [bill, where, label, amount])).toEqual([
      [0, 'row 3', 'Demand charge', 110],
    ]);
  });
});

describe('sums that settle what names leave open', () => {
  it('choose the total the lines add up to, not what is owed', async () => {
    const { bills, report } = await readTable([
      ['Month', 'Energy charge', 'Tax', 'Current charges', 'Previous balance', 'Amount due'],
      ['2025-01', '100.00', '7.00', '107.00', '55.00', '162.00'],
      ['2025-02', '110.00', '7.70', '117.70', '0.00', '117.70'],
      ['2025-03', '120.00', '8.40', '128.40', '20.00', '148.40'],
    ]);
    expect(bills.map(({ total }) => total)).toEqual([107, 117.7, 128.4]);
    expect(notesOf({ report }, 'sum-differs')).toEqual([]);
  });

  it('take no total that holds balances', async () => {
    const shown = await previewTable([
      ['Month', 'Energy charge', 'Tax', 'Previous balance', 'Payment', 'Amount due'],
      ['2025-01', '100.00', '7.00', '55.00', '-50.00', '112.00'],
      ['2025-02', '110.00', '7.70', '12.00', '-10.00', '119.70'],
    ]);
    expect(shown.bills.map(({ total }) => total)).toEqual([null, null]);
    expect(shown.columns[5]).toMatchObject({ takenAs: 'ignore' });
    expect(shown.columns[5]?.why).toContain('“Previous balance” and “Payment”');
  });

  it('leave a late fee out unless the total holds it', async () => {
    const outside = await readTable([
      ['Month', 'Energy charge', 'Tax', 'Late fee', 'Total'],
      ['2025-01', '100.00', '7.00', '5.00', '107.00'],
      ['2025-02', '110.00', '7.70', '0.00', '117.70'],
    ]);
    expect(outside.bills[0]?.charges.map(({ label }) => label)).toEqual(['Energy charge', 'Tax']);
    const inside = await readTable([
      ['Month', 'Energy charge', 'Tax', 'Late fee', 'Total'],
      ['2025-01', '100.00', '7.00', '5.00', '112.00'],
      ['2025-02', '110.00', '7.70', '1.00', '118.70'],
    ]);
    expect(inside.bills[0]?.charges.map(({ label }) => label)).toEqual(['Energy charge', 'Tax', 'Late fee']);
  });

  it('find a line that repeats others', async () => {
    const { bills } = await readTable([
      ['Month', 'Energy charge', 'On-peak charge', 'Off-peak charge', 'Demand charge', 'Total'],
      ['2025-01', '100.00', '60.00', '40.00', '30.00', '130.00'],
      ['2025-02', '110.00', '65.00', '45.00', '31.00', '141.00'],
    ]);
    expect(bills[0]?.charges.map(({ label }) => label)).toEqual(['On-peak charge', 'Off-peak charge', 'Demand charge']);
  });

  it('take net and tax as lines of a gross total', async () => {
    const { bills } = await readTable(
      [
        ['Monat', 'kWh', 'Nettobetrag', 'MwSt 19 %', 'Gesamtbetrag'],
        ['01/2025', '1.000', '100,00 €', '19,00 €', '119,00 €'],
        ['02/2025', '1.100', '110,00 €', '20,90 €', '130,90 €'],
      ],
      { timeZone: 'Europe/Berlin' },
    );
    expect(bills[0]).toMatchObject({
      quantities: { kwh: 1000 },
      charges: [
        { label: 'Nettobetrag', amount: 100 },
        { label: 'MwSt 19 %', amount: 19 },
      ],
      total: 119,
    });
  });
});
