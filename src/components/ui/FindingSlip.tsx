import type { ReactNode } from 'react';
import { Mark, type MarkProps } from './Mark';

export interface FindingSlipProps {
  /** Letter or number, the same as at the row's end. */
  letter?: string;
  title: string;
  /** Formatted amount with its currency. */
  amount?: string;
  state?: MarkProps;
  /** Ochre instead of madder. */
  caution?: boolean;
  children?: ReactNode;
}

/** One finding in the result column. */
export function FindingSlip({ letter, title, amount, state, caution = false, children }: FindingSlipProps) {
  return (
    <article className="slip">
      <h3>
        {letter && (
          <span className={caution ? 'finding-letter finding-letter-caution' : 'finding-letter'}>{letter}</span>
        )}
        {title}
      </h3>
      {amount && <p className="amount">{amount}</p>}
      {children && <p>{children}</p>}
      {state && <Mark {...state} />}
    </article>
  );
}
