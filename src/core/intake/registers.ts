/**
 * Whether figures are the readings of a register: they only ever grow (a hundredth may fall, at roll-overs), often, and
 * start far above their largest step. `isNamed` says that their name calls them a register, which needs no such start.
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
    if (step < 0) falls += 1;
    else if (step > 0) {
      steps += 1;
      largest = Math.max(largest, step);
    }
    before = figure;
  }
  if (count < 4 || falls > count * 0.01 || steps <= count * 0.2) return false;
  const isLarge = first > 20 * (largest / Math.max(1, readings.length / 100));
  return isNamed || (isLarge && count >= 10);
}
