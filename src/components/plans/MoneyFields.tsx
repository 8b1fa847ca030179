import { useFormContext } from 'react-hook-form';
import { NumberField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import type { PlanDraft } from './draft';

/** Work, upkeep and the assumptions of a plan's money. */
export function MoneyFields({ currency }: { currency: string }) {
  const { register, formState } = useFormContext<PlanDraft>();
  const fault = (path: string) => messageAt(formState.errors, path);
  return (
    <fieldset className="mt-5">
      <legend>Money</legend>
      <div className="form-grid">
        <NumberField
          label="Work at the motors, once"
          unit={currency}
          hint="Visit, tests, protection review"
          {...register('workCost')}
          error={fault('workCost')}
        />
        <NumberField
          label="Upkeep a year"
          unit={currency}
          {...register('yearlyUpkeep')}
          error={fault('yearlyUpkeep')}
        />
        <NumberField
          label="Discount rate"
          unit="% a year"
          {...register('economics.discountPercent')}
          error={fault('economics.discountPercent')}
        />
        <NumberField
          label="Rise of power prices"
          unit="% a year"
          {...register('economics.escalationPercent')}
          error={fault('economics.escalationPercent')}
        />
        <NumberField
          label="Horizon"
          unit="years"
          {...register('economics.horizonYears')}
          error={fault('economics.horizonYears')}
        />
      </div>
    </fieldset>
  );
}
