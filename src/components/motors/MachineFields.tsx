import { useFormContext } from 'react-hook-form';
import { NumberField, SelectField, TextAreaField } from '../ui/Field';
import type { MotorDraft } from './draft';
import { limitsAtPanel } from './plate-draft';
import { useEntry } from './PlateFields';

function Reactances() {
  const entry = useEntry();
  const { watch } = useFormContext<MotorDraft>();
  const unit = (
    <SelectField
      {...entry('plate.impedanceUnit')}
      options={[
        { value: 'pu', label: 'per unit' },
        { value: 'ohm', label: 'ohms of a phase' },
      ]}
    />
  );
  if (watch('plate.impedanceUnit') !== 'ohm') {
    return (
      <>
        {unit}
        <NumberField {...entry('plate.xdPu')} unit="pu" />
        <NumberField {...entry('plate.xqPu')} unit="pu" />
        <NumberField {...entry('plate.raPu')} unit="pu" hint="Hot" />
      </>
    );
  }
  return (
    <>
      {unit}
      <SelectField
        {...entry('plate.connection')}
        hint="The ohms of a delta count a third"
        options={[
          { value: 'wye', label: 'wye' },
          { value: 'delta', label: 'delta' },
        ]}
      />
      <NumberField {...entry('plate.xdOhm')} unit="ohm" />
      <NumberField {...entry('plate.xqOhm')} unit="ohm" />
      <NumberField {...entry('plate.raOhm')} unit="ohm" />
      <NumberField {...entry('plate.raAtC')} unit="°C" hint="Empty where the sheet gives it hot" />
    </>
  );
}

/** Data sheet; what stays empty is filled with a typical value and marked assumed. */
export function DataSheetFields() {
  const entry = useEntry();
  return (
    <fieldset>
      <legend>Data sheet</legend>
      <p className="section-lead">What stays empty is filled with a typical value and marked as assumed.</p>
      <div className="form-grid">
        <SelectField
          {...entry('plate.rotor')}
          options={[
            { value: 'salient', label: 'salient poles' },
            { value: 'round', label: 'round' },
          ]}
        />
        <Reactances />
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
  const { watch } = useFormContext<MotorDraft>();
  const atPanel = limitsAtPanel(watch('plate'));
  return (
    <fieldset>
      <legend>Limits and reserve</legend>
      <p className="section-lead">
        Empty means the rated currents of the plate, a pull-out of 1.3 times the load and no reserve. The lowest of
        field and exciter counts; no service factor raises it.
      </p>
      <div className="form-grid">
        {atPanel ? (
          <NumberField {...entry('plate.limits.exciterFieldA')} unit="A" hint="Of the exciter’s field, at the panel" />
        ) : (
          <NumberField
            {...entry('plate.limits.fieldCurrentA')}
            unit="A"
            hint="Where the maker allows less than the plate"
          />
        )}
        <NumberField {...entry('plate.limits.exciterOutputA')} unit="A" hint="From the exciter’s own plate" />
        <NumberField {...entry('plate.limits.exciterOutputV')} unit="V" hint="Over the hot field resistance" />
        <NumberField
          {...entry('plate.limits.leastPanelA')}
          unit="A"
          hint={atPanel ? 'Of the exciter’s field, by regulator or maker' : 'By regulator or maker'}
        />
        <NumberField {...entry('plate.limits.armatureCurrentA')} unit="A" />
        <NumberField {...entry('plate.limits.pullOutMargin')} hint="Ratio; shock loads want 1.5 and more" />
        <NumberField
          {...entry('plate.limits.reservePercent')}
          unit="%"
          hint="Of the field and stator amperes, kept unused"
        />
        <NumberField {...entry('plate.limits.voltageLowPu')} unit="pu" hint="Of rated voltage: 0.95" />
        <NumberField {...entry('plate.limits.voltageHighPu')} unit="pu" hint="Every limit holds at both ends" />
      </div>
    </fieldset>
  );
}
