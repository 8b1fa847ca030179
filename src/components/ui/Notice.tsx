import type { ReactNode } from 'react';

export interface Problem {
  /** What is wrong. */
  message: string;
  /** File, sheet, row, column; field; line of a schedule. */
  where?: string;
  /** What to do. */
  remedy?: string;
}

export interface NoticeProps {
  kind?: 'plain' | 'done' | 'fault';
  title: string;
  children?: ReactNode;
  /** Faults listed: what, where, what to do. */
  problems?: Problem[];
}

/** Says what happened. Faults are announced at once, the rest politely. */
export function Notice({ kind = 'plain', title, children, problems = [] }: NoticeProps) {
  return (
    <div className={`notice notice-${kind}`} role={kind === 'fault' ? 'alert' : 'status'}>
      <b>{title}</b>
      {children}
      {problems.length > 0 && (
        <ul>
          {problems.map((problem, index) => (
            <li key={index}>
              {problem.where && <span className="quiet">{problem.where}: </span>}
              {problem.message} {problem.remedy && <b>{problem.remedy}</b>}
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}
