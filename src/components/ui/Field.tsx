import { useId, type ComponentProps, type ReactNode } from 'react';
import { FieldError, toProblem, type FieldFault } from './FieldError';

interface FieldFrame {
  label: ReactNode;
  hint?: ReactNode;
  /** Unit behind the input. */
  unit?: ReactNode;
  error?: FieldFault;
  /** Shown to readers only. */
  labelUnseen?: boolean;
}

interface Wiring {
  id: string;
  'aria-invalid'?: true;
  'aria-describedby'?: string;
}

/** Label, control, hint and error, tied together by ids. */
function Frame(props: FieldFrame & { id?: string; control: (wiring: Wiring) => ReactNode }) {
  const own = useId();
  const id = props.id ?? own;
  const faulty = toProblem(props.error) !== null;
  const described = [props.hint && `${id}-hint`, faulty && `${id}-error`].filter(Boolean).join(' ');
  const control = props.control({
    id,
    'aria-invalid': faulty || undefined,
    'aria-describedby': described || undefined,
  });
  return (
    <div className="field">
      <label htmlFor={id} className={props.labelUnseen ? 'unseen' : undefined}>
        {props.label}
      </label>
      {props.unit ? (
        <div className="field-unit">
          {control}
          <span>{props.unit}</span>
        </div>
      ) : (
        control
      )}
      {props.hint && (
        <p className="hint" id={`${id}-hint`}>
          {props.hint}
        </p>
      )}
      <FieldError fault={props.error} id={`${id}-error`} />
    </div>
  );
}

type Size = { size?: 'small' | 'normal' };
const inputClass = (size: Size['size'], more = '') => `input ${size === 'small' ? 'input-small' : ''} ${more}`.trim();

export type FieldProps = FieldFrame & Size & Omit<ComponentProps<'input'>, 'size'>;

/** Text, e-mail, password, date. Spread react-hook-form's `register(name)` into it. */
export function Field({ label, hint, unit, error, labelUnseen, size, id, ...input }: FieldProps) {
  const frame = { label, hint, unit, error, labelUnseen, id };
  return (
    <Frame {...frame} control={(wiring) => <input type="text" {...input} {...wiring} className={inputClass(size)} />} />
  );
}

/** A number with its unit: text with a numeric keyboard, so that no wheel or arrow changes it by accident. */
export function NumberField({ label, hint, unit, error, labelUnseen, size, id, ...input }: FieldProps) {
  const frame = { label, hint, unit, error, labelUnseen, id };
  return (
    <Frame
      {...frame}
      control={(wiring) => (
        <input
          type="text"
          inputMode="decimal"
          autoComplete="off"
          {...input}
          {...wiring}
          className={inputClass(size, 'input-number')}
        />
      )}
    />
  );
}

export interface SelectOption {
  value: string;
  label: string;
  disabled?: boolean;
}

export type SelectFieldProps = FieldFrame &
  Size &
  Omit<ComponentProps<'select'>, 'size'> & {
    options: SelectOption[];
    /** First line with an empty value: "Choose a schedule". */
    placeholder?: string;
  };

export function SelectField(props: SelectFieldProps) {
  const { label, hint, unit, error, labelUnseen, size, id, options, placeholder, ...select } = props;
  const frame = { label, hint, unit, error, labelUnseen, id };
  return (
    <Frame
      {...frame}
      control={(wiring) => (
        <select {...select} {...wiring} className={inputClass(size)}>
          {placeholder !== undefined && <option value="">{placeholder}</option>}
          {options.map((option) => (
            <option key={option.value} value={option.value} disabled={option.disabled}>
              {option.label}
            </option>
          ))}
        </select>
      )}
    />
  );
}

export type TextAreaFieldProps = FieldFrame & ComponentProps<'textarea'>;

export function TextAreaField({ label, hint, unit, error, labelUnseen, id, ...area }: TextAreaFieldProps) {
  const frame = { label, hint, unit, error, labelUnseen, id };
  return <Frame {...frame} control={(wiring) => <textarea rows={4} {...area} {...wiring} className="input" />} />;
}

export type CheckFieldProps = { label: ReactNode; hint?: ReactNode; error?: FieldFault } & ComponentProps<'input'>;

/** A box to tick, or with `type="radio"` one of several. */
export function CheckField({ label, hint, error, id, ...input }: CheckFieldProps) {
  const own = useId();
  const fieldId = id ?? own;
  const faulty = toProblem(error) !== null;
  const described = [hint && `${fieldId}-hint`, faulty && `${fieldId}-error`].filter(Boolean).join(' ');
  return (
    <div>
      <div className="field-check">
        <input
          type="checkbox"
          {...input}
          id={fieldId}
          aria-invalid={faulty || undefined}
          aria-describedby={described || undefined}
        />
        <label htmlFor={fieldId}>
          {label}
          {hint && (
            <span className="hint block" id={`${fieldId}-hint`}>
              {hint}
            </span>
          )}
        </label>
      </div>
      <FieldError fault={error} id={`${fieldId}-error`} />
    </div>
  );
}
