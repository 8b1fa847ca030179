import type { EditionMotor } from '../../schemas/edition';
import { Caution } from '../ui/Caution';
import { formatDelivers, formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';
import type { LeafContext } from './AnswerLeaf';
import { Leaf, LeafRow } from './Leaf';
import { Picture } from './Picture';

const amperes = (value: number) => formatNumber(value, { upTo: 1 });

function settingsTable(motors: readonly EditionMotor[]): LedgerData {
  const row = (id: string, label: string, unit: string, of: (motor: EditionMotor) => string) => ({
    id,
    cells: { what: label, unit, ...Object.fromEntries(motors.map((motor) => [motor.name, of(motor)])) },
  });
  return {
    columns: [
      { key: 'what', head: 'Field current' },
      { key: 'unit', head: 'Unit', quiet: true },
      ...motors.map(({ name, drives }) => ({
        key: name,
        head: name,
        unit: drives ?? undefined,
        align: 'right' as const,
      })),
    ],
    rows: [
      row('today', 'Today', 'A', (motor) => amperes(motor.fieldTodayA)),
      row('plan', 'Proposed', 'A', (motor) => motor.setting ?? amperes(motor.fieldPlanA)),
      row('limit', 'Limit after the reserve', 'A', (motor) => amperes(motor.fieldLimitA)),
      row('rated', 'On the nameplate', 'A', (motor) => amperes(motor.fieldRatedA)),
      row('kvarToday', 'At its usual load, today', '', (motor) => formatDelivers(motor.kvarToday)),
      row('kvarPlan', 'At its usual load, proposed', '', (motor) => formatDelivers(motor.kvarPlan)),
      row(
        'stator',
        'Stator current, proposed, of rated',
        'A',
        (motor) => `${amperes(motor.armaturePlanA)} of ${amperes(motor.armatureRatedA)}`,
      ),
      row(
        'pullout',
        'Least pull-out over load, margin asked',
        'ratio',
        (motor) =>
          `${formatNumber(motor.leastPullOut, { decimals: 2 })}, ${formatNumber(motor.pullOutMargin, { decimals: 2 })}`,
      ),
      row('loss', 'Extra losses a year', 'kWh', (motor) => formatNumber(motor.extraLossKwh)),
    ],
  };
}

function motorsFinding(motors: readonly EditionMotor[]): string {
  const [first] = motors;
  if (!first) return 'The plan changes no motor.';
  const below = first.fieldLimitA - first.fieldPlanA;
  const at = first.setting
    ? `${first.name} ${first.setting}: at its usual load it`
    : `At ${amperes(first.fieldPlanA)} A ${first.name}`;
  return `${at} ${formatDelivers(first.kvarPlan)} and stays ${amperes(below)} A under its field limit.`;
}

export interface MotorsLeafProps extends LeafContext {
  pictures: Record<string, string>;
  page: number;
  /** The motors of this page: two fit. */
  shown: EditionMotor[];
}

const reading =
  'Stator current over field current. Solid copper lagging, dashed verdigris leading; hatched ground is not allowed.';

/** What two motors can do, and where their limits lie. */
export function MotorsLeaf({ content, taps, foot, pictures, page, shown }: MotorsLeafProps) {
  return (
    <Leaf page={page} taps={taps} foot={foot} finding={motorsFinding(shown)}>
      {shown.map((motor, index) => (
        <LeafRow
          key={motor.motorId}
          first={index === 0}
          number={`${page}.${index + 1}`}
          title={`${motor.name}${motor.drives ? `, ${motor.drives.toLowerCase()}` : ''}`}
          lead={index === 0 ? reading : undefined}
          reference={<p>{motor.rated}</p>}
          result={
            <ResultSums
              rows={[
                { label: 'Field, today', value: formatQuantity(motor.fieldTodayA, 'A', { upTo: 1 }) },
                {
                  label: motor.setting ? 'Field at its usual load' : 'Field, proposed',
                  value: formatQuantity(motor.fieldPlanA, 'A', { upTo: 1 }),
                  kind: 'strong',
                },
                { label: 'Usual load', value: formatQuantity(motor.usualLoadPercent, '%') },
                { label: 'Hours running', value: formatNumber(motor.hoursRunning) },
              ]}
            />
          }
        >
          <Picture svg={pictures[`v-curve-${motor.motorId}`]} label={`V-curves of ${motor.name}`} />
        </LeafRow>
      ))}
      <LeafRow
        first={shown.length === 0}
        number={`${page}.${shown.length + 1}`}
        title="Settings and limits"
        reference={
          <p>
            {shown.some(({ setting }) => setting)
              ? 'As set by hand or held by a regulator'
              : 'Constant field current, set by hand'}
          </p>
        }
      >
        <LedgerTable label="Settings and limits" {...settingsTable(shown)} />
      </LeafRow>
      <LeafRow reference={<p>Stands wherever a setting is shown</p>}>
        <Caution title="Calculated values, not released: no setting card exists yet" narrow>
          <p>
            Too much field overheats the rotor while the stator stays cool; too little pulls the motor out of step. Work
            from the released card at the panel, within the manufacturer’s limits.
          </p>
        </Caution>
      </LeafRow>
      {content.motors.length === 0 && <p className="hint">The plan changes no motor.</p>}
    </Leaf>
  );
}
