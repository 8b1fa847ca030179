import type { LineCounter } from 'yaml';
import { ScheduleError, type ScheduleProblem } from '../errors';
import { FormulaMistake } from '../formula/tokens';

/** Anything that has a place in the file. */
export interface Placed {
  offset: number;
  path: string;
}

/**
 * Gathers the problems of a file: all of them at once, at most one for each entry, in the order of the file.
 */
export class Problems {
  private readonly found = new Map<string, ScheduleProblem & { offset: number }>();

  constructor(private readonly lines: LineCounter) {}

  /** Notes a problem unless its entry (`charges.demand`) has one already. */
  add(at: Placed, message: string, remedy: string): void {
    const entry = entryPath(at.path);
    const key = entry.includes('.') ? entry : `${entry}@${at.offset}:${message}`;
    if (this.found.has(key)) return;
    const { line, col } = this.lines.linePos(at.offset);
    this.found.set(key, { line, column: col, path: at.path, message, remedy, offset: at.offset });
  }

  /** Notes a mistake inside a formula, pointing into it. */
  addMistake(at: Placed, textOffset: number, mistake: FormulaMistake): void {
    this.add({ offset: textOffset + mistake.offset, path: at.path }, mistake.message, mistake.remedy);
  }

  /** Line of an offset, counted from 1. */
  lineOf(offset: number): number {
    return this.lines.linePos(offset).line;
  }

  get isEmpty(): boolean {
    return this.found.size === 0;
  }

  /** @throws {ScheduleError} if there are any */
  throwIfAny(): void {
    if (this.isEmpty) return;
    const sorted = [...this.found.values()].sort((a, b) => a.offset - b.offset);
    throw new ScheduleError(
      sorted.map(({ line, column, path, message, remedy }) => ({ line, column, path, message, remedy })),
    );
  }
}

/** `charges.demand` of `charges.demand.tiers.2`; of a version `versions.2026-07-01.charges.demand`. */
function entryPath(path: string): string {
  const parts = path.split('.');
  return parts.slice(0, parts[0] === 'versions' ? 4 : 2).join('.');
}
