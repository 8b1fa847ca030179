import { describe, expect, it } from 'vitest';
import { billJoin, type BillInput } from '@/schemas/bill';
import { inTx } from '@/server/db/tx';
import { Bill } from '@/server/models/Bill';
import { Trail } from '@/server/models/Trail';
import { joinedBill } from '@/server/presenters/joined-bill';
import { joinBills, takeBillApart } from '@/server/services/bill-joins';
import { addBill, changeBill, destroyBill, listBills, listPeriods, removeBill } from '@/server/services/bills';
import { openEngagement } from '@/server/services/engagements';
import { joinSuggestions } from '@/server/services/join-suggestions';
import { pricingGround } from '@/server/services/pricing';
import { stationsOf } from '@/server/services/stations';
import { buildActor, buildClient, buildEngagement } from '../setup/build';

const lines = (...amounts: [label: string, amountMinor: number][]) =>
  amounts.map(([label, amountMinor]) => ({ label, amountMinor }));

/** A January that came as two invoices: the account was renumbered. Demand is billed on the second alone. */
const first: BillInput = {
  from: '2025-12-10',
  to: '2026-01-01',
  invoice: 'OV 813876',
  quantities: { kwh: 1_612_480, kvarh: 527_250, powerFactor: 0.84 },
  lines: lines(
    ['Service', 27_667],
    ['Energy', 8_623_732],
    ['Demand', 0],
    ['Reactive', 126_540],
    ['Fuel', 625_642],
    ['Tax', 220_984],
  ),
  totalMinor: 9_624_565,
};
const second: BillInput = {
  from: '2026-01-01',
  to: '2026-01-12',
  invoice: 'OV 814402',
  readOn: '2026-01-12',
  quantities: { kwh: 840_233, kvarh: 274_804, billedKw: 5017, powerFactor: 0.83 },
  lines: lines(
    ['Service', 13_833],
    ['Energy', 4_493_665],
    ['Demand', 3_311_220],
    ['Reactive', 65_953],
    ['Fuel', 326_011],
    ['Tax', 192_951],
  ),
  totalMinor: 8_403_633,
};
const february: BillInput = { ...second, from: '2026-01-12', to: '2026-02-10', invoice: 'OV 822717' };

async function scene() {
  const consultant = await buildActor();
  const engagement = await buildEngagement({
    memberIds: [consultant.id],
    timeZone: 'UTC',
    yearFrom: '2025-12-10',
    yearTo: '2026-12-10',
  });
  const { code } = engagement;
  const bills = [await addBill(consultant, code, first), await addBill(consultant, code, second)];
  const join = (note = '') => joinBills(consultant, code, billJoin.parse({ bills: bills.map(seenOf), note }));
  return { consultant, engagement, code, bills, join };
}

const seenOf = ({ id, version }: { id: number; version: number }) => ({ id, version });

describe('joining invoices is refused', () => {
  it('to people who may not know of the engagement', async () => {
    const { code, bills } = await scene();
    const join = billJoin.parse({ bills: bills.map(seenOf) });
    await expect(joinBills(await buildActor(), code, join)).rejects.toMatchObject({ status: 404 });
    const client = await buildClient();
    const person = await buildActor({ role: 'client', clientId: client.id });
    await expect(joinBills(person, code, join)).rejects.toMatchObject({ status: 404 });
    await expect(takeBillApart(person, code, bills[0]!.id, { version: 0 })).rejects.toMatchObject({ status: 404 });
  });

  it('where one of them is of another engagement', async () => {
    const { consultant, bills } = await scene();
    const other = await buildEngagement({ memberIds: [consultant.id] });
    const join = billJoin.parse({ bills: bills.map(seenOf) });
    await expect(joinBills(consultant, other.code, join)).rejects.toMatchObject({ status: 404 });
    expect(await Bill.count({ where: { joinedToId: bills[0]!.id } })).toBe(0);
  });

  it('where somebody changed one in between', async () => {
    const { consultant, code, bills, join } = await scene();
    await changeBill(consultant, code, bills[1]!.id, { version: bills[1]!.version, bill: second });
    await expect(join()).rejects.toMatchObject({ status: 409, code: 'stale' });
  });

  it('where days between them are missing, naming them', async () => {
    const { consultant, code, bills, join } = await scene();
    bills[1] = await changeBill(consultant, code, bills[1]!.id, {
      version: bills[1]!.version,
      bill: { ...second, from: '2026-01-03' },
    });
    await expect(join()).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(/no invoice covers 1 Jan 2026 to 2 Jan 2026/) as string,
    });
  });

  it('where they cover more than two months, and a second time', async () => {
    const { consultant, code, bills, join } = await scene();
    const march = await addBill(consultant, code, { ...february, to: '2026-03-12' });
    const long = billJoin.parse({ bills: [...bills, march].map(seenOf) });
    await expect(joinBills(consultant, code, long)).rejects.toMatchObject({
      status: 409,
      message: expect.stringContaining('92 days') as string,
    });
    await join();
    await expect(join()).rejects.toMatchObject({ status: 409 });
  });

  it('by its form: fewer than two, one named twice', () => {
    expect(billJoin.safeParse({ bills: [{ id: 1, version: 0 }] }).success).toBe(false);
    expect(billJoin.safeParse({ bills: [1, 1].map((id) => ({ id, version: 0 })) }).success).toBe(false);
  });
});

describe('joined invoices', () => {
  it('are one bill of 33 days: energies added, the demand of the one that bills it, lines of a name added', async () => {
    const { engagement, join } = await scene();
    const bill = await join('The utility renumbered the account on 1 January.');
    expect(bill).toMatchObject({
      from: '2025-12-10',
      to: '2026-01-12',
      days: 33,
      invoice: null,
      readOn: '2026-01-12',
      joinNote: 'The utility renumbered the account on 1 January.',
      // 1,612,480 + 840,233; 527,250 + 274,804; the power factor of the invoice with the demand
      quantities: { kwh: 2_452_713, kvarh: 802_054, billedKw: 5017, powerFactor: 0.83 },
      // 96,245.65 + 84,036.33
      totalMinor: 18_028_198,
      differenceMinor: 0,
    });
    // 276.67 + 138.33; 86,237.32 + 44,936.65; 1,265.40 + 659.53; 6,256.42 + 3,260.11; 2,209.84 + 1,929.51
    expect(bill.lines.map(({ label, amountMinor }) => [label, amountMinor])).toEqual([
      ['Service', 41_500],
      ['Energy', 13_117_397],
      ['Demand', 3_311_220],
      ['Reactive', 192_493],
      ['Fuel', 951_653],
      ['Tax', 413_935],
    ]);
    expect(bill.parts?.map(({ invoice, days }) => [invoice, days])).toEqual([
      ['OV 813876', 22],
      ['OV 814402', 11],
    ]);
    expect(await listBills(engagement.id)).toEqual([bill]);
    expect(await listPeriods(engagement.id)).toEqual([{ from: '2025-12-10', to: '2026-01-12' }]);
  });

  it('are one bill to pricing and to the stations', async () => {
    const { consultant, code, join } = await scene();
    await addBill(consultant, code, february);
    await join();
    const opened = await openEngagement(consultant, code);
    expect((await pricingGround(opened)).bills.map(({ from }) => from)).toEqual(['2025-12-10', '2026-01-12']);
    const [station] = await stationsOf(consultant, opened);
    expect(station?.reason).toMatch(/^2 of 12 kept/);
  });

  it('come apart again as they were, with a trail of both', async () => {
    const { consultant, engagement, code, bills, join } = await scene();
    const bill = await join();
    await expect(takeBillApart(consultant, code, bill.id, { version: bill.version + 1 })).rejects.toMatchObject({
      code: 'stale',
    });
    const parts = await takeBillApart(consultant, code, bill.id, bill);
    expect(parts.map(({ totalMinor }) => totalMinor)).toEqual([9_624_565, 8_403_633]);
    expect(await listBills(engagement.id)).toHaveLength(2);
    await expect(takeBillApart(consultant, code, bill.id, parts[0]!)).rejects.toMatchObject({ status: 409 });
    const rows = await Trail.findAll({ where: { subject: 'Bill', subjectId: bills[1]!.id }, order: ['id'] });
    expect(rows.slice(1).map(({ after }) => after?.joinedToId)).toEqual([bills[0]!.id, null]);
  });

  it('go on together when an invoice is corrected, and refuse a period that no longer joins on', async () => {
    const { consultant, engagement, code, join } = await scene();
    const part = (await join()).parts![0]!;
    const change = { version: part.version, bill: { ...first, quantities: { ...first.quantities, kwh: 1_612_481 } } };
    await changeBill(consultant, code, part.id, change);
    expect((await listBills(engagement.id))[0]?.quantities.kwh).toBe(2_452_714);
    const away = { version: part.version + 1, bill: { ...first, to: '2025-12-31' } };
    await expect(changeBill(consultant, code, part.id, away)).rejects.toMatchObject({
      status: 409,
      message: expect.stringContaining('Take the bill apart first') as string,
    });
  });

  it('come apart when one of them is removed, whichever it is', async () => {
    const { consultant, engagement, code, join } = await scene();
    const bill = await join();
    await removeBill(consultant, code, bill.id, bill);
    expect(await listBills(engagement.id)).toMatchObject([{ from: '2026-01-01', totalMinor: 8_403_633 }]);
    expect((await Bill.findAll({ where: { engagementId: engagement.id } })).map((row) => row.joinedToId)).toEqual([
      null,
    ]);
  });

  it('all go with their file, though each changes as the one before it goes', async () => {
    const { engagement, join } = await scene();
    await join();
    const rows = await Bill.findAll({ where: { engagementId: engagement.id } });
    await inTx(async () => {
      for (const row of rows) await destroyBill(row);
    });
    expect(await Bill.count({ where: { engagementId: engagement.id } })).toBe(0);
  });
});

describe('joinedBill', () => {
  it('knows no energy of the whole that one invoice does not print, and no total where one has none', async () => {
    const { bills } = await scene();
    const [one, other] = bills;
    const whole = joinedBill([{ ...one!, quantities: {}, totalMinor: null }, other!], null);
    expect(whole.quantities).toEqual({ billedKw: 5017, powerFactor: 0.83 });
    expect(whole).toMatchObject({ totalMinor: null, differenceMinor: null });
    // 96,245.65 + 84,036.33 by their lines
    expect(whole.linesMinor).toBe(18_028_198);
  });

  it('adds quantities of lines billed at one rate and drops them where rates differ', async () => {
    const { bills } = await scene();
    const line = { id: 1, label: 'Energy', amountMinor: 5000, quantity: 1000, unit: 'kWh', rate: 0.05 };
    const withLine = (bill: (typeof bills)[number], more: object) => ({ ...bill, lines: [{ ...line, ...more }] });
    const alike = joinedBill(
      [withLine(bills[0]!, {}), withLine(bills[1]!, { quantity: 400, amountMinor: 2000 })],
      null,
    );
    expect(alike.lines).toEqual([{ ...line, quantity: 1400, amountMinor: 7000 }]);
    const unlike = joinedBill([withLine(bills[0]!, {}), withLine(bills[1]!, { rate: 0.06, amountMinor: 6000 })], null);
    expect(unlike.lines).toMatchObject([{ amountMinor: 11_000, quantity: null, rate: null }]);
  });
});

describe('joinSuggestions', () => {
  it('proposes short bills that join on within a month, and says on how many demand is billed', async () => {
    const { bills } = await scene();
    expect(joinSuggestions(bills)).toEqual([
      { ids: bills.map(({ id }) => id), from: '2025-12-10', to: '2026-01-12', demandBilledOn: 1 },
    ]);
  });

  it('proposes nothing for whole months, for bills apart and for what is joined already', async () => {
    const { consultant, engagement, code, bills, join } = await scene();
    const month = await addBill(consultant, code, february);
    expect(joinSuggestions([bills[1]!, month])).toEqual([]);
    expect(joinSuggestions([{ ...bills[0]!, to: '2025-12-31' }, bills[1]!])).toEqual([]);
    await join();
    expect(joinSuggestions(await listBills(engagement.id))).toEqual([]);
  });
});
