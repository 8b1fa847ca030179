import type { ReactNode } from 'react';
import { Mark } from './Mark';

/** The usual cautions; they stand wherever a setting is shown. */
export const settingCautions: readonly string[] = [
  'These are calculated values. Qualified persons review, set and commission them under the site’s electrical safety rules and local codes.',
  'The manufacturer’s limits prevail over this sheet.',
  'Too much field overheats the rotor while the stator stays cool.',
  'Too little field pulls the motor out of step under load.',
  'At light load the bus voltage rises and the plant may turn leading.',
  'A licensed engineer releases the setting card.',
];

/** What is added wherever a plan has capacitors. */
export const capacitorCaution = 'Capacitors can resonate with harmonics: a harmonic study comes before the purchase.';

export interface CautionProps {
  title?: string;
  /** Sentences of the list; the usual cautions where both this and children are missing. */
  items?: readonly string[];
  children?: ReactNode;
  /** One column of sentences. */
  narrow?: boolean;
}

/** Ochre block with plain sentences. */
export function Caution({ title = 'Before anyone turns a rheostat', items, children, narrow = false }: CautionProps) {
  const sentences = items ?? (children ? [] : settingCautions);
  return (
    <div className={narrow ? 'caution caution-narrow' : 'caution'} role="note">
      <h3>
        <Mark kind="triangle" />
        {title}
      </h3>
      {children}
      {sentences.length > 0 && (
        <ul>
          {sentences.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ul>
      )}
    </div>
  );
}
