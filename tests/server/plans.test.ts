import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { PlanView } from '@/schemas/plan';
import { planInput, type PlanInput } from '@/schemas/plan-input';
import { planDefaults } from '@/schemas/plan-money';
import type { ServiceError } from '@/server/errors';
import { Plan } from '@/server/models/Plan';
import { openEngagement } from '@/server/services/engagements';
import { changeMotor, openMotor, removeMotor } from '@/server/services/motors';
import {
  changePlan,
  choosePlan,
  createPlan,
  missingForPlans,
  openPlan,
  plansOf,
  removePlan,
} from '@/server/services/plans';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildEngagement } from '../setup/build';
import { millMotor, motorOf } from '../setup/motors';
import { buildPlansStation, type PlansStation } from '../setup/plans';

let station: PlansStation;
beforeAll(async () => {
  station = await buildPlansStation();
});
afterAll(closePool);

const plan = (name: string, fields: PlanInput['fields'], rest: Partial<PlanInput> = {}): PlanInput =>
  planInput.parse({
    name,
    fields,
    workCost: 20_000,
    yearlyUpkeep: 500,
    economics: { discountPercent: 8, escalationPercent: 0, horizonYears: 10 },
    ...rest,
  });

async function refusal(work: Promise<unknown>): Promise<ServiceError> {
  return work.then(
    () => Promise.reject(new Error('this was not refused')),
    (error: ServiceError) => error,
  );
}

const cents = (amount: number) => Math.round(amount * 100);
const named = async (name: string) =>
  (await plansOf(station.opened)).plans.find((one) => one.name === name) as PlanView;

describe('who may open a plan', () => {
  it('is nobody outside the engagement', async () => {
    const { id } = await createPlan(station.opened, plan('Strangers', [{ motorId: station.millId, fieldA: 150 }]));
    const stranger = await buildActor();
    const client = await buildActor({ role: 'client', clientId: station.opened.engagement.clientId });
    for (const actor of [stranger, client]) {
      expect(await refusal(openPlan(actor, id))).toMatchObject({ status: 404 });
      expect(await refusal(openEngagement(actor, station.opened.engagement.code))).toMatchObject({ status: 404 });
    }
    await removePlan(await openPlan(station.actor, id), { version: 0 });
  });
});

describe('what a plan needs first', () => {
  it('is named with the station to visit', async () => {
    const actor = await buildActor();
    const engagement = await buildEngagement({ memberIds: [actor.id] });
    const opened = await openEngagement(actor, engagement.code);
    expect(await missingForPlans(opened)).toMatchObject({ station: 'motors' });
    expect(await refusal(plansOf(opened))).toMatchObject({ status: 409 });
    expect(await missingForPlans(station.opened)).toBeNull();
  });
});

describe('a field current beyond a limit', () => {
  it('is refused naming motor, limit and margin', async () => {
    const error = await refusal(createPlan(station.opened, plan('Hot', [{ motorId: station.millId, fieldA: 230 }])));
    expect(error).toMatchObject({ status: 422 });
    expect(error.fields?.['fields.0.fieldA']?.[0]).toBe(
      '230 A is 26 A beyond the field limit of M-1, 204 A. Set it lower.',
    );
  });

  it('is refused below the pull-out margin at the load of the calendar', async () => {
    const fields = [
      { motorId: station.compressorId, fieldA: 100 },
      { motorId: station.millId, fieldA: 80 },
    ];
    const error = await refusal(createPlan(station.opened, plan('Weak', fields)));
    expect(Object.keys(error.fields ?? {})).toEqual(['fields.1.fieldA']);
    expect(error.fields?.['fields.1.fieldA']?.[0]).toMatch(
      /1,119 kW M-1 would keep a pull-out of 1\.\d+ times the load/,
    );
  });

  it('is refused for a motor of another plant and for the same motor twice', async () => {
    const twice = [
      { motorId: station.millId, fieldA: 150 },
      { motorId: station.millId, fieldA: 160 },
      { motorId: 99_999, fieldA: 160 },
    ];
    const error = await refusal(createPlan(station.opened, plan('Twice', twice)));
    expect(Object.keys(error.fields ?? {})).toEqual(['fields.1.fieldA', 'fields.2.fieldA']);
  });

  it('takes a stored plan off the offer when the motor is changed under it', async () => {
    const { opened, actor, millId } = station;
    const { id } = await createPlan(opened, plan('High', [{ motorId: millId, fieldA: 200 }]));
    const motor = await openMotor(actor, millId);
    const lowered = motorOf(millMotor, { limits: { reservePercent: 10 } });
    const { version } = await changeMotor(motor, { ...lowered, version: motor.motor.version });
    const year = await plansOf(opened);
    expect(year.plans.map((one) => one.name)).not.toContain('High');
    expect(year.unpriced).toMatchObject([{ id, name: 'High', reason: expect.stringContaining('183.6 A, 10 % kept') }]);
    await changeMotor(await openMotor(actor, millId), { ...motorOf(millMotor), version });
    await removePlan(await openPlan(actor, id), { version: 0 });
  });
});

describe('a priced plan', () => {
  it('is consistent: lines make bills, bills make the year, standing less plan is the saving', async () => {
    const { opened, millId, compressorId } = station;
    await createPlan(
      opened,
      plan('A', [
        { motorId: millId, fieldA: 180 },
        { motorId: compressorId, fieldA: 110 },
      ]),
    );
    const { standing, plans } = await plansOf(opened);
    const [a] = plans as [PlanView];
    for (const view of [standing, a]) {
      expect(view.bills).toHaveLength(12);
      for (const bill of view.bills) {
        expect(cents(bill.lines.reduce((sum, line) => sum + line.amount, 0))).toBe(cents(bill.total));
      }
      expect(cents(view.bills.reduce((sum, bill) => sum + bill.total, 0))).toBe(cents(view.yearTotal));
      expect(cents(Object.values(view.groupTotals).reduce((sum, amount) => sum + amount, 0))).toBe(
        cents(view.yearTotal),
      );
    }
    expect(cents(standing.yearTotal - a.yearTotal)).toBe(cents(a.saving));
    expect(a.saving).toBeGreaterThan(0);
    expect(standing.saving).toBe(0);
    expect(standing.id).toBeNull();
  });

  it('draws more energy and less reactive power than standing', async () => {
    const a = await named('A');
    const mill = a.motors.find((motor) => motor.motorId === station.millId);
    expect(mill?.kvarToday).toBeLessThan(0);
    expect(mill?.kvarPlan).toBeGreaterThan(0);
    expect(mill?.extraLossKwh).toBeGreaterThan(0);
    expect(a.motors.every((motor) => motor.hoursBeyond === 0)).toBe(true);
    // 365 days less 52 Sundays and less 24 weekdays of the shutdown, 16 h each; no clock change falls between 6 and 22 h
    expect(mill?.hoursRunning).toBe((365 - 52 - 24) * 16);
    const { standing } = await plansOf(station.opened);
    expect(a.groupTotals.energy).toBeGreaterThan(standing.groupTotals.energy);
    expect(a.groupTotals.reactive).toBeLessThan(standing.groupTotals.reactive);
    expect(a.worstPf?.value).toBeGreaterThan(standing.worstPf?.value ?? 1);
  });

  it('pays back when its saving less upkeep has made up its cost', async () => {
    const a = await named('A');
    const yearly = a.saving - 500;
    expect(a.appraisal.simplePaybackYears).toBeCloseTo(20_000 / yearly, 6);
    const presentValue = Array.from({ length: 10 }, (_, k) => yearly / 1.08 ** (k + 1)).reduce(
      (sum, x) => sum + x,
      -20_000,
    );
    expect(a.appraisal.npv).toBeCloseTo(presentValue, 4);
    expect(a.cashFlow).toHaveLength(121);
    expect(a.cashFlow[0]).toMatchObject({ month: 0, cumulative: -20_000 });
    expect(a.cashFlow[120]?.cumulative).toBeCloseTo(10 * yearly - 20_000, 4);
    for (const month of a.cashFlow) expect(month.low ?? 0).toBeLessThanOrEqual(month.high ?? 0);
  });

  it('at the fields of today costs what standing costs and never pays back', async () => {
    const same = [{ motorId: station.millId, fieldA: 109 }];
    await createPlan(station.opened, plan('Same', same, { workCost: 0, yearlyUpkeep: 0 }));
    const view = await named('Same');
    expect(view.saving).toBe(0);
    expect(view.paybackWords).toBe('never');
    // What costs nothing is no payback of nought years where it saves nothing.
    expect(view.appraisal).toMatchObject({ simplePaybackYears: null, discountedPaybackYears: null });
  });
});

describe('capacitors in a plan', () => {
  it('are refused by the form without a size or with losses nobody builds', () => {
    const base = { name: 'C', fields: [], workCost: 0, yearlyUpkeep: 0, economics: { ...planDefaults } };
    const paths = (bank: unknown) =>
      planInput.safeParse({ ...base, banks: [bank] }).error?.issues.map((issue) => issue.path.join('.'));
    expect(paths({ steps: 1, stepKvar: 0, lossWPerKvar: 5 })).toEqual(['banks.0.stepKvar']);
    expect(paths({ steps: 2, stepKvar: 300, lossWPerKvar: 50 })).toEqual(['banks.0.lossWPerKvar']);
    expect(paths({ steps: 2, stepKvar: 300, lossWPerKvar: 5 })).toBeUndefined();
  });

  it('draw their losses and resonate at the root of short-circuit power over kvar', async () => {
    const banks = [{ name: '', steps: 1, stepKvar: 600, lossWPerKvar: 5, cost: 0 }];
    await createPlan(station.opened, plan('C', [], { banks }));
    const view = await named('C');
    expect(view.fields.every((field) => field.fieldA === field.todayA)).toBe(true);
    const { standing } = await plansOf(station.opened);
    const energyOf = (one: PlanView) => one.groupTotals.energy;
    // 600 kvar x 5 W/kvar = 3 kW over 8,760 h at 0.05 (winter) and 0.064 (summer, 1 Jun to 30 Sep: 122 days) USD/kWh
    const expected = 3 * 24 * (243 * 0.05 + 122 * 0.064);
    expect(energyOf(view) - energyOf(standing)).toBeCloseTo(expected, 0);
    expect(view.groupTotals.reactive).toBeLessThan(standing.groupTotals.reactive);
    await removePlan(await openPlan(station.actor, view.id!), { version: view.version });
  });
});

describe('changing, choosing and removing a plan', () => {
  it('tells a second person both versions', async () => {
    const { opened, actor, millId } = station;
    const saved = await createPlan(opened, plan('B', [{ motorId: millId, fieldA: 150 }]));
    const first = plan('B', [{ motorId: millId, fieldA: 155 }]);
    await changePlan(await openPlan(actor, saved.id), { ...first, version: 0 });
    const late = { ...plan('B', [{ motorId: millId, fieldA: 160 }]), version: 0 };
    const error = await refusal(changePlan(await openPlan(actor, saved.id), late));
    expect(error).toMatchObject({ status: 409, code: 'stale' });
    expect(error.details).toMatchObject({
      mine: { fields: [{ fieldA: 160 }] },
      theirs: { version: 1, fields: [{ fieldA: 155 }], workCost: 20_000 },
    });
  });

  it('keeps one chosen', async () => {
    const { opened, actor } = station;
    const [a, b] = await Promise.all([named('A'), named('B')]);
    await choosePlan(await openPlan(actor, a.id!), { version: a.version, chosen: true });
    await choosePlan(await openPlan(actor, b.id!), { version: b.version, chosen: true });
    const year = await plansOf(opened);
    expect(year.chosen?.name).toBe('B');
    expect(await Plan.count({ where: { engagementId: opened.engagement.id, chosen: true } })).toBe(1);
  });

  it('leaves a motor that a plan sets in place, naming the plan', async () => {
    const found = await openMotor(station.actor, station.compressorId);
    const error = await refusal(removeMotor(found, { version: found.motor.version }));
    expect(error).toMatchObject({ status: 409, message: expect.stringContaining('set by A') });
  });

  it('has names of its own', async () => {
    const error = await refusal(createPlan(station.opened, plan('A', [])));
    expect(error).toMatchObject({ status: 422, fields: { name: [expect.stringContaining('A')] } });
  });

  it('goes when removed, and only the version that was seen', async () => {
    const same = await named('Same');
    const found = await openPlan(station.actor, same.id!);
    expect(await refusal(removePlan(found, { version: 9 }))).toMatchObject({ status: 409 });
    await removePlan(found, { version: same.version });
    expect(await named('Same')).toBeUndefined();
  });
});
