import { lineToleranceMinor, type LinePair } from '../../schemas/pricing';

/** A difference of its own, with what follows from it in lines that are a percentage of others. */
export interface Fault {
  pair: LinePair;
  /** The line's own part. */
  ownMinor: number;
  /** With everything that follows from it. */
  wholeMinor: number;
}

/**
 * Sorts a bill's differences into faults and their consequences: a tax on an over-billed demand is over-billed too, but
 * is no finding of its own. Pairs stand in the order of the bill.
 *
 * @param baseOf  Lines a percentage line is taken of, by its id; none for other lines
 */
export function faultsOf(pairs: LinePair[], baseOf: (lineId: string) => string[]): Fault[] {
  const faults: Fault[] = [];
  const shares = new Map<string, Map<Fault, number>>();
  for (const pair of pairs) {
    const followed = followedFrom(pair, pairs, baseOf, shares);
    const ownMinor = pair.differenceMinor - sumOf(followed);
    if (Math.abs(ownMinor) > lineToleranceMinor) {
      const fault = { pair, ownMinor: Math.round(ownMinor), wholeMinor: 0 };
      faults.push(fault);
      followed.set(fault, ownMinor);
    } else spread(ownMinor, followed);
    for (const [fault, minor] of followed) fault.wholeMinor += minor;
    if (pair.line) shares.set(pair.line.id, followed);
  }
  for (const fault of faults) fault.wholeMinor = Math.round(fault.wholeMinor);
  return faults;
}

const sumOf = (shares: Map<Fault, number>) => [...shares.values()].reduce((sum, minor) => sum + minor, 0);

/** What of a percentage line's difference follows from faults in the lines it is taken of. */
function followedFrom(
  pair: LinePair,
  pairs: LinePair[],
  baseOf: (lineId: string) => string[],
  shares: Map<string, Map<Fault, number>>,
): Map<Fault, number> {
  const followed = new Map<Fault, number>();
  const base = pair.line ? baseOf(pair.line.id) : [];
  if (base.length === 0 || pair.pricedMinor === null || pair.billedMinor === null) return followed;
  const basePriced = pairs.reduce(
    (sum, one) => sum + (one.line && base.includes(one.line.id) ? (one.pricedMinor ?? 0) : 0),
    0,
  );
  if (basePriced === 0) return followed;
  const percent = pair.pricedMinor / basePriced;
  for (const id of base) {
    for (const [fault, minor] of shares.get(id) ?? [])
      followed.set(fault, (followed.get(fault) ?? 0) + percent * minor);
  }
  return followed;
}

/** Gives the cents of rounding to the largest share, so that findings add up to the difference. */
function spread(cents: number, followed: Map<Fault, number>): void {
  const [largest] = [...followed].sort((a, b) => Math.abs(b[1]) - Math.abs(a[1]));
  if (largest) followed.set(largest[0], largest[1] + cents);
}
