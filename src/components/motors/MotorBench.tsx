import { useDeferredValue, useMemo, useState } from 'react';
import type { MotorView } from '../../schemas/motor';
import { FieldControlFigure } from '../charts/FieldControlChart';
import { LossFigure } from '../charts/LossChart';
import { PqPlaneFigure } from '../charts/PqPlaneChart';
import { VCurveFigure } from '../charts/VCurveChart';
import { vCurveEnds } from '../charts/v-curve';
import { NumberField } from '../ui/Field';
import { formatDelivered, formatDelivers, formatNumber, formatQuantity } from '../ui/format';
import { Notice } from '../ui/Notice';
import { typedNumber } from '../ui/typed-number';
import { fieldControlData, fieldControlFinding } from './control-lines';
import { settingReading, vCurveData, type NamedField, type SettingReading } from './curves';
import { fieldMeter, type FieldMeter } from './field-meter';
import { lossData, lossFinding } from './loss-data';
import { planeData, planeFinding } from './plane';

export interface MotorBenchProps {
  motor: MotorView;
  plan: NamedField | null;
}

function vCurveFinding(motor: MotorView, meter: FieldMeter, tried: SettingReading | null, fieldA: number): string {
  const { fieldBy } = motor.limits;
  const spare = meter.shownA(motor.limits.fieldA) - meter.shownA(fieldA);
  const at = `At ${formatQuantity(motor.usualLoadPercent, '%')} load, ${meter.words(fieldA)}`;
  if (!tried) return `${at} is too little: the motor falls out of step.`;
  if (tried.beyond.length > 0) return `${at} lies beyond the limit of ${tried.beyond.join(' and ')}.`;
  return `${at} stays ${formatQuantity(spare, 'A', { upTo: meter.decimals })} under the limit of the ${fieldBy}.`;
}

/** What the meters would show at the setting being tried. */
function Readings({ motor, reading }: { motor: MotorView; reading: SettingReading }) {
  const share = (value: number, limit: number) => `${formatNumber((100 * value) / limit)} % of its limit`;
  const entries: [string, string, string][] = [
    [
      'Reactive power',
      `${formatDelivered(reading.kvarDelivered)} kvar`,
      reading.kvarDelivered < 0 ? 'lagging' : 'leading',
    ],
    ['Stator', formatQuantity(reading.armatureA, 'A'), share(reading.armatureA, motor.limits.armatureA)],
    [
      'Pull-out over load',
      formatNumber(reading.pullOut, { decimals: 2 }),
      `at least ${formatNumber(motor.limits.pullOutMargin, { upTo: 2 })}`,
    ],
    [
      'Losses',
      formatQuantity(reading.lossesKw, 'kW', { decimals: 1 }),
      `${formatNumber(reading.extraLossKw, { decimals: 1, signed: true })} kW against today`,
    ],
    [
      'Per kvar gained',
      reading.wattsPerKvar === null ? 'none gained' : formatQuantity(reading.wattsPerKvar, 'W', { decimals: 1 }),
      'mean from today',
    ],
  ];
  return (
    <dl className="bench-readings" aria-live="polite">
      {entries.map(([label, figure, note]) => (
        <div key={label}>
          <dt>{label}</dt>
          <dd>
            <b>{figure}</b>
            <small>{note}</small>
          </dd>
        </div>
      ))}
    </dl>
  );
}

/** Pictures that follow the setting being tried, a moment behind it where they take longer to work out. */
function Pictures({ motor, tried }: { motor: MotorView; tried: NamedField | null }) {
  const plane = useMemo(() => planeData(motor, tried), [motor, tried]);
  const controls = useMemo(
    () => fieldControlData(motor, tried ?? { name: 'today', fieldA: motor.fieldTodayA }),
    [motor, tried],
  );
  const losses = useMemo(() => lossData(motor, tried), [motor, tried]);
  return (
    <>
      <PqPlaneFigure
        {...plane}
        finding={planeFinding(motor, tried)}
        reading={`Squares of ${formatNumber(plane.squareKw)} kW by ${formatNumber(plane.squareKvar)} kvar, their size the hours of the year spent there: filled absorbs, outlined delivers.`}
        fileName={`${motor.name}-capability`}
      />
      <FieldControlFigure
        {...controls}
        finding={fieldControlFinding(controls)}
        reading="Each control set to agree at the usual load. Held volts drive more current through a cold winding."
        fileName={`${motor.name}-field-controls`}
      />
      {losses && (
        <LossFigure
          {...losses}
          finding={lossFinding(losses)}
          reading="Drawn through: what one more kvar costs. Dashed: the mean of those gained since today."
          fileName={`${motor.name}-loss-per-kvar`}
        />
      )}
    </>
  );
}

/** The field current that can be typed, in the amperes its ammeter shows. */
function TypedField({ motor, meter, fieldA, onField }: FieldSetting) {
  const [typed, setTyped] = useState<string | null>(null);
  const accept = () => {
    const shown = typedNumber(typed ?? '');
    const wanted = shown === undefined ? NaN : meter.fieldA(shown);
    if (wanted >= 0 && wanted <= 2 * motor.machine.ratedFieldCurrentA) onField(wanted);
    setTyped(null);
  };
  return (
    <div className="bench-setting">
      <NumberField
        label={`Try ${meter.name === 'Field current' ? 'a field current' : 'an exciter field current'}`}
        unit="A"
        hint="Or drag along the V-curves; arrow keys on the mark"
        value={typed ?? formatNumber(meter.shownA(fieldA), { upTo: meter.decimals })}
        onChange={(event) => setTyped(event.target.value)}
        onBlur={accept}
        onKeyDown={(event) => event.key === 'Enter' && accept()}
      />
    </div>
  );
}

interface FieldSetting {
  motor: MotorView;
  meter: FieldMeter;
  fieldA: number;
  onField: (fieldA: number) => void;
}

function useTried(motor: MotorView, plan: NamedField | null) {
  const [fieldA, onField] = useState(plan?.fieldA ?? motor.fieldTodayA);
  const name = plan && fieldA === plan.fieldA ? plan.name : 'tried';
  const tried = useMemo(
    () => (fieldA === motor.fieldTodayA ? null : { name, fieldA }),
    [fieldA, motor.fieldTodayA, name],
  );
  return { fieldA, onField, tried };
}

/** The pictures of a motor with a field current that can be tried, computed in the browser. */
export function MotorBench({ motor, plan }: MotorBenchProps) {
  const { fieldA, onField, tried } = useTried(motor, plan);
  const meter = useMemo(() => fieldMeter(motor.machine), [motor]);
  const curves = useMemo(() => vCurveData(motor, null), [motor]);
  const reading = useMemo(() => settingReading(motor, fieldA), [motor, fieldA]);
  const behind = useDeferredValue(tried);
  const shown = meter.shownA(fieldA);
  const mark = tried && reading ? { fieldA: shown, armatureA: reading.armatureA } : null;
  const [least, most] = vCurveEnds(curves).field;
  return (
    <div className="motor-bench">
      <div className="figure-pair">
        <VCurveFigure
          {...curves}
          plan={mark}
          planName={tried?.name}
          finding={vCurveFinding(motor, meter, reading, fieldA)}
          reading="V-curves at constant shaft load. Solid copper lags, dashed verdigris leads, dotted is unity power factor. Drag to try a field."
          fileName={`${motor.name}-v-curves`}
          drag={{
            value: shown,
            least,
            most,
            step: meter.stepA,
            label: `${meter.name} of ${motor.name}, A`,
            words: `${meter.words(fieldA)}, ${reading ? `${formatDelivers(reading.kvarDelivered)} at ${formatQuantity(motor.usualLoadPercent, '%')} load` : 'falls out of step'}`,
            onChange: (value) => onField(meter.fieldA(value)),
          }}
        />
        <Pictures motor={motor} tried={behind} />
      </div>
      <TypedField motor={motor} meter={meter} fieldA={fieldA} onField={onField} />
      {reading ? (
        <Readings motor={motor} reading={reading} />
      ) : (
        <Notice
          kind="fault"
          title={`${meter.words(fieldA)} cannot hold ${formatQuantity(motor.usualShaftKw, 'kW')}: the motor falls out of step.`}
        />
      )}
      {reading && reading.beyond.length > 0 && (
        <Notice kind="fault" title={`Not admissible: beyond the limit of ${reading.beyond.join(' and ')}.`}>
          <span>It can be looked at here; no plan takes it.</span>
        </Notice>
      )}
    </div>
  );
}
