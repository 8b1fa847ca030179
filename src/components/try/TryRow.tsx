import { useId, useState, type ReactNode } from 'react';
import { FieldError } from '../ui/FieldError';
import { formatNumber } from '../ui/format';

export interface TryRowProps {
  label: string;
  unit: string;
  /** What is typed; nothing where the field is left to the assumption. */
  typed: string | undefined;
  /** What is taken where nothing is typed. */
  taken?: number | null;
  /** The value is one typed elsewhere: shown, not asked. */
  isFixed?: boolean;
  isAssumed?: boolean;
  words?: ReactNode;
  fault?: string;
  onType: (text: string) => void;
}

const shown = (value: number, unit: string) =>
  formatNumber(value, { upTo: unit === '' ? 4 : Math.abs(value) < 100 ? 2 : 0 });

/** One figure of the form: label, field, unit and how its value came about. What is assumed stands dashed in ochre until it is typed over. */
export function TryRow({ label, unit, typed, taken, isFixed, isAssumed, words, fault, onType }: TryRowProps) {
  const id = useId();
  const [isFocused, setFocused] = useState(false);
  const standing = taken == null ? '' : shown(taken, unit);
  const isTyped = typed !== undefined && typed !== '';
  const described = [words && `${id}-words`, fault && `${id}-fault`].filter(Boolean).join(' ');
  const looksAssumed = isAssumed && !isTyped;
  return (
    <div className="form-row try-row">
      <label htmlFor={id}>{label}</label>
      {isFixed ? (
        <output id={id} className="try-fixed">
          {standing}
        </output>
      ) : (
        <input
          id={id}
          type="text"
          inputMode="decimal"
          autoComplete="off"
          className={`input input-small input-number${looksAssumed && standing ? ' input-assumed' : ''}`}
          value={isTyped ? typed : isFocused ? '' : standing}
          placeholder={standing}
          aria-invalid={fault ? true : undefined}
          aria-describedby={described || undefined}
          onFocus={() => setFocused(true)}
          onBlur={() => setFocused(false)}
          onChange={(event) => onType(event.target.value)}
        />
      )}
      <span className="try-words" id={`${id}-words`}>
        {unit && <b>{unit}</b>}
        {words && <span className="quiet">{looksAssumed && standing ? <>assumed: {words}</> : words}</span>}
      </span>
      <FieldError fault={fault} id={`${id}-fault`} />
    </div>
  );
}
