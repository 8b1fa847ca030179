import { useFieldArray, useFormContext } from 'react-hook-form';
import { Button } from '../ui/Button';
import { Field, SelectField } from '../ui/Field';
import { FieldError } from '../ui/FieldError';
import { messageAt } from '../ui/form-errors';
import type { PlanDraft } from './draft';
import { monthNumbers } from './span-draft';

const monthNames = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

const dayChoices = [
  { value: 'weekday', label: 'Monday to Friday' },
  { value: 'weekend', label: 'Saturday and Sunday' },
  { value: 'every', label: 'Every day' },
  { value: 'mon tue wed thu fri sat', label: 'Monday to Saturday' },
  { value: 'sat', label: 'Saturday' },
  { value: 'sun', label: 'Sunday' },
];

/** The choices, with what was stored by another way than this form. */
const daysOffered = (days: string) =>
  dayChoices.some(({ value }) => value === days) ? dayChoices : [...dayChoices, { value: days, label: days }];

const useFault = () => {
  const { formState } = useFormContext<PlanDraft>();
  return (path: string) => messageAt(formState.errors, path);
};

/** Seasons by months: a month that is ticked leaves the season it was in. */
function SeasonRows() {
  const { control, register, getValues, setValue } = useFormContext<PlanDraft>();
  const rows = useFieldArray({ control, name: 'spans.seasons' });
  const fault = useFault();
  const take = (index: number, month: string, ticked: boolean) => {
    getValues('spans.seasons').forEach((season, other) => {
      if (other !== index && ticked && season.months.includes(month))
        setValue(
          `spans.seasons.${other}.months`,
          season.months.filter((one) => one !== month),
        );
    });
  };
  return (
    <>
      {rows.fields.map((row, index) => (
        <div key={row.id} className="span-row">
          <Field
            label="Season"
            size="small"
            {...register(`spans.seasons.${index}.name`)}
            error={fault(`spans.spans.${index}.name`)}
          />
          <div role="group" aria-label={`Months of season ${index + 1}`} className="load-days">
            {monthNumbers.map((month, k) => (
              <label key={month}>
                <input
                  type="checkbox"
                  value={month}
                  {...register(`spans.seasons.${index}.months`, {
                    onChange: (event: { target: { checked: boolean } }) => take(index, month, event.target.checked),
                  })}
                />
                {monthNames[k]}
              </label>
            ))}
            <FieldError fault={fault(`spans.spans.${index}.months`)} id={`months-${index}-error`} />
          </div>
          {rows.fields.length > 2 && (
            <Button kind="quiet" onClick={() => rows.remove(index)}>
              Remove season
            </Button>
          )}
        </div>
      ))}
      <FieldError fault={fault('spans.spans') ?? fault('spans.spans.root')} id="seasons-error" />
      {rows.fields.length < 6 && (
        <div className="actions actions-inline">
          <Button kind="secondary" size="small" onClick={() => rows.append({ name: '', months: [] })}>
            Add a season
          </Button>
        </div>
      )}
    </>
  );
}

function ShiftRows() {
  const { control, register } = useFormContext<PlanDraft>();
  const rows = useFieldArray({ control, name: 'spans.shifts' });
  const fault = useFault();
  return (
    <>
      {rows.fields.map((row, index) => {
        const at = `spans.spans.${index}`;
        return (
          <div key={row.id} className="span-row span-shift">
            <Field label="Shift" size="small" {...register(`spans.shifts.${index}.name`)} error={fault(`${at}.name`)} />
            <SelectField
              label="Days"
              size="small"
              options={daysOffered(row.days)}
              {...register(`spans.shifts.${index}.days`)}
              error={fault(`${at}.days`)}
            />
            <Field label="From" size="small" {...register(`spans.shifts.${index}.from`)} error={fault(`${at}.from`)} />
            <Field label="To" size="small" {...register(`spans.shifts.${index}.to`)} error={fault(`${at}.to`)} />
            {rows.fields.length > 1 && (
              <Button kind="quiet" onClick={() => rows.remove(index)}>
                Remove shift
              </Button>
            )}
          </div>
        );
      })}
      <div className="span-row">
        <Field label="All other time" size="small" {...register('spans.rest')} error={fault('spans.rest')} />
        <p className="hint">A shift over midnight belongs to the day it begins in; of two that meet the later holds.</p>
      </div>
      {rows.fields.length < 5 && (
        <div className="actions actions-inline">
          <Button
            kind="secondary"
            size="small"
            onClick={() => rows.append({ name: '', days: 'weekday', from: '', to: '' })}
          >
            Add a shift
          </Button>
        </div>
      )}
    </>
  );
}

/** One setting for the year, or settings by season or shift. */
export function SpanFields({ seasons }: { seasons: string[] }) {
  const { register, watch } = useFormContext<PlanDraft>();
  const fault = useFault();
  const by = watch('spans.by');
  return (
    <div className="plan-spans">
      <div className="form-grid">
        <Field label="Name" {...register('name')} error={fault('name')} />
        <SelectField
          label="Settings"
          {...register('spans.by')}
          options={[
            { value: 'year', label: 'One for the year' },
            { value: 'months', label: 'By season, in months' },
            ...(seasons.length > 1 ? [{ value: 'schedule', label: 'By the schedule’s own seasons' }] : []),
            { value: 'clock', label: 'By shift' },
          ]}
          hint={by === 'schedule' ? seasons.join(', ') : undefined}
        />
      </div>
      {by === 'months' && <SeasonRows />}
      {by === 'clock' && <ShiftRows />}
    </div>
  );
}
