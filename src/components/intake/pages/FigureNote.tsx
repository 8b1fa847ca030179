import { useId } from 'react';
import type { LaidFigure } from './FigureLayer';
import type { PageStyle } from './printed';

/** What the figure under the pointer or the keys is taken as and where it would go. */
export function FigureNote({
  looked,
  into,
  alone,
}: {
  looked: LaidFigure | null;
  into: string | null;
  alone: boolean;
}) {
  if (!looked) {
    return (
      <p className="page-note hint">
        {alone
          ? 'Drag a number onto a field of the form in the other window, or click it: it goes into the field that had the focus there.'
          : 'Click a number for the chosen field, or drag it onto one.'}
        {!alone && (
          <span className="max-phone:hidden">
            {' Keys: F2 leads from a field to the numbers, Enter takes one, Escape goes back.'}
          </span>
        )}
      </p>
    );
  }
  const { text, typed, usedIn, line } = looked;
  return (
    <p className="page-note">
      <b className="figure">{text}</b>
      {typed === null ? ' is not read as a number; type it' : typed === text ? '' : ` is taken as ${typed}`}
      {typed !== null && into && !usedIn && <span className="quiet"> goes into {into}</span>}
      {usedIn && <span className="quiet"> stands in {usedIn}</span>}
      {line !== text && <span className="quiet page-line">{line}</span>}
    </p>
  );
}

interface PageStyleFieldsProps {
  style: PageStyle;
  /** What the page shows beyond doubt. */
  shown: { [Key in keyof PageStyle]: PageStyle[Key] | null };
  hasDates: boolean;
  onChange(style: PageStyle): void;
}

/** How the page writes decimals and dates; the person has the last word. */
export function PageStyleFields({ style, shown, hasDates, onChange }: PageStyleFieldsProps) {
  const id = useId();
  const open = [shown.decimal === null && 'decimals', hasDates && shown.dates === null && 'dates'].filter(Boolean);
  return (
    <div className="page-style">
      <label htmlFor={`${id}-decimal`}>Decimals behind a</label>
      <select
        id={`${id}-decimal`}
        className="input input-small"
        value={style.decimal}
        onChange={(event) => onChange({ ...style, decimal: event.target.value as PageStyle['decimal'] })}
      >
        <option value="point">point</option>
        <option value="comma">comma</option>
      </select>
      {hasDates && (
        <>
          <label htmlFor={`${id}-dates`}>dates begin with the</label>
          <select
            id={`${id}-dates`}
            className="input input-small"
            value={style.dates}
            onChange={(event) => onChange({ ...style, dates: event.target.value as PageStyle['dates'] })}
          >
            <option value="day">day</option>
            <option value="month">month</option>
          </select>
        </>
      )}
      {open.length > 0 && <span className="hint">{`the page leaves ${open.join(' and ')} open`}</span>}
    </div>
  );
}
