import { describe, expect, it } from 'vitest';
import { billInput, lineLabel, periodFlaws, type BillInput } from '@/schemas/bill';
import { actAs } from '@/server/db/context';
import { inTx } from '@/server/db/tx';
import { Bill } from '@/server/models/Bill';
import { BillLine } from '@/server/models/BillLine';
import { Trail } from '@/server/models/Trail';
import { addBill, changeBill, listBills, removeBill } from '@/server/services/bills';
import { buildActor, buildClient, buildEngagement } from '../setup/build';

const november: BillInput = {
  from: '2025-11-01',
  to: '2025-12-01',
  quantities: { kwh: 2_508_159, maxKw: 5092, powerFactor: 0.83 },
  lines: [
    { label: 'Service', amountMinor: 41_500 },
    { label: 'Energy', amountMinor: 13_571_809 },
    { label: 'Excess kvarh', amountMinor: 194_725 },
  ],
  totalMinor: 13_808_034,
};
const december = { ...november, from: '2025-12-01', to: '2026-01-01' };

async function scene() {
  const consultant = await buildActor();
  const engagement = await buildEngagement({ memberIds: [consultant.id] });
  return { consultant, engagement, code: engagement.code };
}

describe('bills of people who may not', () => {
  it('do not exist for consultants who are no members', async () => {
    const { code } = await scene();
    const stranger = await buildActor();
    await expect(addBill(stranger, code, november)).rejects.toMatchObject({ status: 404 });
  });

  it('do not exist for the client, not even to read a conflict from', async () => {
    const client = await buildClient();
    const engagement = await buildEngagement({ clientId: client.id });
    const person = await buildActor({ role: 'client', clientId: client.id });
    await expect(addBill(person, engagement.code, november)).rejects.toMatchObject({ status: 404 });
    expect(await Bill.count({ where: { engagementId: engagement.id } })).toBe(0);
  });

  it('cannot be reached through another engagement', async () => {
    const { consultant, code } = await scene();
    const bill = await addBill(consultant, code, november);
    const other = await buildEngagement({ memberIds: [consultant.id] });
    const seen = { version: bill.version };
    await expect(removeBill(consultant, other.code, bill.id, seen)).rejects.toMatchObject({ status: 404 });
    await expect(removeBill(consultant, code, Number.NaN, seen)).rejects.toMatchObject({ status: 404 });
  });

  it('cannot change in a closed engagement', async () => {
    const { consultant, engagement, code } = await scene();
    await inTx(() => engagement.update({ closedAt: new Date() }));
    await expect(addBill(consultant, code, november)).rejects.toMatchObject({ status: 409, code: 'conflict' });
  });
});

describe('bills', () => {
  it('come back ordered by period, with lines in printed order and their sum against the total', async () => {
    const { consultant, engagement, code } = await scene();
    await addBill(consultant, code, december);
    await addBill(consultant, code, { ...november, totalMinor: 13_808_000 });
    const [first, second] = await listBills(engagement.id);
    expect(first).toMatchObject({ from: '2025-11-01', days: 30, currency: 'USD', source: null, differenceMinor: 34 });
    expect(first?.lines.map((line) => line.label)).toEqual(['Service', 'Energy', 'Excess kvarh']);
    // 415.00 + 135,718.09 + 1,947.25 = 138,080.34, added by hand
    expect(second).toMatchObject({ from: '2025-12-01', days: 31, linesMinor: 13_808_034, differenceMinor: 0 });
  });

  it('refuse to share a day with a kept one, naming both periods', async () => {
    const { consultant, engagement, code } = await scene();
    await addBill(consultant, code, november);
    const overlapping = { ...november, from: '2025-11-30', to: '2025-12-31' };
    await expect(addBill(consultant, code, overlapping)).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/30 Nov 2025 to 30 Dec 2025.*1 Nov 2025 to 30 Nov 2025/) as string,
    });
    expect(await listBills(engagement.id)).toHaveLength(1);
  });

  it('may be lengthened up to their neighbour and not into it', async () => {
    const { consultant, code } = await scene();
    const bill = await addBill(consultant, code, { ...november, to: '2025-11-20' });
    await addBill(consultant, code, december);
    const change = { version: bill.version, bill: november };
    expect(await changeBill(consultant, code, bill.id, change)).toMatchObject({ to: '2025-12-01' });
    const later = { version: bill.version + 1, bill: { ...november, to: '2025-12-02' } };
    await expect(changeBill(consultant, code, bill.id, later)).rejects.toMatchObject({ status: 409 });
  });

  it('move their version when only a line changes, and show both to who comes late', async () => {
    const { consultant, code } = await scene();
    const bill = await addBill(consultant, code, november);
    const lines = november.lines.slice(0, 2);
    const changed = await changeBill(consultant, code, bill.id, {
      version: bill.version,
      bill: { ...november, lines },
    });
    expect(changed.version).toBe(bill.version + 1);
    expect(changed.lines).toHaveLength(2);
    await expect(
      changeBill(consultant, code, bill.id, { version: bill.version, bill: november }),
    ).rejects.toMatchObject({ status: 409, code: 'stale', details: { mine: november, theirs: changed } });
    await expect(removeBill(consultant, code, bill.id, { version: bill.version })).rejects.toMatchObject({
      status: 409,
    });
  });

  it('go with their lines, and the trail says who removed them', async () => {
    const { consultant, engagement, code } = await scene();
    const bill = await addBill(consultant, code, november);
    await actAs({ actorId: consultant.id, ip: null }, () => removeBill(consultant, code, bill.id, bill));
    expect(await listBills(engagement.id)).toEqual([]);
    expect(await BillLine.count({ where: { billId: bill.id } })).toBe(0);
    const row = await Trail.findOne({ where: { subject: 'Bill', subjectId: bill.id, action: 'delete' } });
    expect(row).toMatchObject({ actorId: consultant.id });
    expect(row?.before).toMatchObject({ periodFrom: '2025-11-01', totalMinor: 13_808_034 });
  });
});

describe('billInput', () => {
  const issuesOf = (input: object) =>
    billInput.safeParse({ ...november, ...input }).error?.issues.map((issue) => issue.path.join('.'));

  it('takes a full bill', () => expect(billInput.parse(november)).toEqual(november));

  it.each([
    ['a period that ends before it begins', { to: '2025-10-01' }, ['to']],
    ['a day that is none', { from: '2025-02-30' }, ['from']],
    ['more than 400 days', { to: '2027-01-01' }, ['to']],
    ['half a cent', { totalMinor: 10.5 }, ['totalMinor']],
    ['a line without a name', { lines: [{ label: ' ', amountMinor: 1 }] }, ['lines.0.label']],
    ['a power factor in per cent', { quantities: { powerFactor: 83 } }, ['quantities.powerFactor']],
    ['nothing billed at all', { lines: [], totalMinor: null }, ['totalMinor']],
  ])('refuses %s', (_what, input, paths) => expect(issuesOf(input)).toEqual(paths));

  it('takes a bill without a printed total, and a credit', () => {
    const lines = [{ label: 'Credit', amountMinor: -500 }];
    expect(billInput.safeParse({ ...november, lines, totalMinor: null }).success).toBe(true);
  });
});

describe('periodFlaws', () => {
  it('finds none where each period begins where the last one ended', () => {
    expect(periodFlaws([december, november])).toEqual([]);
  });

  it('finds gaps, overlaps and the open ends of the year', () => {
    const periods = [
      { from: '2026-01-05', to: '2026-02-01' },
      { from: '2026-02-04', to: '2026-03-01' },
      { from: '2026-02-28', to: '2026-04-01' },
    ];
    expect(periodFlaws(periods, { from: '2026-01-01', to: '2026-04-10' })).toEqual([
      { kind: 'gap', from: '2026-01-01', to: '2026-01-05', days: 4 },
      { kind: 'gap', from: '2026-02-01', to: '2026-02-04', days: 3 },
      { kind: 'overlap', from: '2026-02-28', to: '2026-03-01', days: 1 },
      { kind: 'gap', from: '2026-04-01', to: '2026-04-10', days: 9 },
    ]);
  });

  it('counts a whole year without a bill as one gap', () => {
    const year = { from: '2025-11-01', to: '2026-11-01' };
    expect(periodFlaws([], year)).toEqual([{ kind: 'gap', ...year, days: 365 }]);
  });
});

describe('lineLabel', () => {
  it.each([
    ['Energy charge USD', 'Energy charge'],
    ['Energy charge (USD)', 'Energy charge'],
    ['Demand, usd', 'Demand'],
    ['USD', 'USD'],
    ['Busd fee', 'Busd fee'],
    ['Customer charge', 'Customer charge'],
  ])('names %s as %s', (head, label) => expect(lineLabel(head, 'USD')).toBe(label));
});
