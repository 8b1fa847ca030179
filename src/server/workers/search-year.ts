import { searchFields, type SearchResult } from '../../core/plan';
import type { CostCurveView, SearchView } from '../../schemas/search';
import { metersOf, readyYear } from './price-year';
import type { SearchTask, TaskMotor } from './tasks';

/** Share of the saving within which settings round the best count as equally good. */
const toleranceShare = 0.02;
const tellEvery = 5;

/** Searches the field currents that make the year's bills least, and tells the port how far it is. */
export function searchYear({ basis, stepA, fingerprint, port }: SearchTask): SearchView {
  const { motors, pricing } = readyYear(basis);
  const found = searchFields({
    plant: { ...metersOf(basis), motors: motors.map((motor) => ({ ...motor, stepA })) },
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
      fieldA: found.fieldsA[index] ?? fieldTodayA,
      todayA: fieldTodayA,
    })),
    yearTotal: found.cost,
    standingTotal: found.standingCost,
    saving,
    priced: found.priced,
    exhaustive: found.exhaustive,
    leaveAlone: found.leaveAlone,
    stepA,
    curves: basis.motors.flatMap((motor, index) => curveOf(motor, index, found, Math.max(1, toleranceShare * saving))),
    notes: found.notes.map((note) => namedNote(note, basis.motors)),
    fingerprint,
  };
}

function curveOf(motor: TaskMotor, index: number, found: SearchResult, amount: number): CostCurveView[] {
  const points = found.curves[index];
  const chosenA = found.fieldsA[index];
  if (!points || chosenA === undefined || points.length < 2) return [];
  const { machine } = motor;
  const ratedLimitA = machine.limits?.fieldCurrentA ?? machine.ratedFieldCurrentA;
  const bounds = found.bounds[index];
  const keepsLimits = (fieldA: number) =>
    !bounds || (fieldA >= bounds.lowA * (1 - 1e-9) && fieldA <= bounds.highA * (1 + 1e-9));
  const within = points.filter(({ fieldCurrentA }) => keepsLimits(fieldCurrentA));
  return [
    {
      motorId: motor.id,
      name: motor.name,
      chosenA,
      todayA: motor.fieldTodayA,
      limitA: ratedLimitA * (1 - (machine.limits?.reserve ?? 0)),
      ratedLimitA,
      points: points.map(({ fieldCurrentA, cost }) => ({
        fieldA: fieldCurrentA,
        total: cost,
        admissible: keepsLimits(fieldCurrentA),
      })),
      tolerance: toleranceOf(within, chosenA, found.cost + amount, amount),
    },
  ];
}

/** The stretch of settings round the chosen one, all within the limits, that costs less than a ceiling. */
function toleranceOf(
  points: { fieldCurrentA: number; cost: number }[],
  chosenA: number,
  ceiling: number,
  amount: number,
): CostCurveView['tolerance'] {
  const at = points.findIndex((point) => point.fieldCurrentA === chosenA);
  if (at < 0) return null;
  let low = at;
  let high = at;
  while (low > 0 && points[low - 1]!.cost <= ceiling) low -= 1;
  while (high < points.length - 1 && points[high + 1]!.cost <= ceiling) high += 1;
  return { lowA: points[low]!.fieldCurrentA, highA: points[high]!.fieldCurrentA, amount };
}

/** The core counts motors; people know their names. */
function namedNote(note: string, motors: TaskMotor[]): string {
  return note.replace(/^Motor (\d+)/, (words, number: string) => motors[Number(number) - 1]?.name ?? words);
}
