import { useFieldArray, useFormContext } from 'react-hook-form';
import { dayNames } from '../../schemas/motor';
import type { FormMeter } from '../../schemas/plan-form';
import { emptyRule } from '../motors/draft';
import { Button } from '../ui/Button';
import { Field, NumberField, SelectField } from '../ui/Field';
import { FieldError } from '../ui/FieldError';
import { messageAt } from '../ui/form-errors';
import { MeterField } from './BankFields';
import type { PlanDraft } from './draft';
import { SettingRow } from './MotorRows';
import { emptyReplacement } from './part-draft';

interface PartProps {
  index: number;
}

const units = [
  { value: 'hp', label: 'hp' },
  { value: 'kW', label: 'kW' },
];

/** Registration and fault of an entry by its path below a new motor. */
function useEntry(index: number) {
  const { register, formState } = useFormContext<PlanDraft>();
  const path = `replacements.${index}`;
  return (name: string) => ({
    ...register(`${path}.${name}` as 'replacements.0.name'),
    error: messageAt(formState.errors, `${path}.${name}`),
  });
}

function InductionPoints({ index }: PartProps) {
  const entry = useEntry(index);
  const { control, formState } = useFormContext<PlanDraft>();
  const points = useFieldArray({ control, name: `replacements.${index}.induction.points` });
  return (
    <>
      {points.fields.map((point, k) => (
        <div key={point.id} className="part-points">
          <NumberField label="Load" unit="%" size="small" {...entry(`induction.points.${k}.loadPercent`)} />
          <NumberField label="Efficiency" unit="%" size="small" {...entry(`induction.points.${k}.efficiencyPercent`)} />
          <NumberField label="Power factor" size="small" {...entry(`induction.points.${k}.powerFactor`)} />
          {points.fields.length > 2 && (
            <Button kind="quiet" onClick={() => points.remove(k)}>
              Remove point
            </Button>
          )}
        </div>
      ))}
      <FieldError
        fault={messageAt(formState.errors, `replacements.${index}.induction.points`)}
        id={`points-${index}-error`}
      />
      <div className="actions actions-inline">
        <Button
          kind="secondary"
          size="small"
          onClick={() => points.append({ loadPercent: '', efficiencyPercent: '', powerFactor: '' })}
        >
          Add a point
        </Button>
      </div>
    </>
  );
}

function RunningRules({ index }: PartProps) {
  const entry = useEntry(index);
  const { control, register } = useFormContext<PlanDraft>();
  const rules = useFieldArray({ control, name: `replacements.${index}.calendar.rules` });
  return (
    <>
      {rules.fields.map((rule, k) => (
        <div key={rule.id} className="load-rule">
          <div role="group" aria-label={`Days of rule ${k + 1}`} className="load-days">
            {dayNames.map((day) => (
              <label key={day}>
                <input type="checkbox" value={day} {...register(`replacements.${index}.calendar.rules.${k}.days`)} />
                {day}
              </label>
            ))}
          </div>
          <NumberField label="From" unit="h" size="small" {...entry(`calendar.rules.${k}.fromHour`)} />
          <NumberField label="To" unit="h" size="small" {...entry(`calendar.rules.${k}.toHour`)} />
          <NumberField label="Shaft load" size="small" {...entry(`calendar.rules.${k}.load`)} />
          <SelectField
            label="Unit"
            size="small"
            options={[
              { value: 'percent', label: '% of rated' },
              { value: 'kW', label: 'kW' },
            ]}
            {...register(`replacements.${index}.calendar.rules.${k}.unit`)}
          />
          {rules.fields.length > 1 && (
            <Button kind="quiet" onClick={() => rules.remove(k)}>
              Remove rule
            </Button>
          )}
        </div>
      ))}
      <div className="actions actions-inline">
        <Button kind="secondary" size="small" onClick={() => rules.append(emptyRule())}>
          Add a rule
        </Button>
      </div>
    </>
  );
}

function NewPlate({ index }: PartProps) {
  const entry = useEntry(index);
  return (
    <div className="form-grid">
      <NumberField label="Rated output" {...entry('plate.output')} />
      <SelectField label="Unit of the output" options={units} {...entry('plate.outputUnit')} />
      <NumberField label="Voltage" unit="V" {...entry('plate.voltageV')} />
      <NumberField label="Power factor, leading" hint="0.8, 0.9 or 1" {...entry('plate.powerFactor')} />
      <NumberField label="Efficiency" unit="%" {...entry('plate.efficiencyPercent')} />
      <NumberField label="Speed" unit="rpm" {...entry('plate.speedRpm')} />
      <NumberField label="Field current" unit="A" {...entry('plate.fieldCurrentA')} />
      <NumberField label="Field voltage" unit="V" {...entry('plate.fieldVoltageV')} />
    </div>
  );
}

function ReplacementPart(
  props: PartProps & { meters: FormMeter[]; currency: string; seasons: string[]; onRemove: () => void },
) {
  const { index, meters, currency, seasons, onRemove } = props;
  const { watch } = useFormContext<PlanDraft>();
  const entry = useEntry(index);
  const name = watch(`replacements.${index}.name`) || 'the new motor';
  return (
    <div className="plan-part" role="group" aria-label={`New motor ${index + 1}`}>
      <div className="form-grid">
        <Field label="New motor" hint="As it will be named: M-9" {...entry('name')} />
        <NumberField label="Induction motor it replaces, output" {...entry('induction.output')} />
        <SelectField label="Unit" options={units} {...entry('induction.outputUnit')} />
        <MeterField meters={meters} path={`replacements.${index}`} />
        <NumberField label="Motor and its fitting, once" unit={currency} {...entry('cost')} />
      </div>
      <h4>Data sheet of the induction motor</h4>
      <InductionPoints index={index} />
      <h4>When it runs, and at what load</h4>
      <RunningRules index={index} />
      <h4>Plate of the new motor</h4>
      <p className="section-lead">Reactances that are not asked for here are typical values, assumed.</p>
      <NewPlate index={index} />
      <SettingRow
        motor={null}
        name={name}
        path={`replacements.${index}.setting`}
        inputPath={`replacements.${index}`}
        currency={currency}
        seasons={seasons}
      />
      <Button kind="quiet" onClick={onRemove}>
        Remove new motor {index + 1}
      </Button>
    </div>
  );
}

/** New synchronous motors in place of induction motors. */
export function ReplacementFields(props: { meters: FormMeter[]; currency: string; seasons: string[] }) {
  const { control } = useFormContext<PlanDraft>();
  const parts = useFieldArray({ control, name: 'replacements' });
  return (
    <fieldset>
      <legend>A new synchronous motor in place of an induction motor</legend>
      {parts.fields.map((part, index) => (
        <ReplacementPart key={part.id} index={index} onRemove={() => parts.remove(index)} {...props} />
      ))}
      <div className="actions actions-inline">
        <Button kind="secondary" size="small" onClick={() => parts.append(emptyReplacement())}>
          Add a new motor
        </Button>
      </div>
    </fieldset>
  );
}
