import { localDateStartMs, type LoadSeries } from '@/core/load';
import { toMinorUnits } from '@/core/units';
import type { PricedBill } from '@/core/tariff';
import { inTx } from '@/server/db/tx';
import { Bill } from '@/server/models/Bill';
import { BillLine } from '@/server/models/BillLine';
import type { Engagement } from '@/server/models/Engagement';
import { keepSeries } from '@/server/services/reading-blocks';
import { buildIntake } from './build';

/** A large-power schedule of our own: demand adjusted by pf with a summer ratchet, two seasons, two texts, tax. */
export const quarrySchedule = `schedule: quarry-lp
title: Large power, adjusted demand
currency: USD
timeZone: America/Chicago
source: { publisher: Test Valley Power, title: Sheet 1, date: 2025-01-01, status: invented }
inForce: 2025-01-01
demandWindow: 15 min
straddle: days
zeroKwh: { pf: 1 }
contract:
  contractKw: { unit: kW, default: 500, range: [100, 5000], label: Contract minimum }
seasons: { summer: 06-01 to 09-30, winter: rest }
quantities:
  kwh:       { sum: kwh }
  kvarh:     { sum: kvarhLagging }
  maxKw:     { highest: kw, label: Peak }
  kvarThen:  { value: kvarLagging, at: maxKw }
  pf:        { formula: pf(maxKw; kvarThen), round: 0.01, label: Power factor at the peak }
  adjKw:     { formula: maxKw * max(1; 0.95 / pf), unit: kW, round: 1, label: Adjusted demand }
  yearKw:    { past: adjKw, take: highest, over: last 11 periods, label: Highest of eleven bills }
  billedKw:  { formula: max(adjKw; 0.75 * yearKw; contractKw), unit: kW, round: 1, label: Billed demand, clause: "5.2" }
charges:
  service: { amount: 415.00, group: fixed, label: Service }
  energy:  { per: kwh, rate: { summer: 0.0640, winter: 0.0500 }, group: energy, label: Energy }
  demand:  { per: billedKw, rate: { summer: 8.95, winter: 6.60 }, group: demand, label: Demand, clause: "5" }
  excess:  { per: kvarh, rate: 0.0010, group: reactive, label: Reactive energy }
  tax:     { percentOf: all above, rate: 2, group: tax, label: Tax }
versions:
  2026-01-01:
    note: Sheet 2
    charges:
      excess: { rate: 0.0012 }
`;

const zone = 'America/Chicago';

/** Steady load by local month: kW and kvar of every interval, hours of the first day a little higher. */
export function steadyLoad(from: string, to: string, kwOf: (month: string) => number, kvarShare = 0.75): LoadSeries {
  const startMs = localDateStartMs(from, zone);
  const count = (localDateStartMs(to, zone) - startMs) / 900_000;
  const load: LoadSeries = {
    startMs,
    stepMinutes: 15,
    kwh: new Float64Array(count),
    kvarhLagging: new Float64Array(count),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
  for (let index = 0; index < count; index += 1) {
    const month = new Date(startMs + index * 900_000 - 6 * 3_600_000).toISOString().slice(0, 7);
    load.kwh[index] = kwOf(month) / 4;
    load.kvarhLagging[index] = (kwOf(month) * kvarShare) / 4;
  }
  return load;
}

/** Keeps a load under an engagement's meter. */
export async function keepLoad(engagement: Engagement, load: LoadSeries): Promise<void> {
  const intake = await buildIntake({ engagementId: engagement.id });
  await inTx(() => keepSeries(engagement.meterId, intake.id, load));
}

export interface PrintedBill {
  from: string;
  to: string;
  lines: [label: string, amountMinor: number][];
  totalMinor: number | null;
  quantities?: Record<string, number>;
}

/** Keeps bills as printed. */
export async function keepBills(engagement: Engagement, printed: PrintedBill[]): Promise<Bill[]> {
  return inTx(async () => {
    const bills: Bill[] = [];
    for (const { from, to, lines, totalMinor, quantities = {} } of printed) {
      const bill = await Bill.create({
        engagementId: engagement.id,
        intakeId: null,
        periodFrom: from,
        periodTo: to,
        quantities,
        currency: 'USD',
        totalMinor,
        sourceRow: null,
      });
      for (const [position, [label, amountMinor]] of lines.entries()) {
        await BillLine.create({ billId: bill.id, position, label, amountMinor });
      }
      bills.push(bill);
    }
    return bills;
  });
}

/** A bill that prints exactly what was priced, under its own words. */
export function printAsPriced({ period, lines, total }: PricedBill): PrintedBill {
  return {
    ...period,
    lines: lines.map((line) => [`${line.label} charge`, toMinorUnits(line.amount, 'USD')]),
    totalMinor: toMinorUnits(total, 'USD'),
  };
}

/** Twelve calendar months from a first one. */
export function twelveMonths(year: number, month: number): { from: string; to: string }[] {
  const first = (ahead: number) => new Date(Date.UTC(year, month - 1 + ahead, 1)).toISOString().slice(0, 10);
  return Array.from({ length: 12 }, (_, ahead) => ({ from: first(ahead), to: first(ahead + 1) }));
}
