import { Button } from '../ui/Button';
import type { SelectOption } from '../ui/Field';
import { Mark } from '../ui/Mark';

/** Heads of a table of evidence, all text. */
export function Heads({ heads }: { heads: string[] }) {
  return (
    <thead>
      <tr>
        {heads.map((head) => (
          <th key={head} scope="col" className="left">
            {head}
          </th>
        ))}
      </tr>
    </thead>
  );
}

/** The findings of the tests as one sentence. */
export const sentence = (why: string) =>
  why
    .replace(/^[a-z](?=[a-z ])/, (first) => first.toUpperCase())
    .replace(/; ([A-Z])(?=[a-z ])/g, (_, first: string) => `; ${first.toLowerCase()}`);

interface TestsProps {
  met: number;
  total: number;
  asks: boolean;
  name: string;
  onConfirm: (() => void) | null;
}

/** How many tests a reading of the file meets; one that is not sure asks for a word. */
export function Tests({ met, total, asks, name, onConfirm }: TestsProps) {
  return (
    <td className="left unbroken" data-name="Tests met">
      <span>
        <Mark kind={asks ? 'hollow' : 'filled'} word={`${met} of ${total}`} tone={asks ? 'caution' : 'ink'} />
        {asks && onConfirm && (
          <span className="ml-2">
            <Button kind="quiet" onClick={onConfirm} aria-label={`Confirm ${name}`}>
              Confirm
            </Button>
          </span>
        )}
      </span>
    </td>
  );
}

interface ChoiceProps {
  value: string;
  options: SelectOption[];
  className: string;
  disabled: boolean;
  onChoose: (value: string) => void;
  id?: string;
  label?: string;
}

/** A small select in a row of evidence. */
export function Choice({ value, options, className, disabled, onChoose, id, label }: ChoiceProps) {
  return (
    <select
      id={id}
      className={`input input-small ${className}`}
      aria-label={label}
      value={value}
      disabled={disabled}
      onChange={(event) => onChoose(event.target.value)}
    >
      {options.map((option) => (
        <option key={option.value} value={option.value}>
          {option.label}
        </option>
      ))}
    </select>
  );
}
