import type { FieldControl } from '../../core/machine';
import type { Binding, PlanResult, SearchResult, SearchedAxis } from '../../core/plan';
import { wordNumber } from '../../core/units';
import type { CostCurveView, FoundSetting, LimitHours } from '../../schemas/search';
import type { TaskBasis, TaskMotor } from './tasks';

/** Share of the saving within which settings round the best count as equally good. */
const toleranceShare = 0.02;

/** Settings of every motor; a constant field current where the year is whole. */
export function foundSettings(basis: TaskBasis, controls: FieldControl[][], bySpan: boolean): FoundSetting[] {
  return basis.motors.map(({ id, name, fieldTodayA }, index) => {
    const own = controls[index]!;
    const [first] = own;
    const setting = { motorId: id, name, todayA: fieldTodayA };
    return !bySpan && first?.holds === 'field-current'
      ? { ...setting, fieldA: first.fieldCurrentA }
      : { ...setting, controls: own };
  });
}

/** The cost of the year along every field that was searched, span by span. */
export function curvesOf(basis: TaskBasis, found: SearchResult, names: string[] | null): CostCurveView[] {
  const amount = Math.max(1, toleranceShare * (found.standingCost - found.cost));
  return found.axes.flatMap((axis) => {
    const curve = curveOf(basis.motors[axis.motors[0]!]!, axis, found.cost, amount);
    return curve ? [{ ...curve, ...(names ? { span: names[axis.span] } : {}) }] : [];
  });
}

function curveOf(motor: TaskMotor, axis: SearchedAxis, cost: number, amount: number): CostCurveView | null {
  const { chosen, curve } = axis;
  if (chosen.holds !== 'field-current' || curve.length < 2) return null;
  const { machine } = motor;
  const ratedLimitA = machine.limits?.fieldCurrentA ?? machine.ratedFieldCurrentA;
  const points = curve.flatMap(({ control, cost: total, admissible }) =>
    control.holds === 'field-current' ? [{ fieldA: control.fieldCurrentA, total, admissible }] : [],
  );
  const within = points.filter(({ admissible }) => admissible);
  return {
    motorId: motor.id,
    name: motor.name,
    chosenA: chosen.fieldCurrentA,
    todayA: motor.fieldTodayA,
    limitA: ratedLimitA * (1 - (machine.limits?.reserve ?? 0)),
    ratedLimitA,
    points,
    tolerance: toleranceOf(within, chosen.fieldCurrentA, cost + amount, amount),
  };
}

/** The stretch of settings round the chosen one, all within the limits, that costs less than a ceiling. */
function toleranceOf(
  points: { fieldA: number; total: number }[],
  chosenA: number,
  ceiling: number,
  amount: number,
): CostCurveView['tolerance'] {
  const at = points.findIndex((point) => point.fieldA === chosenA);
  if (at < 0) return null;
  let low = at;
  let high = at;
  while (low > 0 && points[low - 1]!.total <= ceiling) low -= 1;
  while (high < points.length - 1 && points[high + 1]!.total <= ceiling) high += 1;
  return { lowA: points[low]!.fieldA, highA: points[high]!.fieldA, amount };
}

/** How near each motor that was searched comes to its limits. */
export function limitHours(basis: TaskBasis, found: SearchResult, year: PlanResult): LimitHours[] {
  return basis.motors.flatMap(({ id, name }, index) => {
    const axis = found.axes.find(({ motors }) => motors.includes(index));
    const figures = year.motors[index]!;
    if (!axis || figures.hoursRunning === 0) return [];
    const { field, armature, 'pull-out': pullOut } = figures.nearestLimitHours;
    const { bounds } = axis;
    return [
      {
        motorId: id,
        name,
        hoursRunning: figures.hoursRunning,
        nearest: { field, armature, pullOut },
        bounds: bounds && {
          lowA: bounds.lowA,
          highA: bounds.highA,
          lowWords: bindingWords(bounds.lowBinding),
          highWords: bindingWords(bounds.highBinding),
        },
      },
    ];
  });
}

const limitNames = {
  armature: 'the stator limit',
  field: 'the field limit',
  'pull-out': 'the pull-out margin',
  'least-field': 'the least field allowed',
} as const;

/** "the stator limit at 1,119 kW", with the voltage where it is not rated. */
function bindingWords({ limit, shaftKw, voltagePu }: Binding): string {
  const voltage = voltagePu === 1 ? '' : ` and ${wordNumber(100 * voltagePu, 1)} % of rated voltage`;
  return `${limitNames[limit]} at ${wordNumber(shaftKw, 1)} kW${voltage}`;
}

/** The core counts motors; people know their names. */
export function namedNote(note: string, motors: TaskMotor[]): string {
  return note.replace(/^Motor (\d+)/, (words, number: string) => motors[Number(number) - 1]?.name ?? words);
}
