import type { BillInput } from '../../../src/schemas/bill';
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

const line = (label: string, amountMinor: number) => ({ label, amountMinor });

/**
 * The May before, typed from paper: the store changed hands on 20 May and the utility made an invoice for each owner. Customer
 * charge 96.00 by days, 58.84 + 37.16; energy 118,600 and 75,900 kWh at 0.0588; demand 478.6 kW at 15.20 on the second alone.
 */
export const harrowInvoicesOfMay: readonly [BillInput, BillInput] = [
  {
    from: '2026-05-01',
    to: '2026-05-20',
    invoice: '39145',
    quantities: { kwh: 118_600 },
    lines: [line('Customer charge', 5884), line('Energy charge', 697_368), line('Demand charge', 0)],
    totalMinor: 703_252,
  },
  {
    from: '2026-05-20',
    to: '2026-06-01',
    invoice: '39146',
    quantities: { kwh: 75_900, maxKw: 478.6, powerFactor: 0.86 },
    lines: [line('Customer charge', 3716), line('Energy charge', 446_292), line('Demand charge', 727_472)],
    totalMinor: 1_177_480,
  },
];

/** The sheet those bills were made on, as a consultant wrote it down. */
export const harrowSchedule = `# Invented for demonstration: no utility of this name sells power.
schedule: ostrander-gs2
title: GS-2, general service with demand
currency: USD
timeZone: America/Chicago
source: { publisher: Ostrander Valley Light & Power, title: "Schedule GS-2, sheet 9", date: 2025-09-30, status: invented }
inForce: 2025-10-01
demandWindow: 15 min
straddle: days
zeroKwh: { pf: 1 }

rates:
  reference: 0.85 # power factor below which the metered demand is adjusted

quantities:
  kwh: { sum: kwh, label: Energy }
  maxKw: { highest: kw, label: Metered demand }
  kvarh: { sum: kvarhLagging, label: Reactive energy }
  powerFactor: { formula: pf(kwh; kvarh), round: 0.01, label: Power factor, clause: "4" }
  billedKw: { formula: maxKw * max(1; reference / powerFactor), unit: kW, round: 0.1, label: Billed demand, clause: "4" }

charges:
  customer: { amount: 96.00, group: fixed, label: Customer charge, clause: "2" }
  energy: { per: kwh, rate: 0.0588, group: energy, label: Energy charge, clause: "3" }
  demand: { per: billedKw, rate: 15.20, group: demand, label: Demand charge, clause: "4" }

examples:
  # 200,000 x 0.0588; 500 x 0.85 / 0.80 = 531.25, to 0.1: 531.3 x 15.20; at unity 500 x 15.20 = 7,600.00.
  - title: June 2026 at a power factor of 0.80, worked by hand
    from: 2026-06-01
    to: 2026-07-01
    quantities: { kwh: 200000, maxKw: 500, powerFactor: 0.80 }
    expect: { customer: 96.00, energy: 11760.00, billedKw: 531.3, demand: 8075.76, total: 19931.76, reactiveCost: 475.76 }
`;
