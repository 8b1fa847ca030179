import { cloneElement, useId, type ReactElement, type ReactNode } from 'react';
import type { UseFormReturn } from 'react-hook-form';
import { FieldError } from '../ui/FieldError';
import type { Check } from './bill-checks';
import { useBillFieldTarget } from './bill-field-target';
import type { TypedBill } from './typed';

type InputElement = ReactElement<{
  id?: string;
  name?: string;
  'aria-invalid'?: true;
  'aria-describedby'?: string;
}>;

/** The form of a typed bill. */
export type Form = UseFormReturn<TypedBill>;

export const figureProps = { type: 'text', inputMode: 'decimal', autoComplete: 'off' } as const;
export const figureClass = 'input input-small input-number';

/** Heading of a group of rows. */
export function Legend({ children, action }: { children: string; action?: ReactNode }) {
  return (
    <div className="mt-4 mb-1 flex items-baseline justify-between gap-4">
      <h3>{children}</h3>
      {action}
    </div>
  );
}

/** What is said beside a field. */
export function Checks({ checks }: { checks: (Check | null)[] }) {
  const said = checks.filter((check) => check !== null);
  return said.map(({ words, tone }, index) => (
    <span key={words} className={tone ?? undefined}>
      {index > 0 && ', '}
      {words}
    </span>
  ));
}

export interface FormRowProps {
  label: ReactNode;
  unit?: string;
  note?: ReactNode;
  fault?: string;
  children: InputElement;
}

/** Label, control, unit, remark; the fault beneath. The row whose field takes the next number is marked. */
export function FormRow({ label, unit, note, fault, children }: FormRowProps) {
  const id = useId();
  const target = useBillFieldTarget();
  const isTarget = target?.focused?.path !== undefined && target.focused.path === children.props.name;
  return (
    <div className={isTarget ? 'form-row is-target' : 'form-row'}>
      {typeof label === 'string' ? <label htmlFor={id}>{label}</label> : label}
      {cloneElement(children, {
        id,
        'aria-invalid': fault ? true : undefined,
        'aria-describedby': fault ? `${id}-error` : undefined,
      })}
      <span className="hint unit-of-row">{unit}</span>
      <span className="hint">{note}</span>
      <FieldError fault={fault} id={`${id}-error`} />
    </div>
  );
}
