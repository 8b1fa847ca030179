import { useId, useState, type CSSProperties } from 'react';
import { typedNumber } from './typed-number';

export interface AssumptionFieldProps {
  label: string;
  value: number;
  /** The value the edition was made with: marked by a tick under the slider. */
  editionValue: number;
  /** "edition 2". */
  editionName: string;
  min: number;
  max: number;
  step: number;
  unit: string;
  /** The figure as it is shown and typed. */
  figure: (value: number) => string;
  onChange: (value: number) => void;
}

/** Why what was typed is not taken as it is; null where it is. */
function refusal(typed: number, min: number, max: number, figure: (value: number) => string): string | null {
  if (!Number.isFinite(typed)) return 'Write a number, as 2.5.';
  if (typed >= min && typed <= max) return null;
  return `It may be moved from ${figure(min)} to ${figure(max)}; taken to the end of it.`;
}

/** A payback assumption: number with unit, slider with a tick at the edition's value, ends of the range. */
export function AssumptionField(props: AssumptionFieldProps) {
  const { label, value, editionValue, editionName, min, max, step, unit, figure, onChange } = props;
  const id = useId();
  const [draft, setDraft] = useState<string | null>(null);
  const [refused, setRefused] = useState<string | null>(null);
  const share = (at: number) => (100 * (Math.min(max, Math.max(min, at)) - min)) / (max - min);
  const accept = () => {
    if (draft === null) return;
    const typed = typedNumber(draft) ?? NaN;
    if (Number.isFinite(typed)) onChange(Math.min(max, Math.max(min, typed)));
    setRefused(refusal(typed, min, max, figure));
    setDraft(null);
  };
  return (
    <div className="assumption">
      <label htmlFor={id}>{label}</label>
      <div className="assumption-value">
        <input
          id={id}
          className="input"
          type="text"
          aria-describedby={`${id}-range`}
          inputMode="decimal"
          value={draft ?? figure(value)}
          onChange={(event) => setDraft(event.target.value)}
          onBlur={accept}
          onKeyDown={(event) => event.key === 'Enter' && accept()}
        />
        <span>{unit}</span>
      </div>
      <div className="assumption-range">
        <input
          className="slider"
          type="range"
          aria-label={`${label}, ${unit}`}
          aria-valuetext={`${figure(value)} ${unit}`}
          min={min}
          max={max}
          step={step}
          value={value}
          style={{ '--share': `${share(value)}%` } as CSSProperties}
          onChange={(event) => {
            setRefused(null);
            onChange(Number(event.target.value));
          }}
        />
        <i
          className="assumption-tick"
          aria-hidden="true"
          style={{ left: `calc(6px + (100% - 12px) * ${share(editionValue) / 100})` }}
        />
      </div>
      <p className="assumption-limit" role="status">
        {refused}
      </p>
      <div className="assumption-ends" id={`${id}-range`}>
        <span>{figure(min)}</span>
        <span>
          {editionName}: {figure(editionValue)}
        </span>
        <span>{figure(max)}</span>
      </div>
    </div>
  );
}
