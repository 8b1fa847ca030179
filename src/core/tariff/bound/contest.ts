import { hull, isPoint, negated, point, type Range } from './range';

/** Values nearer than this share are a tie, whose earlier one stands: the one that stands may be lower by as much, twice for good measure. */
const tieSlack = 2e-12;

/** Who may set a highest or lowest. */
export interface Setters {
  /** Numbers of the cells that may. */
  cells: number[];
  /** Whether there may be none. */
  mayBeNone: boolean;
}

/** Cells that compete for being the highest, or the lowest, each with the range of its value. */
export class Contest {
  private readonly lows: number[] = [];
  private readonly highs: number[] = [];
  private readonly sure: boolean[] = [];
  private readonly days: number[] = [];
  private readonly cells: number[] = [];

  /** @param sign  1: the greatest value wins; -1: the least */
  constructor(private readonly sign: 1 | -1) {}

  /** @param isSure  Whether the cell counts in every case: its condition certainly holds */
  add(cell: number, day: number, value: Range, isSure: boolean): void {
    const { low, high } = this.sign === 1 ? value : negated(value);
    this.lows.push(low);
    this.highs.push(high);
    this.sure.push(isSure);
    this.days.push(day);
    this.cells.push(cell);
  }

  /** The winner's value; 0 where none competes. */
  best(): Range {
    const { lows, highs } = this;
    const top = this.top();
    if (top.isSure) return this.turned({ low: withSlack(top.low, highs), high: top.high });
    const none = point(0);
    return lows.length === 0 ? none : this.turned(hull({ low: lowest(lows), high: top.high }, none));
  }

  /** The mean of the `count` best; on distinct days the best of each day only. */
  meanOfBest(count: number, isDistinctDays: boolean): Range {
    const sure = this.cells.flatMap((_, i) => (this.sure[i] ? [i] : []));
    const field = (of: number[], at: number[]): number[] => this.bestOf(of, at, count, isDistinctDays);
    const lows = field(this.lows, sure);
    if (sure.length === this.cells.length) {
      if (sure.length === 0) return point(0);
      return this.turned({ low: mean(lows), high: mean(field(this.highs, sure)) });
    }
    // A cell that may count can only raise the mean once the list is full without it; before, it may lower it too.
    const all = this.cells.map((_, i) => i);
    const range =
      lows.length === count
        ? { low: mean(lows), high: mean(field(this.highs, all)) }
        : { low: lowest(this.lows), high: this.top().high };
    return this.turned(sure.length === 0 ? hull(range, point(0)) : range);
  }

  /** Cells that may be the winner: those that reach what is certainly reached. */
  setters(): Setters {
    const { low, isSure } = this.top();
    const least = isSure ? low - tieSlack * Math.abs(low) : -Infinity;
    return { cells: this.cells.filter((_, i) => this.highs[i]! >= least), mayBeNone: !isSure };
  }

  private top(): { low: number; high: number; isSure: boolean } {
    let low = -Infinity;
    let high = -Infinity;
    let isSure = false;
    for (let i = 0; i < this.lows.length; i++) {
      if (this.sure[i] && (!isSure || this.lows[i]! > low)) {
        low = this.lows[i]!;
        isSure = true;
      }
      if (this.highs[i]! > high) high = this.highs[i]!;
    }
    return { low, high, isSure };
  }

  private bestOf(values: number[], at: number[], count: number, isDistinctDays: boolean): number[] {
    let contenders = at.map((i) => values[i]!);
    if (isDistinctDays) {
      const byDay = new Map<number, number>();
      for (const i of at) byDay.set(this.days[i]!, Math.max(byDay.get(this.days[i]!) ?? -Infinity, values[i]!));
      contenders = [...byDay.values()];
    }
    return contenders.sort((a, b) => b - a).slice(0, count);
  }

  private turned(range: Range): Range {
    return this.sign === 1 ? range : negated(range);
  }
}

function mean(values: number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

function lowest(values: number[]): number {
  return values.reduce((least, value) => (value < least ? value : least), Infinity);
}

/** What is certainly reached, less the slack of ties; a single value has none. */
function withSlack(low: number, highs: number[]): number {
  return highs.length === 1 && isPoint({ low, high: highs[0]! }) ? low : low - tieSlack * Math.abs(low);
}
