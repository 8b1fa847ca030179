import type { LoadSeries } from '../../src/core/load';

// The bill of heavy.yaml as one would write it for a spreadsheet: an object for each row, groups of rows, nothing shared with the core.

/** Sao Paulo keeps three hours behind UTC, without summer time since 2019. */
const offsetMs = -3 * 3_600_000;
const reference = 0.92;
const prices: Record<string, number> = { peak: 0.418, shoulder: 0.332, day: 0.279, night: 0.221 };
const overPrices: Record<string, number> = { peak: 30.1, shoulder: 21.4, day: 21.4, night: 21.4 };

interface Row {
  month: string;
  hour: string;
  window: string;
  kwh: number;
  lagging: number;
  leading: number;
}

function rowOf(load: LoadSeries, i: number): Row {
  const local = new Date(load.startMs + i * load.stepMinutes * 60_000 + offsetMs);
  const stamp = local.toISOString();
  const clock = local.getUTCHours();
  const isWeekday = local.getUTCDay() >= 1 && local.getUTCDay() <= 5;
  const byDay = clock >= 18 && clock < 21 ? 'peak' : clock === 17 || clock === 21 ? 'shoulder' : 'day';
  return {
    month: stamp.slice(0, 7),
    hour: stamp.slice(0, 13),
    window: clock < 6 ? 'night' : isWeekday ? byDay : 'day',
    kwh: load.kwh[i]!,
    lagging: load.kvarhLagging[i]!,
    leading: load.kvarhLeading[i]!,
  };
}

function groupsOf(rows: Row[], key: (row: Row) => string): Map<string, Row[]> {
  const groups = new Map<string, Row[]>();
  for (const row of rows) {
    const group = groups.get(key(row));
    if (group) group.push(row);
    else groups.set(key(row), [row]);
  }
  return groups;
}

const sum = (rows: Row[], of: (row: Row) => number): number => rows.reduce((total, row) => total + of(row), 0);
const cents = (amount: number): number => Math.floor(amount * 100 + 0.5 + 1e-6) / 100;

/** Re-scaled energy and the power beyond the metered one of a window: lagging by day, leading at night. */
function rescaled(rows: Row[], window: string): { kwh: number; overKw: number } {
  const highestKw = Math.max(...rows.map((row) => row.kwh * 4));
  let kwh = 0;
  let scaledKw = 0;
  for (const hour of groupsOf(rows, (row) => row.hour).values()) {
    const energy = sum(hour, (row) => row.kwh);
    const reactive = sum(hour, (row) => (window === 'night' ? row.leading : row.lagging));
    const factor = reactive === 0 ? 1 : energy / Math.hypot(energy, reactive);
    kwh += energy * Math.max(0, reference / factor - 1);
    scaledKw = Math.max(scaledKw, (energy * reference) / factor);
  }
  return { kwh, overKw: Math.max(0, scaledKw - highestKw) };
}

/** Totals of the months of a series of quarters of an hour. */
export function priceRows(load: LoadSeries): number[] {
  const rows = Array.from({ length: load.kwh.length }, (_, i) => rowOf(load, i));
  const highest: number[] = [];
  return [...groupsOf(rows, (row) => row.month).values()].map((month) => {
    const maxKva = Math.max(...month.map((row) => 4 * Math.hypot(row.kwh, row.lagging - row.leading)));
    const yearKva = Math.max(0, ...highest.slice(-11));
    highest.push(maxKva);
    const billedKva = Math.round(Math.max(maxKva, 0.75 * yearKva, 0.5 * 1500));
    const lines = [310, cents(21.4 * billedKva), cents(0.0125 * sum(month, (row) => row.kwh))];
    for (const [window, inside] of groupsOf(month, (row) => row.window)) {
      const { kwh, overKw } = rescaled(inside, window);
      const energy = prices[window]! * sum(inside, (row) => row.kwh);
      lines.push(cents(energy), cents(prices[window]! * kwh), cents(overPrices[window]! * overKw));
    }
    const net = lines.reduce((total, line) => total + line, 0);
    return cents(net + cents(0.18 * net));
  });
}
