import type { ReactNode } from 'react';

export interface SumRow {
  label: ReactNode;
  /** Formatted by format.ts, unit included or named in the label. */
  value: ReactNode;
  /** `subtotal`: single rule above; `total`: single above, double below; `strong`: bold. */
  kind?: 'plain' | 'strong' | 'subtotal' | 'total';
  tone?: 'lagging' | 'leading' | 'warn' | 'fault' | 'quiet';
}

export interface ResultSumsProps {
  rows: SumRow[];
  title?: string;
}

/** Sums of the result column. */
export function ResultSums({ rows, title }: ResultSumsProps) {
  return (
    <table className="sums">
      {title && (
        <caption className="text-left">
          <h3>{title}</h3>
        </caption>
      )}
      <tbody>
        {rows.map((row, index) => (
          <tr key={index} className={[row.kind ?? 'plain', row.tone].filter(Boolean).join(' ')}>
            <th scope="row">{row.label}</th>
            <td>{row.value}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
