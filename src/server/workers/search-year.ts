import { searchSettings, type SearchResult, type SearchedAxis } from '../../core/plan';
import type { CostCurveView, SearchView } from '../../schemas/search';
import { readyYear } from './price-year';
import type { SearchTask, TaskMotor } from './tasks';

/** Share of the saving within which settings round the best count as equally good. */
const toleranceShare = 0.02;
const tellEvery = 5;

/** Searches the field currents that make the year's bills least, and tells the port how far it is. */
export function searchYear({ basis, stepA, fingerprint, port }: SearchTask): SearchView {
  const { plant, pricing } = readyYear(basis);
  const found = searchSettings({
    plant: {
      ...plant,
      motors: plant.motors.map((motor) => ({ ...motor, searched: { holds: 'field-current', stepA } })),
    },
    totals: (load) => pricing.totals(load),
    onProgress: ({ priced, planned }) => {
      if (priced % tellEvery === 0) port.postMessage({ done: priced, planned });
    },
  });
  port.postMessage({ done: found.priced, planned: found.priced });
  const saving = found.standingCost - found.cost;
  return {
    fields: basis.motors.map(({ id, name, fieldTodayA }, index) => ({
      motorId: id,
      name,
      fieldA: fieldOf(found, index) ?? fieldTodayA,
      todayA: fieldTodayA,
    })),
    yearTotal: found.cost,
    standingTotal: found.standingCost,
    saving,
    priced: found.priced,
    exhaustive: found.exhaustive,
    leaveAlone: found.leaveAlone,
    stepA,
    curves: found.axes.flatMap((axis) =>
      curveOf(basis.motors[axis.motors[0]!]!, axis, found.cost, Math.max(1, toleranceShare * saving)),
    ),
    notes: found.notes.map((note) => namedNote(note, basis.motors)),
    fingerprint,
  };
}

function fieldOf({ controls }: SearchResult, index: number): number | undefined {
  const control = controls[index]?.[0];
  return control?.holds === 'field-current' ? control.fieldCurrentA : undefined;
}

function curveOf(motor: TaskMotor, axis: SearchedAxis, cost: number, amount: number): CostCurveView[] {
  const { chosen, curve } = axis;
  if (chosen.holds !== 'field-current' || curve.length < 2) return [];
  const { machine } = motor;
  const ratedLimitA = machine.limits?.fieldCurrentA ?? machine.ratedFieldCurrentA;
  const points = curve.flatMap(({ control, cost: total, admissible }) =>
    control.holds === 'field-current' ? [{ fieldA: control.fieldCurrentA, total, admissible }] : [],
  );
  return [
    {
      motorId: motor.id,
      name: motor.name,
      chosenA: chosen.fieldCurrentA,
      todayA: motor.fieldTodayA,
      limitA: ratedLimitA * (1 - (machine.limits?.reserve ?? 0)),
      ratedLimitA,
      points,
      tolerance: toleranceOf(
        points.filter(({ admissible }) => admissible),
        chosen.fieldCurrentA,
        cost + amount,
        amount,
      ),
    },
  ];
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

/** The core counts motors; people know their names. */
function namedNote(note: string, motors: TaskMotor[]): string {
  return note.replace(/^Motor (\d+)/, (words, number: string) => motors[Number(number) - 1]?.name ?? words);
}
