import { describe, expect, it } from 'vitest';
import { readBills } from '../../../src/core/intake';

const read = (text: string) =>
  readBills(new TextEncoder().encode(text), { fileName: 'bills.csv', timeZone: 'America/Chicago' });

const head = 'From,To,kWh,Peak kW,Customer charge,Demand,Energy,Total due';

describe('columns whose names leave open whether they hold amounts', () => {
  it('are lines of the bill where only with them the lines add up to the total', async () => {
    const { bills } = await read(
      [
        head,
        '2026-01-01,2026-01-31,1000,120.5,10.00,1205.00,59.80,1274.80',
        '2026-02-01,2026-02-28,900,118.0,10.00,1180.00,53.82,1243.82',
        '2026-03-01,2026-03-31,1100,121.0,10.00,1210.00,65.78,1285.78',
      ].join('\n'),
    );
    expect(bills[0]?.charges).toEqual([
      { label: 'Customer charge', amount: 10 },
      { label: 'Demand', amount: 1205 },
      { label: 'Energy', amount: 59.8 },
    ]);
    expect(bills[0]?.quantities).toEqual({ kwh: 1000, maxKw: 120.5 });
  });

  it('stay quantities where the lines add up without them', async () => {
    const { bills } = await read(
      [
        'From,To,Demand,Customer charge,Energy charge,Total due',
        '2026-01-01,2026-01-31,120.5,10.00,59.80,69.80',
        '2026-02-01,2026-02-28,118.0,10.00,53.82,63.82',
      ].join('\n'),
    );
    expect(bills[0]?.quantities).toEqual({ maxKw: 120.5 });
    expect(bills[0]?.charges.map(({ label }) => label)).toEqual(['Customer charge', 'Energy charge']);
  });

  it('are settled though one bill of the utility does not add up', async () => {
    const rows = Array.from({ length: 6 }, (_, month) => {
      const demand = 1200 + month;
      const total = 10 + demand + (month === 3 ? 5 : 0);
      return `2026-0${month + 1}-01,2026-0${month + 1}-28,1000,120,10.00,${demand}.00,0.00,${total}.00`;
    });
    const { bills } = await read([head, ...rows].join('\n'));
    expect(bills[0]?.charges.map(({ label }) => label)).toContain('Demand');
  });
});

describe('Peak kW', () => {
  it('is the highest demand of all hours', async () => {
    const { bills } = await read(
      'From,To,Peak kW,Total due\n2026-01-01,2026-01-31,120.5,1274.80\n2026-02-01,2026-02-28,118,1200',
    );
    expect(bills[0]?.quantities).toEqual({ maxKw: 120.5 });
  });
});
