import { useMemo, useState } from 'react';
import { panelCurrentA } from '../../core/machine';
import type { MotorView } from '../../schemas/motor';
import { CapabilityFigure } from '../charts/CapabilityChart';
import { VCurveFigure } from '../charts/VCurveChart';
import { formatDelivered, formatNumber, formatQuantity } from '../ui/format';
import { NumberField } from '../ui/Field';
import { Notice } from '../ui/Notice';
import { capabilityData, settingReading, vCurveData, type NamedField, type SettingReading } from './curves';
import { typedNumber } from '../ui/typed-number';

export interface MotorBenchProps {
  motor: MotorView;
  plan: NamedField | null;
}

function vCurveFinding(motor: MotorView, tried: SettingReading | null, fieldA: number): string {
  const spare = motor.limits.fieldA - fieldA;
  const at = `At ${formatQuantity(motor.usualLoadPercent, '%')} load, ${formatQuantity(fieldA, 'A', { upTo: 1 })}`;
  if (!tried) return `${at} is too little: the motor falls out of step.`;
  if (tried.beyond.length > 0) return `${at} lies beyond the limit of ${tried.beyond.join(' and ')}.`;
  return `${at} stays ${formatQuantity(spare, 'A', { upTo: 1 })} under the field limit.`;
}

function capabilityFinding(motor: MotorView): string {
  const { kvarDelivered, binding } = motor.capability;
  const load = formatQuantity(motor.usualLoadPercent, '%');
  if (kvarDelivered === null) return `At ${load} load no setting is admissible: ${binding} is the limit.`;
  const verb = kvarDelivered < 0 ? 'must absorb' : 'may deliver up to';
  return `At ${load} load ${motor.name} ${verb} ${formatQuantity(Math.abs(kvarDelivered), 'kvar')}; ${binding === 'armature' ? 'the stator' : binding === 'field' ? 'the field' : 'pull-out'} is the limit.`;
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

/** V-curves and capability of a motor with a field current that can be tried, computed in the browser. */
export function MotorBench({ motor, plan }: MotorBenchProps) {
  const start = plan?.fieldA ?? motor.fieldTodayA;
  const [fieldA, setFieldA] = useState(start);
  const [typed, setTyped] = useState<string | null>(null);
  const base = useMemo(() => ({ curves: vCurveData(motor, null), plane: capabilityData(motor, null) }), [motor]);
  const reading = useMemo(() => settingReading(motor, fieldA), [motor, fieldA]);
  const name = plan && fieldA === plan.fieldA ? plan.name : 'tried';
  const mark = fieldA === motor.fieldTodayA ? null : { name, fieldA };
  const plane = useMemo(
    () => (mark ? capabilityData(motor, mark) : base.plane),
    [motor, base, mark?.name, mark?.fieldA],
  );
  const highest = Math.ceil(motor.machine.ratedFieldCurrentA * 1.1);
  const accept = () => {
    const value = typedNumber(typed ?? '');
    if (value !== undefined && value > 0 && value <= 2 * highest) setFieldA(value);
    setTyped(null);
  };
  const panel = motor.machine.exciterField && panelCurrentA(motor.machine, fieldA);
  return (
    <div className="motor-bench">
      <div className="figure-pair">
        <VCurveFigure
          {...base.curves}
          plan={mark && reading ? { fieldA, armatureA: reading.armatureA } : null}
          planName={name}
          finding={vCurveFinding(motor, reading, fieldA)}
          reading="V-curves at constant shaft load. Solid copper lags, dashed verdigris leads, dotted is unity power factor."
          fileName={`${motor.name}-v-curves`}
        />
        <CapabilityFigure
          {...plane}
          finding={capabilityFinding(motor)}
          reading="Most it may deliver over its load; a constant field delivers less as the load rises."
          fileName={`${motor.name}-capability`}
        />
      </div>
      <div className="bench-setting">
        <NumberField
          label="Try a field current"
          unit={panel === undefined ? 'A' : `A, panel ${formatNumber(panel, { decimals: 2 })} A`}
          value={typed ?? formatNumber(fieldA, { upTo: 1 })}
          onChange={(event) => setTyped(event.target.value)}
          onBlur={accept}
          onKeyDown={(event) => event.key === 'Enter' && accept()}
        />
        <input
          className="slider"
          type="range"
          aria-label={`Field current of ${motor.name}, A`}
          min={0}
          max={highest}
          step={1}
          value={fieldA}
          style={{ '--share': `${Math.min(100, (100 * fieldA) / highest)}%` } as React.CSSProperties}
          onChange={(event) => setFieldA(Number(event.target.value))}
        />
      </div>
      {reading ? (
        <Readings motor={motor} reading={reading} />
      ) : (
        <Notice
          kind="fault"
          title={`${formatQuantity(fieldA, 'A', { upTo: 1 })} cannot hold ${formatQuantity(motor.usualShaftKw, 'kW')}: the motor falls out of step.`}
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
