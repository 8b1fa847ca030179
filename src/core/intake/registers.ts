/**
 * Whether figures are the readings of a register: they only ever grow (one or a hundredth may fall to near nought, at
 * roll-overs and resets), often, and start far above their largest step. `isNamed` says that their name calls them a
 * register, which needs no such start.
 */
export function onlyGrows(readings: readonly number[] | Float64Array, isNamed = false): boolean {
  let count = 0;
  let falls = 0;
  let steps = 0;
  let largest = 0;
  let first = Number.NaN;
  let before = Number.NaN;
  for (const figure of readings) {
    if (Number.isNaN(figure)) continue;
    count += 1;
    if (count === 1) first = figure;
    const step = figure - before;
    // A roll-over or a reset falls to near nought, seen from far apart perhaps no more; any other fall is no register's.
    if (step < 0) falls += isNamed || figure < before * 0.1 ? 1 : Infinity;
    else if (step > 0) {
      steps += 1;
      largest = Math.max(largest, step);
    }
    before = figure;
  }
  if (count < (isNamed ? 2 : 4) || falls > (isNamed ? Math.max(2, count * 0.1) : Math.max(1, count * 0.01)))
    return false;
  if (steps <= count * 0.2) return false;
  const isLarge = first > 20 * (largest / Math.max(1, readings.length / 100));
  return isNamed || (isLarge && count >= 10);
}

/** Whether all figures are one and the same: beside a register that runs, one that stands still. */
export function isConstant(readings: readonly number[] | Float64Array): boolean {
  let first = Number.NaN;
  for (const figure of readings) {
    if (Number.isNaN(first)) first = figure;
    else if (figure !== first && !Number.isNaN(figure)) return false;
  }
  return !Number.isNaN(first);
}

/**
 * Turns readings of a register into the energy between them, in place: the energy of an interval stands where its first
 * reading stood, or its last if readings name the end of the interval beside them. A roll-over is carried on, a reset
 * leaves its interval missing.
 *
 * @param scale  What the register's own figures were multiplied by
 * @returns how often the register falls
 */
export function registerEnergy(readings: Float64Array, isEnd: boolean, scale = 1): number {
  const most = readings.reduce((greatest, figure) => (figure > greatest ? figure : greatest), scale);
  const size = 10 ** Math.ceil(Math.log10(most / scale + 1)) * scale;
  const energyOf = (before: number, after: number): number => {
    const isRollover = before > size * 0.95 && after < size * 0.05;
    return after >= before ? after - before : isRollover ? after - before + size : Number.NaN;
  };
  let falls = 0;
  const count = readings.length;
  for (let turn = 0; turn < count; turn += 1) {
    const slot = isEnd ? count - 1 - turn : turn;
    const before = readings[isEnd ? slot - 1 : slot] ?? Number.NaN;
    const after = readings[isEnd ? slot : slot + 1] ?? Number.NaN;
    if (after < before) falls += 1;
    readings[slot] = energyOf(before, after);
  }
  return falls;
}
