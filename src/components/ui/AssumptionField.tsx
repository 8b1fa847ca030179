import { useId, useState, type CSSProperties } from 'react';
import { formatNumber } from './format';
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
  decimals?: number;
  onChange: (value: number) => void;
}

/** A payback assumption: number with unit, slider with a tick at the edition's value, ends of the range. */
export function AssumptionField(props: AssumptionFieldProps) {
  const { label, value, editionValue, editionName, min, max, step, unit, decimals = 0, onChange } = props;
  const id = useId();
  const [draft, setDraft] = useState<string | null>(null);
  const share = (at: number) => (100 * (Math.min(max, Math.max(min, at)) - min)) / (max - min);
  const figure = (at: number) => formatNumber(at, { decimals });
  const accept = () => {
    const typed = typedNumber(draft ?? '') ?? NaN;
    if (Number.isFinite(typed)) onChange(Math.min(max, Math.max(min, typed)));
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
          onChange={(event) => onChange(Number(event.target.value))}
        />
        <i
          className="assumption-tick"
          aria-hidden="true"
          style={{ left: `calc(6px + (100% - 12px) * ${share(editionValue) / 100})` }}
        />
      </div>
      <div className="assumption-ends">
        <span>{figure(min)}</span>
        <span>
          {editionName}: {figure(editionValue)}
        </span>
        <span>{figure(max)}</span>
      </div>
    </div>
  );
}
