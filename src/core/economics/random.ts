/**
 * A stream of uniform numbers from a seed: xoshiro128** 1.1, its state filled by SplitMix32-style mixing of the seed.
 *
 * @param seed  Any 32-bit whole number.
 * @returns Function giving the next number in (0, 1), 32 bits each.
 * @source [BLV] xoshiro128**.
 */
export function uniformStream(seed: number): () => number {
  let mix = seed >>> 0;
  const state = [0, 0, 0, 0].map(() => {
    mix = (mix + 0x9e3779b9) >>> 0;
    let z = mix;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    return (z ^ (z >>> 16)) >>> 0;
  });
  const next = xoshiro128(state as [number, number, number, number]);
  return () => (next() + 0.5) / 4294967296;
}

/** The generator itself: 32-bit outputs from a state of four words, not all zero. */
export function xoshiro128(state: [number, number, number, number]): () => number {
  let [a, b, c, d] = state;
  const rotate = (x: number, k: number) => (x << k) | (x >>> (32 - k));
  return () => {
    const result = Math.imul(rotate(Math.imul(b, 5), 7), 9) >>> 0;
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = rotate(d, 11);
    return result;
  };
}

/** Standard normal numbers from uniform ones. @source [BOX] */
export function normalStream(uniform: () => number): () => number {
  let spare: number | null = null;
  return () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    const radius = Math.sqrt(-2 * Math.log(uniform()));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
}
