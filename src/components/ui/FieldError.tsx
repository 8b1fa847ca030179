import { Mark } from './Mark';
import type { Problem } from './Notice';

/** A message, react-hook-form's error, or what, where and remedy apart. */
export type FieldFault = string | { message?: string } | Problem | null | undefined;

export interface FieldErrorProps {
  fault: FieldFault;
  id: string;
}

/** The fault in words, in the catalogue's three parts where they are given. */
export function toProblem(fault: FieldFault): Problem | null {
  if (!fault) return null;
  if (typeof fault === 'string') return { message: fault };
  return fault.message ? { ...fault, message: fault.message } : null;
}

/** Error beneath a field: what, where, what to do. */
export function FieldError({ fault, id }: FieldErrorProps) {
  const problem = toProblem(fault);
  if (!problem) return null;
  return (
    <p className="field-error" id={id} role="alert">
      <Mark kind="diamond" />
      {problem.message} {problem.where && <span className="where">{problem.where}</span>}
      {problem.remedy && <span className="remedy">{problem.remedy}</span>}
    </p>
  );
}
