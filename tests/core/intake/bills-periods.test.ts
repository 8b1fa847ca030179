import { describe, expect, it } from 'vitest';
import { containers, notesOf, previewTable, readTable, type Rows } from './bill-tables';

const periods = async (table: Rows, how: Parameters<typeof readTable>[1] = {}) =>
  (await readTable(table, how)).bills.map(({ period }) => `${period.from} ${period.to}`);

describe('first and last day', () => {
  it.each([
    ['a dash', '6/10/2025 - 7/9/2025', '7/9/2025 - 8/8/2025'],
    ['a long dash', '6/10/2025 – 7/9/2025', '7/9/2025–8/8/2025'],
    ['a word', 'Jun 10, 2025 to Jul 9, 2025', 'Jul 9, 2025 to Aug 8, 2025'],
    ['ISO dates', '2025-06-10 to 2025-07-09', '2025-07-09 to 2025-08-08'],
    ['German words', 'von 10.06.2025 bis 09.07.2025', 'von 09.07.2025 bis 08.08.2025'],
  ])('stand in one cell with %s between', async (_name, first, second) => {
    expect(
      await periods([
        ['Billing period', 'kWh', 'Total charges'],
        [first, '1,200', '$90.00'],
        [second, '1,300', '$95.00'],
      ]),
    ).toEqual(['2025-06-10 2025-07-09', '2025-07-09 2025-08-08']);
  });

  it('follow the chain of the periods, and say so', async () => {
    const shown = await previewTable([
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-10', '2025-02-08', 1, '1.00'],
      ['2025-02-09', '2025-03-10', 1, '1.00'],
      ['2025-03-11', '2025-04-09', 1, '1.00'],
    ]);
    expect(shown.guesses.find((guess) => guess.key === 'period-ends')).toMatchObject({
      takenAs: 'last day included',
      why: '2 of 2 periods end the day before the next begins',
      sure: true,
    });
  });

  it('go by custom, named as such, where nothing tells', async () => {
    const table: Rows = [
      ['From', 'To', 'kWh', 'Total charges'],
      ['2025-01-10', '2025-02-08', 1, '1.00'],
      ['2025-03-12', '2025-04-10', 1, '1.00'],
    ];
    const shown = await previewTable(table);
    expect(shown.guesses.find((guess) => guess.key === 'period-ends')).toMatchObject({ sure: false });
    const reading = await readTable(table);
    expect(reading.bills[0]?.period).toEqual({ from: '2025-01-10', to: '2025-02-08' });
    expect(notesOf(reading, 'period-ends-assumed')[0]).toContain('custom');
  });

  it('are checked against the days printed', async () => {
    const reading = await readTable([
      ['From', 'To', 'Days', 'kWh', 'Total charges'],
      ['2025-01-01', '2025-01-31', 31, 1, '1.00'],
      ['2025-02-01', '2025-02-28', 28, 1, '1.00'],
      ['2025-03-01', '2025-03-31', 30, 1, '1.00'],
    ]);
    expect(notesOf(reading, 'days-differ')).toEqual(['row 4: 30 days are printed, the period has 31.']);
  });

  it('are told from dates of the paper', async () => {
    expect(
      await periods([
        ['Invoice date', 'Due date', 'Service from', 'Service to', 'kWh', 'Total charges'],
        ['2025-02-03', '2025-02-20', '2025-01-01', '2025-02-01', 1, '1.00'],
        ['2025-03-03', '2025-03-20', '2025-02-01', '2025-03-01', 1, '1.00'],
      ]),
    ).toEqual(['2025-01-01 2025-02-01', '2025-02-01 2025-03-01']);
  });

  it('stand as previous and current reading', async () => {
    expect(
      await periods([
        ['Previous read date', 'Current read date', 'kWh', 'Total charges'],
        ['2025-01-10', '2025-02-08', 1, '1.00'],
        ['2025-02-08', '2025-03-11', 1, '1.00'],
      ]),
    ).toEqual(['2025-01-10 2025-02-08', '2025-02-08 2025-03-11']);
  });

  it('are told by the last day and the days', async () => {
    expect(
      await periods([
        ['Read date', 'Days', 'kWh', 'Total charges'],
        ['2025-02-08', 29, 1, '1.00'],
        ['2025-03-11', 31, 1, '1.00'],
      ]),
    ).toEqual(['2025-01-10 2025-02-08', '2025-02-08 2025-03-11']);
  });
});

describe('months', () => {
  it('of account give way to the days of the reading', async () => {
    const shown = await previewTable([
      ['Revenue month', 'Start date', 'End date', 'kWh', 'Total charges'],
      ['2025-02', '2025-01-10', '2025-02-08', 1, '1.00'],
      ['2025-03', '2025-02-08', '2025-03-11', 1, '1.00'],
    ]);
    expect(shown.bills[0]?.period).toEqual({ from: '2025-01-10', to: '2025-02-08' });
    expect(shown.columns[0]).toMatchObject({ takenAs: 'ignore', why: 'The period stands in other columns' });
  });

  it('of account alone are asked about', async () => {
    const shown = await previewTable([
      ['Fiscal month', 'kWh', 'Total charges'],
      ['2025-02', 1, '1.00'],
      ['2025-03', 1, '1.00'],
    ]);
    expect(shown.bills[0]?.period).toEqual({ from: '2025-02-01', to: '2025-03-01' });
    expect(shown.columns[0]).toMatchObject({ takenAs: 'month', sure: false });
  });

  const bare = (names: string[]): Rows => [
    ['Month', 'kWh', 'Total charges'],
    ...names.map((name, at) => [name, 100 + at, 10 + at]),
  ];

  it('without a year take the one named above the table', async () => {
    const table = [['Electricity of Harrow Mill, 2024', null, null], ...bare(['January', 'February', 'March'])];
    expect(await periods(table)).toEqual(['2024-01-01 2024-02-01', '2024-02-01 2024-03-01', '2024-03-01 2024-04-01']);
    expect((await previewTable(table)).guesses.find((guess) => guess.key === 'year')).toMatchObject({
      takenAs: '2024',
      sure: true,
    });
  });

  it('run on into the next year, as the file name says', async () => {
    expect(await periods(bare(['Nov', 'Dec', 'Jan']), { fileName: 'bills FY 2024-25.csv' })).toEqual([
      '2024-11-01 2024-12-01',
      '2024-12-01 2025-01-01',
      '2025-01-01 2025-02-01',
    ]);
  });

  it('without any year are refused, and read with the year a person says', async () => {
    await expect(readTable(bare(['Jan', 'Feb', 'Mar']))).rejects.toThrow(/carry no year/);
    expect(await periods(bare(['Jan', 'Feb', 'Mar']), { columnMap: { kind: 'bills', year: 2023 } })).toContain(
      '2023-02-01 2023-03-01',
    );
  });

  it.each(containers)('stand as figures beside a year (%s)', async (_name, pack) => {
    const { bills } = await readTable(
      pack([
        ['Year', 'Month', 'kWh', 'Total charges'],
        [2024, 11, 100, 10],
        [2024, 12, 110, 11],
        [2025, 1, 120, 12],
      ]),
    );
    expect(bills.map(({ period, quantities }) => [period.from, quantities.kwh])).toEqual([
      ['2024-11-01', 100],
      ['2024-12-01', 110],
      ['2025-01-01', 120],
    ]);
  });
});
