import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { planInput } from '@/schemas/plan-input';
import { noLine } from '@/schemas/tariff';
import type { ServiceError } from '@/server/errors';
import { Motor } from '@/server/models/Motor';
import { Plan } from '@/server/models/Plan';
import { Rate } from '@/server/models/Rate';
import { addBill, changeBill } from '@/server/services/bills';
import { makeEdition } from '@/server/services/editions';
import { openEngagement } from '@/server/services/engagements';
import { changeHours, logHours, openHours } from '@/server/services/hours';
import { cancelJob, watchJob } from '@/server/services/jobs';
import { changeMotor, createMotor, openMotor, removeMotor } from '@/server/services/motors';
import { changePerson, openPerson } from '@/server/services/people';
import { changePlan, choosePlan, createPlan, openPlan } from '@/server/services/plans';
import { changeRate, openRate, setRate } from '@/server/services/rates';
import { startSearch } from '@/server/services/search';
import { matchLine } from '@/server/services/tariff';
import { closePool } from '@/server/workers/pool';
import { buildActor, buildEngagement, buildUser } from '../setup/build';
import { millMotor, motorOf } from '../setup/motors';
import { buildPlansStation, type PlansStation } from '../setup/plans';

const valueOf = { first: 10, second: 20 } as const;

let station: PlansStation;
beforeAll(async () => {
  station = await buildPlansStation();
});
afterAll(closePool);

const names = ['first', 'second'] as const;
type Which = (typeof names)[number];

/** Does the same twice in one moment, whoever comes first: what the one who was refused is told. */
async function twice(work: (which: Which) => Promise<unknown>) {
  const settled = await Promise.allSettled(names.map(work));
  expect(settled.filter((one) => one.status === 'fulfilled')).toHaveLength(1);
  const late = settled.findIndex((one) => one.status === 'rejected');
  const error = (settled[late] as PromiseRejectedResult).reason as ServiceError;
  return { error, mine: names[late] as Which, theirs: names[1 - late] as Which };
}

const plan = (name: string) =>
  planInput.parse({
    name,
    fields: [{ motorId: station.millId, fieldA: 150 }],
    workCost: 20_000,
    yearlyUpkeep: 0,
    economics: { discountPercent: 8, escalationPercent: 0, horizonYears: 10 },
  });

describe('two people who save in the same moment', () => {
  it('of a motor: the second gets both values', async () => {
    const { id } = await createMotor(station.opened, motorOf({ ...millMotor, name: 'M-5' }));
    const open = await Promise.all([openMotor(station.actor, id), openMotor(station.actor, id)]);
    const { error, mine, theirs } = await twice((which) =>
      changeMotor(open[which === 'first' ? 0 : 1], {
        ...motorOf({ ...millMotor, name: 'M-5', drives: which }),
        version: 0,
      }),
    );
    expect(error).toMatchObject({ status: 409, code: 'stale' });
    expect(error.details).toMatchObject({ mine: { drives: mine }, theirs: { drives: theirs, version: 1 } });
  });

  it('of a plan: the second gets both values, also of a choice', async () => {
    const { id } = await createPlan(station.opened, plan('Both'));
    const open = () => openPlan(station.actor, id);
    const [one, other] = [await open(), await open()];
    const { error, mine, theirs } = await twice((which) =>
      changePlan(which === 'first' ? one : other, {
        ...plan('Both'),
        yearlyUpkeep: valueOf[which],
        version: 0,
      }),
    );
    expect(error).toMatchObject({ status: 409, code: 'stale' });
    expect(error.details).toMatchObject({
      mine: { yearlyUpkeep: valueOf[mine] },
      theirs: { yearlyUpkeep: valueOf[theirs], version: 1 },
    });
    const [third, fourth] = [await open(), await open()];
    const { error: late } = await twice((which) =>
      choosePlan(which === 'first' ? third : fourth, { version: 1, chosen: true }),
    );
    expect(late).toMatchObject({ status: 409, code: 'stale' });
  });

  it('of a bill, hours, a person, a rate and a matched line: the second gets both values', async () => {
    const partner = await buildActor({ role: 'partner' });
    const engagement = await buildEngagement({ memberIds: [station.actor.id] });
    const opened = await openEngagement(station.actor, engagement.code);
    const input = { from: '2025-11-01', to: '2025-12-01', quantities: { kwh: 1 }, lines: [], totalMinor: 1 };
    const bill = await addBill(station.actor, engagement.code, input);
    const ofBill = await twice((which) =>
      changeBill(station.actor, engagement.code, bill.id, {
        version: 0,
        bill: { ...input, totalMinor: valueOf[which] },
      }),
    );
    expect(ofBill.error.details).toMatchObject({
      mine: { totalMinor: valueOf[ofBill.mine] },
      theirs: { totalMinor: valueOf[ofBill.theirs], version: 1 },
    });

    const day = new Date().toISOString().slice(0, 10);
    const worked = { day, time: 60, station: 'bills' as const, note: 'read the bills', billable: true };
    const entry = await logHours(station.actor, opened, worked);
    const entries = [await openHours(station.actor, entry.id), await openHours(station.actor, entry.id)] as const;
    const ofHours = await twice((which) =>
      changeHours(station.actor, entries[which === 'first' ? 0 : 1], {
        ...worked,
        time: valueOf[which],
        version: 0,
      }),
    );
    expect(ofHours.error.details).toMatchObject({
      mine: { minutes: valueOf[ofHours.mine] },
      theirs: { minutes: valueOf[ofHours.theirs], version: 1 },
    });

    const user = await buildUser({ name: 'Tom' });
    const users = [await openPerson(partner, user.id), await openPerson(partner, user.id)] as const;
    const ofPerson = await twice((which) =>
      changePerson(partner, users[which === 'first' ? 0 : 1], { change: 'name', name: which, version: 0 }),
    );
    expect(ofPerson.error.details).toMatchObject({
      mine: { name: ofPerson.mine },
      theirs: { name: ofPerson.theirs, version: 1 },
    });

    const rate = await setRate(partner, { userId: user.id, engagementId: null, perHour: 100, from: '2026-01-01' });
    const rates = [await openRate(partner, rate.id), await openRate(partner, rate.id)] as const;
    const ofRate = await twice((which) =>
      changeRate(partner, rates[which === 'first' ? 0 : 1], {
        perHour: valueOf[which],
        from: '2026-01-01',
        version: 0,
      }),
    );
    expect(ofRate.error.details).toMatchObject({
      mine: { perHour: valueOf[ofRate.mine] },
      theirs: { perHour: valueOf[ofRate.theirs], version: 1 },
    });

    const { code } = station.opened.engagement;
    const ofLine = await twice((which) => matchLine(station.actor, code, { label: which, lineId: noLine, version: 0 }));
    expect(ofLine.error.details).toMatchObject({
      mine: { [ofLine.mine]: noLine },
      theirs: { lineMatches: { [ofLine.theirs]: noLine }, version: 1 },
    });
  });

  it('of which one has removed it: the other is told there is nothing', async () => {
    const { id } = await createMotor(station.opened, motorOf({ ...millMotor, name: 'M-6' }));
    const [one, other] = [await openMotor(station.actor, id), await openMotor(station.actor, id)];
    await removeMotor(one, { version: 0 });
    await expect(changeMotor(other, { ...motorOf({ ...millMotor, name: 'M-6' }), version: 0 })).rejects.toMatchObject({
      status: 404,
    });
  });
});

describe('what is sent twice in one moment', () => {
  it('makes one motor, one plan, one rate', async () => {
    const engagementId = station.opened.engagement.id;
    const { error: motor } = await twice(() => createMotor(station.opened, motorOf({ ...millMotor, name: 'M-7' })));
    expect(motor.fields?.name?.[0]).toContain('M-7');
    expect(await Motor.count({ where: { engagementId, name: 'M-7' } })).toBe(1);
    expect((await twice(() => createPlan(station.opened, plan('Once')))).error.status).toBe(422);
    expect(await Plan.count({ where: { engagementId, name: 'Once' } })).toBe(1);
    const partner = await buildActor({ role: 'partner' });
    const rate = { userId: station.actor.id, engagementId: null, perHour: 100, from: '2026-02-01' };
    expect((await twice(() => setRate(partner, rate))).error.status).toBe(422);
    expect(await Rate.count({ where: { userId: station.actor.id, from: rate.from } })).toBe(1);
  });

  it('starts one search, and names the one that runs', async () => {
    const { error } = await twice(() => startSearch(station.actor, station.opened, { stepA: 1 }));
    expect(error).toMatchObject({ status: 409 });
    const id = error.details?.job as number;
    await cancelJob(station.actor, id);
    const state = await new Promise((resolve, reject) => {
      watchJob(station.actor, id, (job) => job.state !== 'running' && resolve(job.state)).catch(reject);
    });
    expect(state).toBe('cancelled');
  });

  it('starts one edition', async () => {
    const { id } = await createPlan(station.opened, plan('For an edition'));
    const { error } = await twice(() => makeEdition(station.actor, station.opened, id));
    expect(error.message).toMatch(/being made already/);
    const jobId = error.details?.job as number;
    await cancelJob(station.actor, jobId);
    await new Promise((resolve, reject) => {
      watchJob(station.actor, jobId, (job) => job.state !== 'running' && resolve(job)).catch(reject);
    });
  }, 60_000);
});
