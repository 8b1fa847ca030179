/** A motor's distinct loads and which of them each interval has. */
export interface DistinctLoads {
  /** Ascending, without the standstill. [kW] */
  loads: Float64Array;
  /** Per interval: 0 at standstill, else 1 + index into `loads`. */
  index: Uint32Array;
}

/** Sorts a motor's loads into distinct ones. @throws {RangeError} naming a load that is negative or not a number */
export function distinctLoads(shaftKw: Float64Array, count: number, name: string): DistinctLoads {
  if (shaftKw.length !== count)
    throw new RangeError(`${name}.shaftKw must have ${count} values like the load series, got ${shaftKw.length}`);
  const wrong = shaftKw.findIndex((kw) => !(kw >= 0 && Number.isFinite(kw)));
  if (wrong >= 0) throw new RangeError(`${name}.shaftKw[${wrong}] must be >= 0, got ${shaftKw[wrong]}`);
  const loads = Float64Array.from(new Set(shaftKw.filter((kw) => kw > 0))).sort();
  const place = new Map<number, number>([[0, 0]]);
  loads.forEach((kw, k) => place.set(kw, k + 1));
  return { loads, index: Uint32Array.from(shaftKw, (kw) => place.get(kw)!) };
}

/** Distinct combinations of several indices over the intervals. */
export interface JointStates {
  /** State of each interval. */
  state: Uint32Array;
  count: number;
  /** Per index given: its value in each state. */
  parts: Uint32Array[];
}

/** Finds the distinct combinations of some indices: what holds in a state is worked out once for all its intervals. */
export function jointStates(indices: ArrayLike<number>[], intervals: number): JointStates {
  let state = new Uint32Array(intervals);
  let first = new Uint32Array(intervals > 0 ? 1 : 0);
  for (const index of indices) {
    const place = new Map<number, number>();
    const joined = new Uint32Array(intervals);
    const firsts: number[] = [];
    let most = 0;
    for (let i = 0; i < intervals; i++) most = Math.max(most, index[i]!);
    for (let i = 0; i < intervals; i++) {
      const key = state[i]! * (most + 1) + index[i]!;
      let found = place.get(key);
      if (found === undefined) {
        found = firsts.push(i) - 1;
        place.set(key, found);
      }
      joined[i] = found;
    }
    state = joined;
    first = Uint32Array.from(firsts);
  }
  return { state, count: first.length, parts: indices.map((index) => first.map((i) => index[i]!)) };
}
