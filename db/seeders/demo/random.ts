/**
 * Repeatable pseudo-random numbers in [0, 1): the "mulberry32" generator, a published public-domain method of 32-bit state.
 */
export function randomFrom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
}

/** A noise that wanders slowly round nought and returns to it: share of its spread kept from step to step is `memory`. */
export function wanderFrom(random: () => number, memory: number): () => number {
  let value = 0;
  const step = Math.sqrt(1 - memory * memory);
  return () => {
    const normal = random() + random() + random() + random() - 2;
    value = memory * value + step * normal * Math.sqrt(3);
    return value;
  };
}
