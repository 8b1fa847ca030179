import { billsWorkbook, type PrintedBill } from './bills-file';

const months = ['2026-06-01', '2026-07-01', '2026-08-01', '2026-09-01', '2026-10-01', '2026-11-01'];
const energyKwh = [201_400, 214_900, 221_300, 204_100, 189_700];
const peakKw = [486.4, 502.1, 511.8, 494.0, 470.2];
const factor = [0.86, 0.85, 0.85, 0.86, 0.87];
const ratePerKwh = 0.0588;
const ratePerKw = 15.2;

const cents = (amount: number) => Math.round(amount * 100) / 100;

/** Five bills of a cold store, typed off paper by the client; nothing else is known of it yet. */
export function harrowBills(): { fileName: string; bytes: Uint8Array } {
  const bills = energyKwh.map((kwh, index): PrintedBill => {
    const from = months[index] as string;
    const next = months[index + 1] as string;
    const kw = peakKw[index] ?? 0;
    return {
      invoice: 40_118 + index * 973,
      from,
      lastDay: new Date(Date.parse(next) - 86_400_000).toISOString().slice(0, 10),
      quantities: { 'Energy kWh': kwh, 'Peak kW': kw, 'Power factor': factor[index] ?? 1 },
      lines: [
        { label: 'Customer charge', amount: 96 },
        { label: 'Energy charge', amount: cents(kwh * ratePerKwh) },
        { label: 'Demand charge', amount: cents(kw * ratePerKw) },
      ],
    };
  });
  return {
    fileName: 'pier4-bills.xlsx',
    bytes: billsWorkbook(bills, ['Harrow Sound Cold Store', 'Pier 4, meter OV 2207-031']),
  };
}
