/** Numbers that look drawn by lot and are the same in every run of a seed (xorshift32; Marsaglia, J. Stat. Softw. 8, 14, 2003). */
export class Lot {
  private state: number;

  constructor(seed: number) {
    this.state = seed | 0 || 1;
  }

  /** A whole number below `limit`. */
  below(limit: number): number {
    this.state ^= this.state << 13;
    this.state ^= this.state >>> 17;
    this.state ^= this.state << 5;
    return Math.floor(((this.state >>> 0) / 2 ** 32) * limit);
  }

  /** One of a list. */
  of<T>(list: readonly T[]): T {
    return list[this.below(list.length)] as T;
  }
}
