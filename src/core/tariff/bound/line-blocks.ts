import { loosened, meet, plus, point, type Range } from './range';

/**
 * Sums of lines that are known closer together than apart: a minimum raises what its lines lack, whatever each of them comes to, and a
 * percentage moves with what it is taken of.
 */
export class LineBlocks {
  private blocks: { lines: Set<number>; range: Range; isMerged: boolean }[] = [];

  /** Adds a line by itself. */
  add(line: number, range: Range): void {
    this.blocks.push({ lines: new Set([line]), range, isMerged: false });
  }

  /** Sum of some lines; nothing where a block holds other lines too. */
  sumOf(lines: readonly number[]): Range | undefined {
    const wanted = new Set(lines);
    const taken = this.blocks.filter(({ lines: own }) => [...own].some((line) => wanted.has(line)));
    if (taken.some(({ lines: own }) => [...own].some((line) => !wanted.has(line)))) return undefined;
    const sum = taken.reduce((whole, { range }) => plus(whole, range), point(0));
    // Lines are added up in their order, blocks are not: the last digits may differ.
    return taken.some(({ isMerged }) => isMerged) ? loosened(sum) : sum;
  }

  /** Adds a line together with those it rests on, whose sum with it is known; apart where a block holds other lines too. */
  addWith(lines: readonly number[], line: number, alone: Range, together: Range): void {
    const sum = this.sumOf(lines);
    if (!sum) {
      this.add(line, alone);
      return;
    }
    const wanted = new Set(lines);
    this.blocks = this.blocks.filter(({ lines: own }) => ![...own].some((one) => wanted.has(one)));
    this.blocks.push({ lines: new Set([...lines, line]), range: meet(plus(sum, alone), together), isMerged: true });
  }

  /** Sum of all lines. */
  total(): Range {
    return loosened(this.blocks.reduce((whole, { range }) => plus(whole, range), point(0)));
  }
}
