import { useMemo } from 'react';
import { useFormContext } from 'react-hook-form';
import type { FormMotor } from '../../schemas/plan-form';
import { controlValueKey } from '../../schemas/plan-settings';
import { NumberField, SelectField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import type { PlanDraft } from './draft';
import { loadsOfSpans, rangeWords, remarkOn } from './setting-check';
import { modes, typed, type Mode } from './setting-draft';
import { spanNamesOf } from './span-draft';

/** What a mode begins with: today's field, else what is common practice. */
const firstValue: Record<Mode, string> = {
  'field-current': '',
  'field-voltage': '',
  leading: '0.9',
  lagging: '0.95',
  kvar: '',
  voltage: '100',
  'plant-power-factor': '0.95',
};

interface RowProps {
  /** null: a new motor of the plan, which has no limits to check yet. */
  motor: FormMotor | null;
  name: string;
  /** Path of the setting in the draft, and of its controls in the input. */
  path: `settings.${number}` | `replacements.${number}.setting`;
  inputPath: string;
  currency: string;
  seasons: string[];
}

/** What one motor holds, with a value for each part of the year. */
export function SettingRow({ motor, name, path, inputPath, currency, seasons }: RowProps) {
  const { register, watch, setValue, formState } = useFormContext<PlanDraft>();
  const fault = (at: string) => messageAt(formState.errors, `${inputPath}.${at}`);
  const draft = watch(path);
  const spans = watch('spans');
  const names = spanNamesOf(spans, seasons);
  const mode = modes.find(({ value }) => value === draft.holds)!;
  const key = controlValueKey[draft.holds === 'leading' || draft.holds === 'lagging' ? 'power-factor' : draft.holds];
  const loads = useMemo(
    () => motor && loadsOfSpans(motor.loads, spans, seasons),
    // The draft's own object is the same while its entries change.
    [motor, JSON.stringify(spans), seasons],
  );
  const chooseMode = (holds: Mode) => {
    const first = holds === 'field-current' && motor ? typed(motor.todayA) : firstValue[holds];
    setValue(
      `${path}.values`,
      names.map(() => first),
    );
  };
  const atPanel = holdsAtPanel(motor, draft.holds);
  return (
    <div className="setting-row" role="group" aria-label={name}>
      <div className="setting-grid">
        <SelectField
          label={`${name} holds`}
          options={modes.map(({ value, label }) => ({ value, label }))}
          {...register(`${path}.holds`, {
            onChange: (event: { target: { value: string } }) => chooseMode(event.target.value as Mode),
          })}
          hint={mode.hint}
        />
        {draft.holds === 'voltage' && (
          <NumberField
            label="Droop"
            unit="%"
            {...register(`${path}.droopPercent`)}
            error={fault('controls.0.droopPu')}
          />
        )}
        {draft.holds === 'field-voltage' && (
          <NumberField
            label="Winding at"
            unit="°C"
            hint="Empty: hot"
            {...register(`${path}.fieldC`)}
            error={fault('controls.0.fieldC')}
          />
        )}
        {names.map((span, k) => {
          const value = draft.values[k] ?? draft.values[0] ?? '';
          const remark = motor && loads ? remarkOn(motor, draft, value, loads[k] ?? []) : null;
          const error = (k === 0 ? fault('fieldA') : undefined) ?? fault(`controls.${k}.${key}`);
          return (
            <div key={k}>
              <NumberField
                label={span === '' ? valueLabel(name, mode.value, atPanel) : `${name}, ${span || `part ${k + 1}`}`}
                unit={mode.unit || undefined}
                {...register(`${path}.values.${k}`)}
                error={error ?? (remark?.isFault ? remark.words : undefined)}
              />
              {remark && !remark.isFault && !error && <p className="hint within">{remark.words}</p>}
            </div>
          );
        })}
        {motor && (draft.holds !== 'field-current' || draft.equipmentCost !== '') && (
          <NumberField
            label="Regulator and fitting, once"
            unit={currency}
            {...register(`${path}.equipmentCost`)}
            error={fault('equipmentCost')}
          />
        )}
      </div>
      {motor && <p className="hint">{rangeWords(motor)}</p>}
    </div>
  );
}

const holdsAtPanel = (motor: FormMotor | null, holds: Mode) =>
  holds === 'field-current' && motor?.machine.exciterField !== undefined;

function valueLabel(name: string, mode: Mode, atPanel: boolean): string {
  if (mode === 'field-current') return atPanel ? `Exciter field of ${name}, at the panel` : `Field of ${name}`;
  if (mode === 'field-voltage') return `Field voltage of ${name}`;
  if (mode === 'kvar') return `${name} delivers`;
  if (mode === 'voltage') return 'Set voltage';
  return 'Power factor';
}

/** What every motor of the plant is set to. */
export function MotorRows(props: { motors: FormMotor[]; currency: string; seasons: string[] }) {
  const { motors, currency, seasons } = props;
  const { watch } = useFormContext<PlanDraft>();
  const settings = watch('settings');
  return (
    <fieldset>
      <legend>Motors</legend>
      <p className="section-lead">
        A motor left as it is costs nothing. Limits are checked as you type, at every load of the calendar.
      </p>
      {settings.map(({ motorId }, index) => {
        const motor = motors.find((one) => one.motorId === motorId) ?? null;
        return (
          <SettingRow
            key={motorId}
            motor={motor}
            name={motor?.name ?? `Motor ${motorId}`}
            path={`settings.${index}`}
            inputPath={`fields.${index}`}
            currency={currency}
            seasons={seasons}
          />
        );
      })}
    </fieldset>
  );
}
