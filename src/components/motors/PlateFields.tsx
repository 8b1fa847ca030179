import { useFormContext } from 'react-hook-form';
import { NumberField, SelectField, TextAreaField, Field } from '../ui/Field';
import { entryLabels, type MotorDraft } from './draft';
import { messageAt } from '../ui/form-errors';

/** Props of one entry of the form: registration, label and fault by its path. */
export function useEntry() {
  const { register, formState } = useFormContext<MotorDraft>();
  return (path: string) => ({
    ...register(path as keyof MotorDraft),
    label: entryLabels[path] ?? path,
    error: messageAt(formState.errors, path),
  });
}

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
        <div className="grid grid-cols-[1fr_88px] items-start gap-2">
          <NumberField {...entry('plate.output')} />
          <SelectField
            {...entry('plate.outputUnit')}
            label="Unit"
            options={[
              { value: 'hp', label: 'hp' },
              { value: 'kW', label: 'kW' },
            ]}
          />
        </div>
        <NumberField {...entry('plate.voltageV')} unit="V" />
        <NumberField {...entry('plate.currentA')} unit="A" />
        <NumberField {...entry('plate.powerFactor')} hint="0.8, 0.9 or 1" />
        <NumberField {...entry('plate.efficiencyPercent')} unit="%" hint="At rated output" />
        <NumberField {...entry('plate.frequencyHz')} unit="Hz" />
        <NumberField {...entry('plate.speedRpm')} unit="rpm" />
        <NumberField {...entry('plate.poles')} hint="Speed or poles, either will do" />
        <NumberField {...entry('plate.fieldCurrentA')} unit="A" />
        <NumberField {...entry('plate.fieldVoltageV')} unit="V" />
        <NumberField {...entry('plate.fieldResistanceOhm')} unit="ohm" hint="In place of the field voltage" />
      </div>
    </fieldset>
  );
}

/** Exciter and data sheet; what stays empty is filled with a typical value and marked assumed. */
export function DataSheetFields() {
  const entry = useEntry();
  const { watch } = useFormContext<MotorDraft>();
  const brushless = watch('plate.exciterKind') === 'brushless';
  return (
    <fieldset>
      <legend>Exciter and data sheet</legend>
      <p className="section-lead">What stays empty is filled with a typical value and marked as assumed.</p>
      <div className="form-grid">
        <SelectField
          {...entry('plate.exciterKind')}
          options={[
            { value: 'static', label: 'static, by slip rings' },
            { value: 'brushless', label: 'brushless' },
            { value: 'shaft-dc', label: 'exciter with commutator, on the shaft' },
          ]}
        />
        <NumberField {...entry('plate.exciterEfficiencyPercent')} unit="%" />
        {brushless && <NumberField {...entry('plate.exciterFieldA')} unit="A" hint="What the panel shows" />}
        {brushless && <NumberField {...entry('plate.exciterNoLoadA')} unit="A" />}
        <SelectField
          {...entry('plate.rotor')}
          options={[
            { value: 'salient', label: 'salient poles' },
            { value: 'round', label: 'round' },
          ]}
        />
        <NumberField {...entry('plate.xdPu')} unit="pu" />
        <NumberField {...entry('plate.xqPu')} unit="pu" />
        <NumberField {...entry('plate.raPu')} unit="pu" />
        <NumberField {...entry('plate.xlPu')} unit="pu" />
        <div className="whole">
          <TextAreaField
            {...entry('plate.openCircuitCurve')}
            hint="One point a line: field amperes, then volts per unit of rated voltage, as 98 0.92"
          />
        </div>
      </div>
    </fieldset>
  );
}

/** Limits below those of the plate, and how much of them is to stay unused. */
export function LimitFields() {
  const entry = useEntry();
  return (
    <fieldset>
      <legend>Limits and reserve</legend>
      <p className="section-lead">
        Empty means the rated current of the plate, a pull-out of 1.3 times the load and no reserve.
      </p>
      <div className="form-grid">
        <NumberField
          {...entry('plate.limits.fieldCurrentA')}
          unit="A"
          hint="Where exciter or maker allow less than the plate"
        />
        <NumberField {...entry('plate.limits.armatureCurrentA')} unit="A" />
        <NumberField {...entry('plate.limits.pullOutMargin')} hint="Ratio; shock loads want 1.5 and more" />
        <NumberField
          {...entry('plate.limits.reservePercent')}
          unit="%"
          hint="Of the field and stator amperes, kept unused"
        />
      </div>
    </fieldset>
  );
}
