import type { IntakeProblem } from './types';

/** A file that cannot be read as asked; every problem says what is wrong, where, and what to do. */
export class IntakeError extends Error {
  override readonly name = 'IntakeError';
  readonly problems: IntakeProblem[];

  constructor(problems: IntakeProblem[]) {
    super(problems.map((problem) => `${problem.message} (${problem.where}) ${problem.remedy}`).join('\n'));
    this.problems = problems;
  }
}

/** An IntakeError with a single problem. */
export function intakeError(message: string, where: string, remedy: string): IntakeError {
  return new IntakeError([{ message, where, remedy }]);
}
