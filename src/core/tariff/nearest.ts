/**
 * The known name that a person most likely meant, or none if nothing is near.
 *
 * Optimal string alignment distance (a letter lost, added, changed, or two swapped count one), at most a third of the length and at
 * least one; letters' case is ignored. Words of more than 64 letters are near to none: comparing them takes the square of their length.
 *
 * @param most  Greatest distance, in place of a third of the length
 */
export function nearestName(
  typed: string,
  known: Iterable<string>,
  most = Math.max(1, Math.floor(typed.length / 3)),
): string | undefined {
  if (typed.length > 64) return undefined;
  let best: string | undefined;
  let bestDistance = most + 0.5;
  for (const name of known) {
    if (name === typed) continue;
    if (Math.abs(name.length - typed.length) >= bestDistance) continue;
    const distance = editDistance(typed.toLowerCase(), name.toLowerCase(), bestDistance);
    if (distance < bestDistance) {
      best = name;
      bestDistance = distance;
    }
  }
  return best;
}

/** Distance of two words; once it cannot be less than `most`, some number from `most` on. */
function editDistance(a: string, b: string, most: number): number {
  let older: number[] = [];
  let previous = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const current = [i];
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1];
      let cost = Math.min(previous[j]! + 1, current[j - 1]! + 1, previous[j - 1]! + (same ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) cost = Math.min(cost, older[j - 2]! + 1);
      current.push(cost);
    }
    // A later row holds nothing less than the least of the two before it.
    if (Math.min(...current) >= most && Math.min(...previous) >= most) return most;
    older = previous;
    previous = current;
  }
  return previous[b.length]!;
}

/** `Did you mean "x"?` where a known name is near, else the fallback. */
export function didYouMean(typed: string, known: Iterable<string>, fallback = ''): string {
  const name = nearestName(typed, known);
  return name === undefined ? fallback : `Did you mean "${name}"?`;
}
