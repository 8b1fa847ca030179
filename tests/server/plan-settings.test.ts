import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { planDraftOf, planDraftToInput } from '@/components/plans/draft';
import { loadsOfSpans, remarkOn } from '@/components/plans/setting-check';
import { spanDraftOf } from '@/components/plans/span-draft';
import { settingsWords, settingWords } from '@/components/ui/setting-words';
import type { PlanView } from '@/schemas/plan';
import { planInput, type PlanInput } from '@/schemas/plan-input';
import { planDefaults } from '@/schemas/plan-money';
import { supplyInput } from '@/schemas/supply';
import type { ServiceError } from '@/server/errors';
import { openEngagement } from '@/server/services/engagements';
import { planFormPlant } from '@/server/services/plan-form';
import { planStart } from '@/server/services/plan-start';
import { createPlan, openPlan, plansOf, removePlan } from '@/server/services/plans';
import { changeSupply, supplyForTask, supplyOf } from '@/server/services/supplies';
import { closePool } from '@/server/workers/pool';
import { buildActor } from '../setup/build';
import { compressorMotor } from '../setup/motors';
import { buildPlansStation, type PlansStation } from '../setup/plans';

let station: PlansStation;
beforeAll(async () => {
  station = await buildPlansStation();
});
afterAll(closePool);

type Written = Omit<Partial<Parameters<typeof planInput.parse>[0] & object>, 'name'>;
const plan = (name: string, rest: Written): PlanInput =>
  planInput.parse({ name, fields: [], workCost: 0, yearlyUpkeep: 0, economics: { ...planDefaults }, ...rest });

async function refusal(work: Promise<unknown>): Promise<ServiceError> {
  return work.then(
    () => Promise.reject(new Error('this was not refused')),
    (error: ServiceError) => error,
  );
}

const summerMonths = [6, 7, 8, 9];
const seasons = {
  by: 'months',
  spans: [
    { name: 'Summer', months: summerMonths },
    { name: 'Winter', months: [1, 2, 3, 4, 5, 10, 11, 12] },
  ],
} as const;
const nights = {
  by: 'clock',
  spans: [{ name: 'Night', days: ['every'], from: '22:00', to: '06:00' }],
  rest: 'Day',
} as const;
const current = (fieldCurrentA: number) => ({ holds: 'field-current', fieldCurrentA });

/** Makes plans, prices the year, and takes the plans back. */
async function priced(...inputs: PlanInput[]): Promise<{ standing: PlanView; plans: PlanView[] }> {
  const made = [];
  for (const input of inputs) made.push(await createPlan(station.opened, input));
  const year = await plansOf(station.opened);
  for (const { id } of made) await removePlan(await openPlan(station.actor, id), { version: 0 });
  return {
    standing: year.standing,
    plans: made.map(({ id }) => year.plans.find((one) => one.id === id) as PlanView),
  };
}

const lineOf = (view: PlanView, bill: number, id: string) =>
  view.bills[bill]!.lines.find((line) => line.id === id)!.amount;

describe('what a plan’s form is refused', () => {
  const paths = (rest: object) =>
    planInput
      .safeParse({ name: 'P', fields: [], workCost: 0, yearlyUpkeep: 0, economics: { ...planDefaults }, ...rest })
      .error?.issues.map((issue) => issue.path.join('.'));

  it('is a month in two seasons or in none', () => {
    const twice = { by: 'months', spans: [{ ...seasons.spans[0], months: [1, ...summerMonths] }, seasons.spans[1]] };
    expect(paths({ spans: twice })).toEqual(['spans.spans.1.months']);
    const short = { by: 'months', spans: [seasons.spans[0], { name: 'Winter', months: [1, 2] }] };
    expect(paths({ spans: short })).toEqual(['spans.spans']);
  });

  it('is a number of settings that is neither one nor that of the spans', () => {
    const fields = [{ motorId: 1, controls: [current(100), current(110), current(120)] }];
    expect(paths({ spans: seasons, fields })).toEqual(['fields.0.controls']);
    expect(paths({ spans: seasons, fields: [{ motorId: 1, controls: [current(100), current(110)] }] })).toBeUndefined();
  });

  it('is a motor without any setting, and a shift that ends where it begins', () => {
    expect(paths({ fields: [{ motorId: 1 }] })).toEqual(['fields.0.fieldA']);
    const shift = { by: 'clock', spans: [{ ...nights.spans[0], to: '22:00' }], rest: 'Day' };
    expect(paths({ spans: shift })).toEqual(['spans.spans.0.to']);
  });
});

describe('settings by span', () => {
  it('price the lines of each month as the same setting held all year does', async () => {
    const { millId: motorId } = station;
    const { plans } = await priced(
      plan('Seasons', { spans: seasons, fields: [{ motorId, controls: [current(180), current(140)] }] }),
      plan('High', { fields: [{ motorId, fieldA: 180 }] }),
      plan('Low', { fields: [{ motorId, fieldA: 140 }] }),
    );
    const [bySeason, high, low] = plans as [PlanView, PlanView, PlanView];
    bySeason.bills.forEach((bill, index) => {
      const like = summerMonths.includes(Number(bill.from.slice(5, 7))) ? high : low;
      // Energy and kvarh look at their own month alone; demand looks back and is left out.
      for (const id of ['energy', 'excess']) expect(lineOf(bySeason, index, id)).toBe(lineOf(like, index, id));
    });
    expect(bySeason.bills.some((_, index) => lineOf(bySeason, index, 'excess') !== lineOf(high, index, 'excess'))).toBe(
      true,
    );
    expect(settingsWords(bySeason.fields.slice(0, 1), bySeason.spans)).toBe(
      'M-1 180\u00a0A in summer, 140\u00a0A in winter',
    );
  });

  it('are checked at the loads of their own span', async () => {
    const { opened, millId: motorId } = station;
    // 80 A lies below the pull-out margin at the mill's load; at night, 22 to 6 h, the mill stands still.
    const night = plan('Night', { spans: nights, fields: [{ motorId, controls: [current(80), current(150)] }] });
    const { plans } = await priced(night);
    expect(plans[0]?.name).toBe('Night');
    const day = plan('Day', { spans: nights, fields: [{ motorId, controls: [current(150), current(80)] }] });
    const error = await refusal(createPlan(opened, day));
    expect(error).toMatchObject({ status: 422 });
    expect(Object.keys(error.fields ?? {})).toEqual(['fields.0.controls.1.fieldCurrentA']);
  });

  it('by the seasons of the schedule price like the same months', async () => {
    const { millId: motorId } = station;
    const controls = [current(180), current(140)];
    const ofSchedule = { by: 'schedule', spans: [{ name: 'summer' }, { name: 'winter' }] };
    const { plans } = await priced(
      plan('Months', { spans: seasons, fields: [{ motorId, controls }] }),
      plan('Schedule', { spans: ofSchedule, fields: [{ motorId, controls }] }),
    );
    expect(plans[1]!.yearTotal).toBe(plans[0]!.yearTotal);
    const wrong = { by: 'schedule', spans: [{ name: 'wet' }, { name: 'dry' }] };
    const other = plan('Wrong', { spans: wrong, fields: [{ motorId, controls }] });
    expect(await refusal(createPlan(station.opened, other))).toMatchObject({ status: 409 });
  });
});

describe('a new synchronous motor in place of an induction motor', () => {
  const everyDay = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];
  const fan = {
    name: 'M-9',
    induction: {
      output: 300,
      outputUnit: 'kW',
      points: [
        { loadPercent: 50, efficiencyPercent: 94, powerFactor: 0.75 },
        { loadPercent: 100, efficiencyPercent: 95, powerFactor: 0.85 },
      ],
    },
    plate: {
      ...(compressorMotor.plate as object),
      output: 400,
      outputUnit: 'kW',
      currentA: undefined,
      efficiencyPercent: undefined,
    },
    calendar: { rules: [{ days: everyDay, fromHour: 0, toHour: 24, load: 300, unit: 'kW' }], shutdowns: [] },
    controls: [{ holds: 'kvar', kvarDelivered: 0 }],
    cost: 90_000,
  };

  it('takes the lag of the old one off the meter, costs its price and is told beside the others', async () => {
    const { standing, plans } = await priced(plan('New fan motor', { replacements: [fan] }));
    const [view] = plans as [PlanView];
    // 300 kW at 95 % draw 315.7895 kW; at 0.85 that is 315.7895 x 0.6197443 = 195.709 kvar, and the new motor takes none.
    expect(view.replacements[0]).toMatchObject({ name: 'M-9', hoursLimited: 0, hoursRunning: 365 * 24 });
    expect(view.replacements[0]!.kvarGained).toBeCloseTo(195.709, 2);
    // July, 744 h at 0.0012 USD a kvarh: 195.7087 x 744 x 0.0012 = 174.73 USD, within a cent for the rounding of two lines.
    const july = view.bills.findIndex(({ from }) => from === '2026-07-01');
    expect(Math.abs(lineOf(standing, july, 'excess') - lineOf(view, july, 'excess') - 174.73)).toBeLessThan(0.011);
    // What it saves in energy is its own, hour for hour: 8,760 of them.
    expect(view.extraLossKwh).toBeCloseTo(-view.replacements[0]!.kwSaved * 8760, 0);
    expect(view.capitalCost).toBe(90_000);
    expect(view.costParts.map(({ amount }) => amount)).toContain(90_000);
    expect(view.appraisal.npv).toBeLessThan(view.saving * 10);
  });

  it('comes back to the form as it was written', async () => {
    const { opened, actor } = station;
    const made = await createPlan(opened, plan('Form of a fan', { replacements: [fan] }));
    const year = await plansOf(opened);
    const start = await planStart(actor, year, { plan: String(made.id), search: null });
    expect(start!.start.replacements[0]).toMatchObject({ name: 'M-9', induction: fan.induction, cost: 90_000 });
    await removePlan(await openPlan(actor, made.id), { version: 0 });
  });

  it('is refused where its load lies beyond what it can hold', async () => {
    const heavy = { ...fan, calendar: { ...fan.calendar, rules: [{ ...fan.calendar.rules[0]!, load: 1400 }] } };
    const error = await refusal(createPlan(station.opened, plan('Too heavy', { replacements: [heavy] })));
    expect(error).toMatchObject({ status: 422 });
    expect(error.fields).toEqual({ 'replacements.0.controls.0.kvarDelivered': [expect.stringMatching(/1,400 kW/)] });
    const odd = { ...fan, plate: { ...fan.plate, currentA: 500, efficiencyPercent: 95 } };
    const other = await refusal(createPlan(station.opened, plan('Odd plate', { replacements: [odd] })));
    expect(Object.keys(other.fields ?? {})[0]).toMatch(/^replacements\.0\.plate\./);
  });
});

describe('a regulator', () => {
  it('holds its power factor, and is kept at its limit where it cannot', async () => {
    const { millId: motorId } = station;
    const hold = (powerFactor: number) => [{ holds: 'power-factor', powerFactor, leading: true }];
    const { plans } = await priced(
      plan('Mild', { fields: [{ motorId, controls: hold(0.95), equipmentCost: 9_000 }] }),
      plan('Hard', { fields: [{ motorId, controls: hold(0.5) }] }),
    );
    const [mild, hard] = plans.map((view) => view.motors.find((motor) => motor.motorId === motorId)!);
    // kvar = kW tan(arccos 0.95) = 0.3287 kW; the input is the shaft's 1,119 kW and some per cent of losses
    expect(mild!.kvarPlan / 1119).toBeGreaterThan(0.3287);
    expect(mild!.kvarPlan / 1119).toBeLessThan(0.3287 * 1.08);
    expect(mild!.hoursLimited).toBe(0);
    expect(hard!.hoursLimited).toBe(hard!.hoursRunning);
    expect(hard!.hoursBeyond).toBe(0);
    expect(settingWords(plans[0]!.fields[0]!, plans[0]!.spans)).toBe('M-1 holds 0.95 leading');
  });
});

describe('what a plan costs', () => {
  it('adds up from its parts', async () => {
    const { millId: motorId } = station;
    const { plans } = await priced(
      plan('Parts', {
        workCost: 1_000,
        fields: [{ motorId, controls: [{ holds: 'kvar', kvarDelivered: 200 }], equipmentCost: 20_000 }],
        banks: [{ steps: 2, stepKvar: 150, lossWPerKvar: 5, cost: 30_000.5 }],
      }),
    );
    expect(plans[0]!.costParts).toEqual([
      { label: 'Work at the motors', amount: 1_000 },
      { label: 'Regulators', amount: 20_000 },
      { label: 'Capacitors', amount: 30_000.5 },
    ]);
    expect(plans[0]!.capitalCost).toBe(51_000.5);
  });
});

describe('the supply of the bus', () => {
  it('is nobody’s outside the engagement, and is refused with figures that contradict each other', async () => {
    const stranger = await buildActor();
    expect(await refusal(openEngagement(stranger, station.opened.engagement.code))).toMatchObject({ status: 404 });
    const paths = (entries: object) => supplyInput.safeParse(entries).error?.issues.map((issue) => issue.path[0]);
    expect(paths({ impedancePercent: 5 })).toEqual(['transformerKva']);
    // 200 kW of 2,500 kVA is 8 % of resistance alone
    expect(paths({ transformerKva: 2500, impedancePercent: 5.75, loadLossKw: 200 })).toEqual(['loadLossKw']);
    expect(paths({ allowedLowPercent: 95 })).toEqual(['allowedHighPercent']);
  });

  it('says what is not computed until it is known, and keeps two people from writing over each other', async () => {
    const { opened } = station;
    const before = await supplyOf(opened);
    expect(before.version).toBe(0);
    expect(before.missing[0]).toMatch(/short-circuit power at the bus is not known/);
    const banks = [{ steps: 1, stepKvar: 600, lossWPerKvar: 5 }];
    const unknown = await priced(plan('C', { banks }));
    expect(unknown.plans[0]!.banks[0]!.resonance).toBeNull();
    expect(unknown.standing.voltage).toBeNull();
    const supply = supplyInput.parse({
      shortCircuitKva: 15_000,
      allowedLowPercent: 95,
      allowedHighPercent: 105,
      meterUpstream: false,
    });
    const after = await changeSupply(opened, { version: 0, supply });
    expect(after.missing).toEqual([]);
    expect(await refusal(changeSupply(opened, { version: 0, supply }))).toMatchObject({ status: 409 });
    const { plans, standing } = await priced(plan('C', { banks }));
    // h = sqrt(15,000 / 600) = 5, at the fifth harmonic
    expect(plans[0]!.banks[0]!.resonance).toEqual({ order: 5, near: [5], kvar: 600 });
    expect(plans[0]!.nearestLimit).toBe('5th harmonic, order 5.0');
    // 600 kvar behind 15,000 kVA lift the bus by about 4 %
    expect(plans[0]!.voltage!.highPu - standing.voltage!.highPu).toBeCloseTo(0.04, 2);
  });

  it('lies before the bus as per-unit resistance and reactance', () => {
    const entries = { transformerKva: 2500, impedancePercent: 5.75, loadLossKw: 20, meterUpstream: true };
    // r = 20/2,500 = 0.008; x = sqrt(0.0575^2 - 0.008^2) = sqrt(0.00324225) = 0.056941
    const { upstream } = supplyForTask(supplyInput.parse(entries));
    expect(upstream?.resistancePu).toBeCloseTo(0.008, 10);
    expect(upstream?.reactancePu).toBeCloseTo(0.056941, 6);
    const cable = { busVoltageV: 4160, cableResistanceOhm: 0.0692224, cableReactanceOhm: 0.0346112 };
    // base ohms 4.16^2 x 1,000 / 2,500 = 6.92224: the cable adds 0.01 and 0.005
    const both = supplyForTask(supplyInput.parse({ ...entries, ...cable })).upstream;
    expect(both?.resistancePu).toBeCloseTo(0.018, 10);
    expect(both?.reactancePu).toBeCloseTo(0.061941, 6);
    expect(supplyForTask(supplyInput.parse({ ...entries, meterUpstream: null })).upstream).toBeUndefined();
  });
});

describe('the form of a plan', () => {
  it('gives back every stored plan as it was', async () => {
    const { opened, millId, compressorId, actor } = station;
    const plant = await planFormPlant(opened);
    const stored = plan('Whole', {
      spans: nights,
      fields: [
        { motorId: millId, controls: [current(120), current(150)] },
        { motorId: compressorId, controls: [{ holds: 'voltage', setPu: 1.01, droopPu: 0.04 }], equipmentCost: 7_000 },
      ],
      banks: [
        {
          name: 'MCC 2',
          steps: 3,
          stepKvar: 100,
          lossWPerKvar: 5,
          detuningPercent: 7,
          holdsPowerFactor: 0.95,
          cost: 40_000,
        },
      ],
    });
    const { economics: _economics, ...settings } = stored;
    expect(planInput.parse(planDraftToInput(planDraftOf(stored, plant), plant))).toMatchObject(settings);
    const { id } = await createPlan(opened, stored);
    const copy = await planStart(actor, await plansOf(opened), { plan: 'new', search: null, from: String(id) });
    expect(copy?.start).toMatchObject({ name: 'Plan A', banks: stored.banks, spans: stored.spans });
    expect(copy?.plan).toBeUndefined();
    await removePlan(await openPlan(actor, id), { version: 0 });
  });

  it('tells of a limit while it is typed, at the loads of the span', async () => {
    const { motors } = await planFormPlant(station.opened);
    const mill = motors.find((motor) => motor.motorId === station.millId)!;
    const byClock = loadsOfSpans(
      mill.loads,
      spanDraftOf({ ...nights, spans: [...nights.spans].map((one) => ({ ...one, days: [...one.days] })) }),
      [],
    );
    // 2,000 hp x 0.746 x 75 % = 1,119 kW by day, none at night
    expect(byClock).toEqual([[], [1119]]);
    const draft = {
      motorId: mill.motorId,
      holds: 'field-current' as const,
      values: [],
      droopPercent: '',
      fieldC: '',
      equipmentCost: '',
    };
    expect(remarkOn(mill, draft, '80', [1119])).toMatchObject({
      isFault: true,
      words: expect.stringContaining('pull-out'),
    });
    expect(remarkOn(mill, draft, '230', [])).toMatchObject({
      isFault: true,
      words: expect.stringContaining('26 A beyond'),
    });
    expect(remarkOn(mill, draft, '150', [1119])).toMatchObject({ isFault: false });
    expect(remarkOn(mill, draft, 'much', [1119])).toBeNull();
  });
});
