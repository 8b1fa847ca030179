import { useFormContext } from 'react-hook-form';
import { messageAt } from '../ui/form-errors';
import { Field, NumberField, SelectField } from '../ui/Field';
import { entryLabels, type MotorDraft } from './draft';

/** Props of one entry of the form: registration, label and fault by its path. */
export function useEntry() {
  const { register, formState } = useFormContext<MotorDraft>();
  return (path: string) => ({
    ...register(path as keyof MotorDraft),
    label: entryLabels[path] ?? path,
    error: messageAt(formState.errors, path),
  });
}

const insulation = ['A', 'B', 'F', 'H'].map((letter) => ({ value: letter, label: letter }));

/** What stands on the plate, in the plate's own words and units. */
export function PlateFields() {
  const entry = useEntry();
  return (
    <fieldset>
      <legend>As on the plate</legend>
      <div className="form-grid">
        <Field {...entry('name')} hint="As on the one-line diagram: M-1" />
        <Field {...entry('drives')} hint="Raw mill, compressor, fan" />
        <Field {...entry('plate.source')} hint="Photograph of the plate, data sheet" />
        <div className="grid grid-cols-[1fr_120px] items-start gap-2">
          <NumberField {...entry('plate.output')} />
          <SelectField
            {...entry('plate.outputUnit')}
            label="Unit"
            options={[
              { value: 'hp', label: 'hp, 746 W' },
              { value: 'metric-hp', label: 'PS, CV, 735.5 W' },
              { value: 'kW', label: 'kW' },
            ]}
          />
        </div>
        <NumberField {...entry('plate.voltageV')} unit="V" />
        <NumberField {...entry('plate.currentA')} unit="A" />
        <NumberField {...entry('plate.powerFactor')} hint="0.8, 0.9 or 1" />
        <NumberField {...entry('plate.efficiencyPercent')} unit="%" hint="At rated output" />
        <NumberField {...entry('plate.apparentKva')} unit="kVA" hint="Where the plate states it" />
        <NumberField {...entry('plate.frequencyHz')} unit="Hz" />
        <NumberField {...entry('plate.speedRpm')} unit="rpm" />
        <NumberField {...entry('plate.poles')} hint="Speed or poles, either will do" />
        <NumberField
          {...entry('plate.serviceFactor')}
          hint="Raises no limit by itself: the field’s rating seldom grows with it"
        />
        <NumberField {...entry('plate.temperatureRiseC')} unit="K" />
        <NumberField {...entry('plate.ambientC')} unit="°C" hint="40 where the plate is silent" />
        <SelectField {...entry('plate.insulationClass')} placeholder="not stated" options={insulation} />
      </div>
    </fieldset>
  );
}

/** Field and exciter, in the amperes that plate and panel show. */
export function FieldFields() {
  const entry = useEntry();
  const { watch } = useFormContext<MotorDraft>();
  const brushless = watch('plate.exciterKind') === 'brushless';
  return (
    <fieldset>
      <legend>Field and exciter</legend>
      <p className="section-lead">
        {brushless
          ? 'Plate and panel of a brushless motor show the exciter’s field: its amperes are the ones entered here and shown everywhere. The motor’s own field stays empty where no data sheet gives it.'
          : 'Volts, hot resistance or a resistance measured cold: one of them is needed; more are checked against each other.'}
      </p>
      <div className="form-grid">
        <SelectField
          {...entry('plate.exciterKind')}
          options={[
            { value: 'static', label: 'static, by slip rings' },
            { value: 'brushless', label: 'brushless' },
            { value: 'shaft-dc', label: 'exciter with commutator, on the shaft' },
          ]}
        />
        {brushless && (
          <NumberField {...entry('plate.exciterFieldA')} unit="A" hint="At rated load, as plate and panel show it" />
        )}
        {brushless && (
          <NumberField {...entry('plate.exciterNoLoadA')} unit="A" hint="At rated voltage, where it is known" />
        )}
        <NumberField {...entry('plate.exciterEfficiencyPercent')} unit="%" />
        <NumberField
          {...entry('plate.fieldCurrentA')}
          unit="A"
          hint={brushless ? 'Of the motor’s own field, behind the rectifier' : undefined}
        />
        <NumberField {...entry('plate.fieldVoltageV')} unit="V" />
        <NumberField {...entry('plate.fieldResistanceOhm')} unit="ohm" hint="In place of the field voltage" />
        <NumberField
          {...entry('plate.coldFieldResistanceOhm')}
          unit="ohm"
          hint="Cold, at the rings; brought to ambient plus rise"
        />
        <NumberField {...entry('plate.coldFieldAtC')} unit="°C" hint="Of the winding when it was measured" />
      </div>
    </fieldset>
  );
}
