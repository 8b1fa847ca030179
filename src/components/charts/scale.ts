/**
 * Ticks at 1, 2, 2.5 or 5 times a power of ten that enclose the data.
 *
 * @param low Least value drawn.
 * @param high Greatest value drawn; where it equals `low` a span of one is used.
 * @param count Intervals aimed at; the result has between half and twice as many.
 */
export function niceTicks(low: number, high: number, count = 5): number[] {
  const span = high > low ? high - low : Math.max(1, Math.abs(high));
  const top = high > low ? high : low + span;
  const raw = span / Math.max(1, count);
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = power * ([1, 2, 2.5, 5].find((factor) => factor * power >= raw * 0.999) ?? 10);
  const first = Math.floor(low / step + 1e-9);
  const last = Math.ceil(top / step - 1e-9);
  return Array.from({ length: last - first + 1 }, (_, index) => Number(((first + index) * step).toPrecision(12)));
}

/** Ticks inside a fixed range, for axes whose ends are set by the data. */
export function ticksWithin(low: number, high: number, count = 5): number[] {
  return niceTicks(low, high, count).filter((tick) => tick >= low - 1e-9 && tick <= high + 1e-9);
}

/** First and last tick as an axis domain. */
export function domainOf(ticks: number[]): [number, number] {
  return [ticks[0] ?? 0, ticks.at(-1) ?? 1];
}

/** Decimals that tell neighbouring ticks apart. */
export function tickDecimals(ticks: number[]): number {
  const step = Math.abs((ticks[1] ?? 1) - (ticks[0] ?? 0)) || 1;
  return [0, 1, 2, 3].find((places) => Math.abs(step * 10 ** places - Math.round(step * 10 ** places)) < 1e-6) ?? 3;
}

/** Whether an axis of money reads better in thousands, and its words. */
export function moneyScale(greatest: number): { divisor: number; word: string } {
  if (Math.abs(greatest) >= 2_000_000) return { divisor: 1_000_000, word: 'Million ' };
  if (Math.abs(greatest) >= 20_000) return { divisor: 1000, word: 'Thousand ' };
  return { divisor: 1, word: '' };
}

/** Moves labels apart so that none overlaps the next, keeping their order and staying between two bounds. */
export function spreadLabels(wanted: number[], gap: number, low: number, high: number): number[] {
  const order = wanted.map((_, index) => index).sort((a, b) => wanted[a]! - wanted[b]!);
  const placed = [...wanted];
  let previous = low - gap;
  for (const index of order) {
    placed[index] = Math.max(placed[index]!, previous + gap);
    previous = placed[index]!;
  }
  let next = high + gap;
  for (const index of [...order].reverse()) {
    placed[index] = Math.min(placed[index]!, next - gap);
    next = placed[index]!;
  }
  return placed;
}

/** Value of a line through points ordered by x; null outside them. */
export function valueAt<T>(points: T[], x: number, getX: (p: T) => number, getY: (p: T) => number): number | null {
  for (let index = 1; index < points.length; index += 1) {
    const from = points[index - 1]!;
    const to = points[index]!;
    if (x < getX(from) || x > getX(to)) continue;
    const width = getX(to) - getX(from);
    return width === 0 ? getY(to) : getY(from) + ((getY(to) - getY(from)) * (x - getX(from))) / width;
  }
  return null;
}
