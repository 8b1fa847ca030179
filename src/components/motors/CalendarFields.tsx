import { useFieldArray, useFormContext } from 'react-hook-form';
import { dayNames } from '../../schemas/motor';
import { Button } from '../ui/Button';
import { Field, NumberField, SelectField } from '../ui/Field';
import { FieldError } from '../ui/FieldError';
import { emptyRule, type MotorDraft } from './draft';
import { messageAt } from '../ui/form-errors';

function RuleRow({ index, onRemove }: { index: number; onRemove?: () => void }) {
  const { register, formState } = useFormContext<MotorDraft>();
  const path = `calendar.rules.${index}` as const;
  const fault = (name: string) => messageAt(formState.errors, `${path}.${name}`);
  const dayFault = fault('days');
  return (
    <div className="load-rule">
      <div role="group" aria-label={`Days of rule ${index + 1}`} className="load-days">
        {dayNames.map((day) => (
          <label key={day}>
            <input type="checkbox" value={day} {...register(`${path}.days`)} />
            {day}
          </label>
        ))}
        <FieldError fault={dayFault} id={`${path}.days-error`} />
      </div>
      <NumberField label="From" unit="h" size="small" {...register(`${path}.fromHour`)} error={fault('fromHour')} />
      <NumberField label="To" unit="h" size="small" {...register(`${path}.toHour`)} error={fault('toHour')} />
      <NumberField label="Shaft load" size="small" {...register(`${path}.load`)} error={fault('load')} />
      <SelectField
        label="Unit"
        size="small"
        {...register(`${path}.unit`)}
        options={[
          { value: 'percent', label: '% of rated' },
          { value: 'kW', label: 'kW' },
        ]}
      />
      {onRemove && (
        <Button kind="quiet" onClick={onRemove}>
          Remove rule
        </Button>
      )}
    </div>
  );
}

/** When the motor runs and at what load. */
export function CalendarFields() {
  const { control, register, formState } = useFormContext<MotorDraft>();
  const rules = useFieldArray({ control, name: 'calendar.rules' });
  const shutdowns = useFieldArray({ control, name: 'calendar.shutdowns' });
  const ruleFault = messageAt(formState.errors, 'calendar.rules') ?? messageAt(formState.errors, 'calendar.rules.root');
  return (
    <fieldset>
      <legend>Shaft load over the week</legend>
      <p className="section-lead">
        Hours are local clock hours; 22 to 6 runs over midnight. Hours that no rule names, and a load of 0, are
        standstill. Where two rules meet, the later one holds.
      </p>
      {rules.fields.map((rule, index) => (
        <RuleRow
          key={rule.id}
          index={index}
          onRemove={rules.fields.length > 1 ? () => rules.remove(index) : undefined}
        />
      ))}
      <FieldError fault={ruleFault} id="calendar-rules-error" />
      <div className="actions actions-inline">
        <Button kind="secondary" size="small" onClick={() => rules.append(emptyRule())}>
          Add a rule
        </Button>
        <Button kind="secondary" size="small" onClick={() => shutdowns.append({ from: '', lastDay: '' })}>
          Add a shutdown
        </Button>
      </div>
      {shutdowns.fields.map((range, index) => {
        const path = `calendar.shutdowns.${index}` as const;
        const fault = (name: string) => messageAt(formState.errors, `${path}.${name}`);
        return (
          <div key={range.id} className="load-shutdown">
            <Field label="Stands from" type="date" size="small" {...register(`${path}.from`)} error={fault('from')} />
            <Field
              label="Last day"
              type="date"
              size="small"
              {...register(`${path}.lastDay`)}
              error={fault('lastDay')}
            />
            <Button kind="quiet" onClick={() => shutdowns.remove(index)}>
              Remove shutdown
            </Button>
          </div>
        );
      })}
    </fieldset>
  );
}
