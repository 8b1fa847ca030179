import { useFormContext, useWatch } from 'react-hook-form';
import { assumptionKeys, type AssumptionKey } from '../../schemas/assumptions';
import { assumptionFigure, assumptionUnit, assumptionWords } from '../ui/assumption-words';
import { Button } from '../ui/Button';
import { NumberField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import { capitalTyped, type PlanDraft } from './draft';
import { ownTyped, usualRange } from './money-draft';

const ownOf = (key: AssumptionKey, draft: PlanDraft) => ownTyped(key, { ...draft, capitalCost: capitalTyped(draft) });

function RangeRow({ name, currency }: { name: AssumptionKey; currency: string }) {
  const { register, formState } = useFormContext<PlanDraft>();
  const draft = useWatch<PlanDraft>() as PlanDraft;
  const own = ownOf(name, draft);
  const { name: label } = assumptionWords[name];
  const field = (end: 'low' | 'high', words: string) => (
    <NumberField
      label={`${label} ${words}`}
      labelUnseen
      size="small"
      placeholder={words}
      {...register(`economics.ranges.${name}.${end}`)}
      error={messageAt(formState.errors, `economics.ranges.${name}.${end}`)}
    />
  );
  return (
    <div className="range-row" role="group" aria-label={label}>
      <span className="range-name">{label}</span>
      <span className="range-own">
        {own === undefined || Number.isNaN(own) ? 'as power prices' : assumptionFigure(name, own)}
      </span>
      {field('low', 'from')}
      {field('high', 'to')}
      <span className="range-unit">{assumptionUnit(name, currency)}</span>
    </div>
  );
}

/** Within which the client may move each assumption on their own page; empty is fixed. */
export function ClientRanges({ currency }: { currency: string }) {
  const { getValues, setValue } = useFormContext<PlanDraft>();
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
        {assumptionKeys.map((key) => (
          <RangeRow key={key} name={key} currency={currency} />
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
