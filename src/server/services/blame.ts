import { lineToleranceMinor, type LinePair } from '../../schemas/pricing';

/** A difference of its own, with what follows from it in lines that are a percentage of others. */
export interface Fault {
  pair: LinePair;
  /** The line's own part. */
  ownMinor: number;
  /** With everything that follows from it. */
  wholeMinor: number;
}

type Shares = Map<Fault, number>;

/** In the base of a percentage: whatever the bill prints that the schedule does not know, too. */
export const everythingPrinted = '*';

/**
 * Sorts a bill's differences into faults and their consequences: a tax on an over-billed demand is over-billed too, but
 * is no finding of its own. Pairs stand in the order of the bill.
 *
 * @param baseOf  Lines a percentage line is taken of, by its id; none for other lines. With {@link everythingPrinted}
 *   among them, printed lines the schedule does not know count where that explains the line better.
 */
export function faultsOf(
  pairs: LinePair[],
  baseOf: (lineId: string) => string[],
  toleranceMinor = lineToleranceMinor,
): Fault[] {
  const faults: Fault[] = [];
  const shares = new Map<string, Shares>();
  const alone = pairs.filter((pair) => pair.line === null);
  for (const pair of [...alone, ...pairs.filter((one) => one.line !== null)]) {
    const base = pair.line ? baseOf(pair.line.id) : [];
    const followed = followedFrom(pair, pairs, base, shares);
    const ownMinor = pair.differenceMinor - sumOf(followed);
    if (Math.abs(ownMinor) > toleranceMinor) {
      const fault = { pair, ownMinor: Math.round(ownMinor), wholeMinor: 0 };
      faults.push(fault);
      followed.set(fault, ownMinor);
    } else spread(ownMinor, followed);
    for (const [fault, minor] of followed) fault.wholeMinor += minor;
    const key = pair.line?.id ?? everythingPrinted;
    shares.set(key, new Map([...(shares.get(key) ?? []), ...followed]));
  }
  for (const fault of faults) fault.wholeMinor = Math.round(fault.wholeMinor);
  return faults.sort((a, b) => pairs.indexOf(a.pair) - pairs.indexOf(b.pair));
}

const sumOf = (shares: Shares) => [...shares.values()].reduce((sum, minor) => sum + minor, 0);

/** What of a percentage line's difference follows from faults in the lines it is taken of. */
function followedFrom(pair: LinePair, pairs: LinePair[], base: string[], shares: Map<string, Shares>): Shares {
  if (base.length === 0 || pair.pricedMinor === null || pair.billedMinor === null) return new Map();
  const pricedOf = (one: LinePair) => (one.line && base.includes(one.line.id) ? (one.pricedMinor ?? 0) : 0);
  const basePriced = pairs.reduce((sum, one) => sum + pricedOf(one), 0);
  if (basePriced === 0) return new Map();
  const percent = pair.pricedMinor / basePriced;
  const known = sharesOf(
    base.filter((id) => id !== everythingPrinted),
    percent,
    shares,
  );
  const all = sharesOf(base, percent, shares);
  const left = (followed: Shares) => Math.abs(pair.differenceMinor - sumOf(followed));
  return left(all) < left(known) ? all : known;
}

function sharesOf(base: string[], percent: number, shares: Map<string, Shares>): Shares {
  const followed: Shares = new Map();
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
