import { useState } from 'react';
import { addMonths } from '../../core/load';
import { fromDateNumber, type ContractField } from '../../schemas/tariff';
import type { TryField, TryView } from '../../schemas/try-out';
import { CheckField, Field, SelectField } from '../ui/Field';
import { formatNumber } from '../ui/format';
import { dayBehind, isWholeMonth, lastDayOf, monthOptions, type TryDraft } from './draft';
import { TryRow } from './TryRow';

export interface TryFormProps {
  draft: TryDraft;
  view: TryView;
  faults: Record<string, string>;
  today: string;
  onChange: (changes: TryDraft) => void;
}

const otherDates = 'other';

/** The bill's period: a calendar month, or any other dates. */
export function PeriodRows({ draft, faults, today, onChange }: TryFormProps) {
  const [isOther, setOther] = useState(!isWholeMonth(draft));
  const choose = (value: string) => {
    setOther(value === otherDates);
    if (value !== otherDates) onChange({ from: value, to: addMonths(value, 1) });
  };
  const options = [...monthOptions(today, draft), { value: otherDates, label: 'other dates' }];
  return (
    <div className="form-grid try-period">
      <SelectField
        label="Bill of"
        options={options}
        value={isOther ? otherDates : draft.from}
        error={isOther ? undefined : (faults.from ?? faults.to)}
        onChange={(event) => choose(event.target.value)}
      />
      {isOther && (
        <>
          <Field
            type="date"
            label="From"
            value={draft.from ?? ''}
            error={faults.from}
            onChange={(event) => onChange({ from: event.target.value })}
          />
          <Field
            type="date"
            label="To, last day included"
            value={lastDayOf(draft.to ?? '')}
            error={faults.to}
            onChange={(event) => onChange({ to: dayBehind(event.target.value) })}
          />
        </>
      )}
    </div>
  );
}

/** The four figures a bill on the telephone has, and the power factor aimed at. */
export function QuickRows({ draft, view, faults, onChange }: TryFormProps) {
  const row = (key: string, label: string, unit: string, more: { taken?: number | null; words?: string } = {}) => (
    <TryRow
      key={key}
      label={label}
      unit={unit}
      typed={draft[key]}
      fault={faults[key]}
      onType={(text) => onChange({ [key]: text })}
      {...more}
    />
  );
  const { kvarh, pf } = view.whole;
  return (
    <div className="form-rows">
      {row('kwh', 'Energy', 'kWh')}
      {row('kw', 'Peak demand', 'kW')}
      {row('pf', 'Average power factor', '', { taken: pf, words: draft.pf ? 'lagging' : 'or type the kvarh' })}
      {row('kvarh', 'Reactive energy', 'kvarh', { taken: kvarh, words: draft.kvarh ? '' : 'or type the power factor' })}
      {row('target', 'Field raised to power factor', '', { taken: view.target, words: 'the second column' })}
    </div>
  );
}

/** What the schedule measures, with what is taken for it. */
export function MeasuredRows({
  fields,
  draft,
  faults,
  onChange,
}: Omit<TryFormProps, 'view' | 'today'> & { fields: TryField[] }) {
  return (
    <div className="form-rows">
      {fields.map(({ key, label, unit, value, state, words }) => (
        <TryRow
          key={key}
          label={label}
          unit={unit}
          typed={draft[key]}
          taken={value}
          isFixed={state === 'fixed'}
          isAssumed={state === 'assumed'}
          words={words}
          fault={faults[key]}
          onType={(text) => onChange({ [key]: text })}
        />
      ))}
    </div>
  );
}

function ContractRow({
  field,
  draft,
  faults,
  onChange,
}: Omit<TryFormProps, 'view' | 'today'> & { field: ContractField }) {
  const key = `c.${field.name}`;
  if (field.kind === 'flag') {
    return (
      <CheckField
        label={field.label}
        checked={(draft[key] ?? String(field.default ?? 0)) === '1'}
        error={faults[key]}
        onChange={(event) => onChange({ [key]: event.target.checked ? '1' : '0' })}
      />
    );
  }
  if (field.kind === 'date') {
    return (
      <Field
        type="date"
        label={field.label}
        value={draft[key] ?? (field.default === null ? '' : fromDateNumber(field.default))}
        error={faults[key]}
        onChange={(event) => onChange({ [key]: event.target.value })}
      />
    );
  }
  const range = field.range && field.range.map((end) => formatNumber(end, { upTo: 4 })).join(' to ');
  return (
    <TryRow
      label={field.label}
      unit={field.unit}
      typed={draft[key]}
      taken={field.default}
      isAssumed
      words={draft[key] ? range : `the schedule's own value${range ? `; ${range}` : ''}`}
      fault={faults[key]}
      onType={(text) => onChange({ [key]: text })}
    />
  );
}

/** What the contract supplies. */
export function ContractRows({ view, ...form }: Omit<TryFormProps, 'today'>) {
  if (view.contract.length === 0) return null;
  return (
    <div className="form-rows">
      {view.contract.map((field) => (
        <ContractRow key={field.name} field={field} {...form} />
      ))}
    </div>
  );
}
