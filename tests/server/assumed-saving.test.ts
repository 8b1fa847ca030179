import { describe, expect, it } from 'vitest';
import { withAssumed } from '@/core/machine';
import { toMinorUnits } from '@/core/units';
import { assumedSavingFound } from '@/schemas/job';
import { planInput } from '@/schemas/plan-input';
import type { ServiceError } from '@/server/errors';
import { latestAssumedSaving, movedTask, startAssumedSaving } from '@/server/services/assumed-saving';
import { jobEnded, readJob } from '@/server/services/jobs';
import { changeMotor, motorsOf, openMotor } from '@/server/services/motors';
import { planBasis } from '@/server/services/plan-basis';
import { createPlan, plansOf } from '@/server/services/plans';
import { millMotor, motorOf } from '../setup/motors';
import { buildPlansStation, type PlansStation } from '../setup/plans';

const planOf = (millId: number) =>
  planInput.parse({
    name: 'Plan A',
    fields: [{ motorId: millId, fieldA: 180 }],
    workCost: 20_000,
    yearlyUpkeep: 500,
    economics: { discountPercent: 8, escalationPercent: 0, horizonYears: 10 },
  });

async function workedOut({ actor, opened }: PlansStation) {
  const { id } = await startAssumedSaving(actor, opened);
  expect(await jobEnded(id, 60_000)).toBe(true);
  const found = assumedSavingFound(await readJob(actor, id));
  return found ?? Promise.reject(new Error('the work did not end well'));
}

describe('how a saving moves with what is assumed', () => {
  it('is not asked for before there is a plan', async () => {
    const { actor, opened } = await buildPlansStation();
    const refused = await startAssumedSaving(actor, opened).catch((error: ServiceError) => error);
    expect(refused).toMatchObject({ status: 409 });
    expect(await latestAssumedSaving(opened)).toEqual({ planName: null, runningId: null, found: null, stale: false });
  });

  it('is the saving of the plan with the value entered on the plate instead, kept until something changes', async () => {
    const station = await buildPlansStation();
    const { actor, opened, millId } = station;
    await createPlan(opened, planOf(millId));
    const found = await workedOut(station);
    const before = (await plansOf(opened)).plans[0]!;
    expect(found).toMatchObject({ planName: 'Plan A', currency: opened.engagement.currency });
    const minor = (saving: number) => toMinorUnits(saving, opened.engagement.currency);
    expect(found.savingMinor).toBe(minor(before.saving));
    expect(await latestAssumedSaving(opened)).toEqual({ planName: 'Plan A', runningId: null, found, stale: false });
    const [mill] = await motorsOf(opened);
    const xq = mill!.assumed.find((one) => one.field === 'xqPu')!;
    const swing = found.swings.find((one) => one.motorId === millId && one.field === 'xqPu')!;
    // The plate says what was assumed at the low end: the year is priced the ordinary way.
    const entered = motorOf(millMotor, { xqPu: xq.range![0] });
    await changeMotor(await openMotor(actor, millId), { ...entered, version: mill!.version });
    expect(swing.atLowMinor).toBe(minor((await plansOf(opened)).plans[0]!.saving));
    expect(swing.atLowMinor).not.toBe(found.savingMinor);
    expect(await latestAssumedSaving(opened)).toMatchObject({ found: null, stale: true });
  });
});

describe('movedTask', () => {
  it('moves one value of one motor', async () => {
    const { opened, millId, compressorId } = await buildPlansStation();
    const { task } = await planBasis(opened);
    const moved = movedTask(task, {}, { motorId: millId, field: 'xqPu', value: 0.6 });
    const [mill, compressor] = [millId, compressorId].map((id) => moved.basis.motors.find((one) => one.id === id)!);
    expect(mill!.machine).toEqual(withAssumed(task.motors.find((one) => one.id === millId)!.machine, 'xqPu', 0.6));
    expect(mill!.fieldTodayA).toBe(109);
    expect(compressor).toBe(task.motors.find((one) => one.id === compressorId));
  });

  it('takes every setting in field amperes along where nobody read them', async () => {
    const { opened, millId } = await buildPlansStation();
    const { task } = await planBasis(opened);
    const controls = [
      { holds: 'field-current' as const, fieldCurrentA: 180 },
      { holds: 'field-voltage' as const, fieldVoltageV: 100 },
      { holds: 'kvar' as const, kvarDelivered: 500 },
    ];
    const act = { controls: [{ motorId: millId, controls }] };
    const { basis, settings } = movedTask(task, act, { motorId: millId, field: 'ratedFieldCurrentA', value: 102 });
    // Rated 204 A read as 102: every ampere half, and twice the volts over four times the resistance for the same power
    const mill = basis.motors.find((one) => one.id === millId)!;
    expect(mill.fieldTodayA).toBeCloseTo(54.5, 9);
    expect(mill.machine.fieldResistanceOhm).toBeCloseTo((4 * 118) / 204, 9);
    expect(settings[0]!.controls![0]!.controls).toEqual([
      { holds: 'field-current', fieldCurrentA: 90 },
      { holds: 'field-voltage', fieldVoltageV: 200 },
      { holds: 'kvar', kvarDelivered: 500 },
    ]);
  });
});
