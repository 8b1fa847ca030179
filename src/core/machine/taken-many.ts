/** What a motor takes at each of many loads, and the limit a regulator runs at, by `LIMIT_CODE`. */
export interface TakenMany {
  /** Absorbed. [kvar] */
  kvar: Float64Array;
  inputKw: Float64Array;
  limited: Uint8Array;
}

/** Arrays for so many loads. */
export const newTaken = (count: number): TakenMany => ({
  kvar: new Float64Array(count),
  inputKw: new Float64Array(count),
  limited: new Uint8Array(count),
});
