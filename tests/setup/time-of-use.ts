import { localDateStartMs, type LoadSeries } from '@/core/load';
import { readSchedule } from '@/core/tariff';
import type { BillView } from '@/schemas/bill';
import type { ReconcileBasis } from '@/server/services/price-basis';

/** A schedule of our own: demand on peak adjusted by a rounded pf, with a ratchet, a rider outside the tax. */
export const timeOfUseSchedule = `schedule: valley-tou
title: Time of use
currency: USD
timeZone: America/Chicago
source: { publisher: Test Valley Power, title: Sheet 9, date: 2025-01-01, status: invented }
inForce: 2025-01-01
demandWindow: 15 min
straddle: days
zeroKwh: { pf: 1 }
windows:
  onPeak:
    - { days: weekdays, hours: 08:00-20:00 }
  offPeak: { rest: onPeak }
quantities:
  kwh:      { sum: kwh, label: Energy }
  kvarh:    { sum: kvarhLagging }
  peakKw:   { highest: kw, in: onPeak, label: Peak on peak }
  pf:       { formula: pf(kwh; kvarh), round: 0.001, label: Power factor }
  adjKw:    { formula: peakKw * max(1; 0.95 / pf), unit: kW, round: 1, label: Adjusted demand }
  yearKw:   { past: adjKw, take: highest, over: last 11 periods, label: Highest of eleven bills }
  billedKw: { formula: max(adjKw; 0.80 * yearKw), unit: kW, round: 1, label: Billed demand, clause: "4" }
charges:
  service: { amount: 400.00, group: fixed, label: Service }
  demand:  { per: billedKw, rate: 10.00, group: demand, label: Demand, clause: "4" }
  energy:  { per: kwh, rate: 0.05, group: energy, label: Energy }
  rider:   { per: kwh, rate: 0.002, group: adjustment, label: Rider }
  tax:     { percentOf: [service, demand, energy], rate: 5, group: tax, label: Tax }
`;

const zone = 'America/Chicago';
const quarterMs = 900_000;
const at = (date: string, hour: number) => localDateStartMs(date, zone) + hour * 3_600_000;

/**
 * June and July 2026: 1,000 kW throughout, 1,400 kW from 10:00 to 10:15 on Wednesday 3 June (on peak), 1,600 kW from 02:00 to
 * 03:00 on Saturday 6 June (off peak); kvarh are seven tenths of the kWh of every quarter-hour.
 */
export function summerLoad(): LoadSeries {
  const startMs = at('2026-06-01', 0);
  const count = (at('2026-08-01', 0) - startMs) / quarterMs;
  const kwOf = (index: number) => {
    const ms = startMs + index * quarterMs;
    if (ms === at('2026-06-03', 10)) return 1400;
    return ms >= at('2026-06-06', 2) && ms < at('2026-06-06', 3) ? 1600 : 1000;
  };
  const kwh = Float64Array.from({ length: count }, (_, index) => kwOf(index) / 4);
  return {
    startMs,
    stepMinutes: 15,
    kwh,
    kvarhLagging: kwh.map((value) => value * 0.7),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
}

/** Amounts of a bill's lines in major units. */
export interface Printed {
  service: number;
  demand: number;
  energy: number;
  rider: number;
  tax: number;
}

/**
 * The two bills by hand. pf = 1 / sqrt(1 + 0.7^2) = 0.819232, rounded 0.819.
 * June: 720 h x 1,000 kW + 400 kW x 0.25 h + 600 kW x 1 h = 720,700 kWh. Adjusted 1,400 x 0.95 / 0.819 = 1,623.93 -> 1,624 kW,
 * x 10.00 = 16,240.00. Energy x 0.05 = 36,035.00, rider x 0.002 = 1,441.40. Tax 5 % of 400 + 16,240 + 36,035 = 2,633.75.
 * July: 744 h x 1,000 kW = 744,000 kWh. Adjusted 1,000 x 0.95 / 0.819 = 1,159.95 -> 1,160; 0.80 x 1,624 = 1,299.2 -> 1,299 kW,
 * 12,990.00. Energy 37,200.00, rider 1,488.00. Tax 5 % of 400 + 12,990 + 37,200 = 2,529.50.
 */
export const byHand: { june: Printed; july: Printed } = {
  june: { service: 400, demand: 16_240, energy: 36_035, rider: 1_441.4, tax: 2_633.75 },
  july: { service: 400, demand: 12_990, energy: 37_200, rider: 1_488, tax: 2_529.5 },
};

const labels: Record<keyof Printed, string> = {
  service: 'Service',
  demand: 'Demand',
  energy: 'Energy',
  rider: 'Rider',
  tax: 'Tax',
};

const minor = (amount: number) => Math.round(amount * 100);

function billView(
  id: number,
  from: string,
  to: string,
  printed: Printed,
  quantities: Record<string, number>,
): BillView {
  const lines = Object.entries(printed).map(([name, amount], index) => ({
    id: id * 10 + index,
    label: labels[name as keyof Printed],
    amountMinor: minor(amount),
  }));
  const linesMinor = lines.reduce((sum, line) => sum + line.amountMinor, 0);
  const days = Math.round((Date.parse(to) - Date.parse(from)) / 86_400_000);
  return {
    id,
    version: 0,
    from,
    to,
    days,
    quantities,
    currency: 'USD',
    lines,
    linesMinor,
    totalMinor: linesMinor,
    differenceMinor: 0,
    source: null,
  };
}

export interface Falsified {
  june?: Partial<Printed>;
  july?: Partial<Printed>;
  quantities?: Record<string, number>;
  toleranceMinor?: number;
}

/** Basis of the two bills as printed by hand but for what is falsified; the tax is taken as told, not carried on. */
export function summerBasis({ june, july, quantities = {}, toleranceMinor = 5 }: Falsified): ReconcileBasis {
  const periods = [
    { from: '2026-06-01', to: '2026-07-01' },
    { from: '2026-07-01', to: '2026-08-01' },
  ];
  return {
    route: 'intervals',
    schedule: readSchedule(timeOfUseSchedule),
    siteTimeZone: zone,
    lineMatches: {},
    toleranceMinor,
    periods,
    contract: {},
    history: { adjKw: [100] },
    given: [{}, {}],
    bills: [
      billView(1, '2026-06-01', '2026-07-01', { ...byHand.june, ...june }, quantities),
      billView(2, '2026-07-01', '2026-08-01', { ...byHand.july, ...july }, {}),
    ],
    load: summerLoad(),
  };
}
