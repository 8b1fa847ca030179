import type { UseFormReturn } from 'react-hook-form';
import type { ContractField, HistoryField } from '../../schemas/tariff';
import { CheckField, Field, NumberField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import { formatCount, formatNumber } from '../ui/format';
import type { ChoiceDraft } from './choice-draft';

type Form = UseFormReturn<ChoiceDraft>;

function rangeWords({ range, unit, default: usual }: ContractField): string {
  const number = (value: number) => formatNumber(value, { upTo: 6 });
  const words = [
    range && `${number(range[0])} to ${number(range[1])}${unit ? ` ${unit}` : ''}`,
    usual !== null && `${number(usual)} if left empty`,
  ];
  return words.filter(Boolean).join('; ');
}

/** Field of one contract input. */
export function ContractInput({ field, form }: { field: ContractField; form: Form }) {
  const name = `contract.${field.name}` as const;
  const error = messageAt(form.formState.errors, name);
  if (field.kind === 'flag') return <CheckField label={field.label} error={error} {...form.register(name)} />;
  if (field.kind === 'date') return <Field type="date" label={field.label} error={error} {...form.register(name)} />;
  return (
    <NumberField
      label={field.label}
      unit={field.unit || undefined}
      hint={rangeWords(field)}
      error={error}
      {...form.register(name)}
    />
  );
}

interface HistoryInputProps {
  field: HistoryField;
  form: Form;
  /** Month which the last value stands for: "Oct 2025". */
  monthBefore: string | null;
}

/** Field of a series of earlier months. */
export function HistoryInput({ field, form, monthBefore }: HistoryInputProps) {
  const name = `history.${field.name}` as const;
  const last = monthBefore ? ` The last stands for ${monthBefore}.` : '';
  return (
    <div className="whole">
      <Field
        label={`${field.label} of earlier months${field.unit ? `, ${field.unit}` : ''}`}
        hint={`Oldest first, blanks between: 5,210 5,340 4,980.${last} The schedule looks back ${formatCount(field.months, 'month')}; older ones help to find a ratchet that was not released.`}
        error={messageAt(form.formState.errors, name)}
        {...form.register(name)}
      />
    </div>
  );
}
