import type { BillingPeriod } from '../load';

/** One mistake in a schedule: where it stands, what is wrong and what to do. Lines and columns count from 1. */
export interface ScheduleProblem {
  line: number;
  column: number;
  path: string;
  message: string;
  remedy: string;
}

/** A schedule that cannot be read; carries all its problems, in the order of the file. */
export class ScheduleError extends Error {
  readonly problems: ScheduleProblem[];

  constructor(problems: ScheduleProblem[]) {
    super(problems.map(wordProblem).join('\n'));
    this.name = 'ScheduleError';
    this.problems = problems;
  }
}

/** A problem in one line: `12:5 charges.demand.rate: ...`. The caller puts the file's name before it. */
export function wordProblem(problem: ScheduleProblem): string {
  const path = problem.path === '' ? '' : `${problem.path}: `;
  return `${problem.line}:${problem.column} ${path}${problem.message}${problem.remedy === '' ? '' : ` ${problem.remedy}`}`;
}

/** Bills that cannot be priced: what is missing or impossible, in which period. */
export class PriceError extends Error {
  readonly period?: BillingPeriod;

  /** @param about.name  The quantity, rate, contract input or channel the message is about; it becomes the error's `name` */
  constructor(message: string, about: { period?: BillingPeriod; name?: string } = {}) {
    super(message);
    this.name = about.name ?? 'PriceError';
    if (about.period) this.period = about.period;
  }
}
