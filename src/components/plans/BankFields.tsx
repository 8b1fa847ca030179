import { useFieldArray, useFormContext } from 'react-hook-form';
import type { FormMeter } from '../../schemas/plan-form';
import { Button } from '../ui/Button';
import { Field, NumberField, SelectField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import type { PlanDraft } from './draft';
import { emptyBank } from './part-draft';

/** The meter a part stands behind; nothing to choose where there is one alone. */
export function MeterField({
  meters,
  path,
}: {
  meters: FormMeter[];
  path: `banks.${number}` | `replacements.${number}`;
}) {
  const { register, formState } = useFormContext<PlanDraft>();
  if (meters.length < 2) return null;
  return (
    <SelectField
      label="Behind meter"
      options={meters.map(({ id, label }) => ({ value: String(id), label }))}
      {...register(`${path}.meterId`)}
      error={messageAt(formState.errors, `${path}.meterId`)}
    />
  );
}

function BankRow(props: { index: number; meters: FormMeter[]; currency: string; onRemove: () => void }) {
  const { index, meters, currency, onRemove } = props;
  const { register, formState, watch } = useFormContext<PlanDraft>();
  const path = `banks.${index}` as const;
  const entry = (
    name: 'name' | 'steps' | 'stepKvar' | 'lossWPerKvar' | 'detuningPercent' | 'holdsPowerFactor' | 'cost',
  ) => ({
    ...register(`${path}.${name}`),
    error: messageAt(formState.errors, `${path}.${name}`),
  });
  const { steps, stepKvar } = watch(path);
  const whole = Number(steps) * Number(stepKvar);
  return (
    <div className="plan-part" role="group" aria-label={`Bank ${index + 1}`}>
      <div className="form-grid">
        <Field label="Bank" hint="Where it stands: MCC 2" {...entry('name')} />
        <NumberField label="Steps" {...entry('steps')} />
        <NumberField
          label="Size of a step"
          unit="kvar"
          hint={whole > 0 && Number(steps) > 1 ? `${whole} kvar in all` : undefined}
          {...entry('stepKvar')}
        />
        <NumberField
          label="Controller holds"
          hint="Power factor at the meter, as 0.95; empty: always connected"
          {...entry('holdsPowerFactor')}
        />
        <NumberField
          label="Detuning reactors"
          unit="%"
          hint="5.67, 7 or 14; empty for none"
          {...entry('detuningPercent')}
        />
        <NumberField
          label="Losses"
          unit="W/kvar"
          hint="About 0.5 plain, 4 to 8 with reactors"
          {...entry('lossWPerKvar')}
        />
        <MeterField meters={meters} path={path} />
        <NumberField label="Bank and its fitting, once" unit={currency} {...entry('cost')} />
      </div>
      <Button kind="quiet" onClick={onRemove}>
        Remove bank {index + 1}
      </Button>
    </div>
  );
}

/** The alternative everybody knows: banks of capacitors, fixed or switched. */
export function BankFields({ meters, currency }: { meters: FormMeter[]; currency: string }) {
  const { control } = useFormContext<PlanDraft>();
  const banks = useFieldArray({ control, name: 'banks' });
  return (
    <fieldset>
      <legend>Capacitors instead, or besides</legend>
      {banks.fields.map((bank, index) => (
        <BankRow key={bank.id} index={index} meters={meters} currency={currency} onRemove={() => banks.remove(index)} />
      ))}
      <div className="actions actions-inline">
        <Button kind="secondary" size="small" onClick={() => banks.append(emptyBank())}>
          Add a bank
        </Button>
      </div>
    </fieldset>
  );
}
