import { useId } from 'react';
import { useFormContext, useWatch } from 'react-hook-form';
import { assumptionKeys, type AssumptionKey } from '../../schemas/assumptions';
import { assumptionFigure, assumptionUnit, assumptionWords } from '../ui/assumption-words';
import { Button } from '../ui/Button';
import { FieldError } from '../ui/FieldError';
import { messageAt } from '../ui/form-errors';
import { capitalTyped, type PlanDraft } from './draft';
import { ownTyped, usualRange } from './money-draft';

const ownOf = (key: AssumptionKey, draft: PlanDraft) => ownTyped(key, { ...draft, capitalCost: capitalTyped(draft) });

function RangeRow({ name, currency, own }: { name: AssumptionKey; currency: string; own: number | undefined }) {
  const { register, formState } = useFormContext<PlanDraft>();
  const id = useId();
  const { name: label } = assumptionWords[name];
  const path = `economics.ranges.${name}` as const;
  const fault = messageAt(formState.errors, `${path}.low`) ?? messageAt(formState.errors, `${path}.high`);
  const field = (end: 'low' | 'high', words: string) => (
    <input
      className="input input-small input-number"
      type="text"
      inputMode="decimal"
      autoComplete="off"
      aria-label={`${label} ${words}`}
      aria-invalid={fault !== undefined || undefined}
      aria-describedby={fault === undefined ? undefined : id}
      placeholder={words}
      {...register(`${path}.${end}`)}
    />
  );
  return (
    <div className="range-row" role="group" aria-label={`${label}, range`}>
      <span className="range-name">{label}</span>
      <span className="range-own">
        {own === undefined || Number.isNaN(own) ? 'not given' : assumptionFigure(name, own)}
      </span>
      {field('low', 'from')}
      {field('high', 'to')}
      <span className="range-unit">{assumptionUnit(name, currency)}</span>
      <FieldError fault={fault} id={id} />
    </div>
  );
}

/** Within which the client may move each assumption on their own page; empty is fixed. */
export function ClientRanges({ currency }: { currency: string }) {
  const { getValues, setValue } = useFormContext<PlanDraft>();
  const draft = useWatch<PlanDraft>() as PlanDraft;
  // A rise that follows the common one cannot be moved by itself.
  const shown = assumptionKeys.filter((key) => {
    const { low, high } = draft.economics.ranges[key];
    return ownOf(key, draft) !== undefined || low !== '' || high !== '';
  });
  const set = (rangeOf: (key: AssumptionKey) => { low: string; high: string } | null) => {
    for (const key of assumptionKeys) {
      const range = rangeOf(key);
      if (range) setValue(`economics.ranges.${key}`, range, { shouldDirty: true, shouldValidate: false });
    }
  };
  return (
    <>
      <p className="hint">
        On their page the client may move what has a range here and sees at once what changes. The edition itself never
        changes. Empty is fixed.
      </p>
      <div className="range-rows">
        <div className="range-row range-head" aria-hidden="true">
          <span>Assumption</span>
          <span className="range-own">This plan</span>
          <span>From</span>
          <span>To</span>
          <span />
        </div>
        {shown.map((key) => (
          <RangeRow key={key} name={key} currency={currency} own={ownOf(key, draft)} />
        ))}
      </div>
      <div className="actions">
        <Button kind="quiet" onClick={() => set((key) => usualRange(key, ownOf(key, getValues()) ?? NaN))}>
          Offer the usual ranges
        </Button>
        <Button kind="quiet" onClick={() => set(() => ({ low: '', high: '' }))}>
          Fix them all
        </Button>
      </div>
    </>
  );
}
