import { useFormContext } from 'react-hook-form';
import { defaultDepreciationYears } from '../../schemas/assumptions';
import { NumberField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import type { PlanDraft } from './draft';
import { Folded } from './Folded';
import { ClientRanges } from './ClientRanges';

/** A number of the form at its path, with its fault. */
function Entry({ path, ...field }: { path: Parameters<Register>[0]; label: string; unit: string; hint?: string }) {
  const { register, formState } = useFormContext<PlanDraft>();
  return <NumberField {...field} {...register(path)} error={messageAt(formState.errors, path)} />;
}
type Register = ReturnType<typeof useFormContext<PlanDraft>>['register'];

/** Rises by group of charges, upkeep, incentive and tax: what only some plans need. */
function FinerFields({ currency }: { currency: string }) {
  const common = 'Empty: as power prices';
  return (
    <div className="form-grid">
      <Entry path="economics.energyRisePercent" label="Rise of energy charges" unit="% a year" hint={common} />
      <Entry path="economics.demandRisePercent" label="Rise of demand charges" unit="% a year" hint={common} />
      <Entry path="economics.reactiveRisePercent" label="Rise of reactive charges" unit="% a year" hint={common} />
      <Entry path="economics.fixedRisePercent" label="Rise of fixed charges" unit="% a year" hint={common} />
      <Entry path="economics.upkeepGrowthPercent" label="Rise of upkeep" unit="% a year" hint="Empty: none" />
      <Entry
        path="economics.incentive"
        label="Incentive"
        unit={currency}
        hint="Grant or rebate, when the work is done"
      />
      <Entry path="economics.taxPercent" label="Tax rate" unit="%" hint="On what is saved; empty: before tax" />
      <Entry
        path="economics.depreciationYears"
        label="Work written off over"
        unit="years"
        hint={`Evenly; empty: ${defaultDepreciationYears}`}
      />
    </div>
  );
}

/** How far each input may be off: what the band and the ranking are drawn from. */
function SpreadFields() {
  return (
    <>
      <p className="hint">
        One standard deviation: two of three times the value lies within it. The band of the payback and the list of
        what moves it come from these.
      </p>
      <div className="form-grid">
        <Entry path="economics.spread.savingPercent" label="Saving" unit="%" hint="Model and measurement" />
        <Entry path="economics.spread.hoursPercent" label="Operating hours" unit="%" />
        <Entry path="economics.spread.workPercent" label="Work" unit="%" />
        <Entry path="economics.spread.upkeepPercent" label="Upkeep" unit="%" />
        <Entry path="economics.spread.energyRisePoints" label="Rise of energy charges" unit="points" />
        <Entry
          path="economics.spread.demandRisePoints"
          label="Rise of other charges"
          unit="points"
          hint="Demand, reactive and fixed"
        />
      </div>
    </>
  );
}

/** Work, upkeep and the assumptions of a plan's money: five that every plan needs, the rest folded. */
export function MoneyFields({ currency }: { currency: string }) {
  return (
    <fieldset className="mt-5 money-fields">
      <legend>Money</legend>
      <div className="form-grid">
        <Entry
          path="workCost"
          label="Work at the motors, once"
          unit={currency}
          hint="Visit, tests, protection review"
        />
        <Entry path="yearlyUpkeep" label="Upkeep a year" unit={currency} />
        <Entry path="economics.discountPercent" label="Discount rate" unit="% a year" />
        <Entry path="economics.escalationPercent" label="Rise of power prices" unit="% a year" />
        <Entry path="economics.horizonYears" label="Horizon" unit="years" />
      </div>
      <Folded
        title="Rises by charge, incentive, tax"
        paths={[
          'economics.energyRisePercent',
          'economics.demandRisePercent',
          'economics.reactiveRisePercent',
          'economics.fixedRisePercent',
          'economics.upkeepGrowthPercent',
          'economics.incentive',
          'economics.taxPercent',
          'economics.depreciationYears',
        ]}
      >
        <FinerFields currency={currency} />
      </Folded>
      <Folded title="How sure the figures are" paths={['economics.spread']}>
        <SpreadFields />
      </Folded>
      <Folded title="What the client may move" paths={['economics.ranges']}>
        <ClientRanges currency={currency} />
      </Folded>
    </fieldset>
  );
}
