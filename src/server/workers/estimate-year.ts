import { estimateFromBills, fieldBounds, layOutBills, type PlanMotor } from '../../core/plan';
import { readSchedule } from '../../core/tariff';
import { readyYear, setupOf, type ReadyYear } from './price-year';
import type { EstimateResult, EstimateTask, TaskAct } from './tasks';

/** Estimates stored plans, and raised fields, from what the bills print. */
export function estimateYear({ basis, rows, acts, shares }: EstimateTask): EstimateResult {
  const { contract, history, given } = basis;
  const schedule = readSchedule(basis.scheduleText);
  const options = { contract, given, ...(history ? { history } : {}) };
  const year = layOutBills({ schedule, rows, options });
  // Of several meters the bills print the sum: their motors stand behind one.
  const motors = basis.motors.map((motor) => ({ ...motor, behind: 0 }));
  const ready = readyYear({ ...basis, motors, load: year.evenLoad, meters: [] });
  const estimate = (act: TaskAct) =>
    estimateFromBills({ schedule, rows, options, year, plant: ready.plant, setup: setupOf(ready, behindOne(act)) });
  return {
    acts: acts.map(estimate),
    raised: shares.flatMap((share) => {
      const fields = raisedFields(ready, share);
      if (fields.length === 0) return [];
      const controls = fields.map(({ motorId, fieldA }) => ({
        motorId,
        controls: [{ holds: 'field-current' as const, fieldCurrentA: fieldA }],
      }));
      return [{ share, fields, estimate: estimate({ controls }) }];
    }),
  };
}

function behindOne({ banks, replacements, ...act }: TaskAct): TaskAct {
  return {
    ...act,
    ...(banks ? { banks: banks.map((bank) => ({ ...bank, behind: 0 })) } : {}),
    ...(replacements ? { replacements: replacements.map((one) => ({ ...one, behind: 0 })) } : {}),
  };
}

/** Fields so far on the way from today's to their limits, to a tenth of an ampere; motors at their limits stay. */
function raisedFields({ basis, plant }: ReadyYear, share: number): { motorId: number; fieldA: number }[] {
  return plant.motors.flatMap((motor: PlanMotor, m) => {
    const bounds = fieldBounds(motor);
    const today = motor.standingFieldA;
    if ('none' in bounds || bounds.highA <= today) return [];
    const fieldA = Math.floor((today + share * (bounds.highA - today)) * 10) / 10;
    return fieldA > today ? [{ motorId: basis.motors[m]!.id, fieldA }] : [];
  });
}
