import { describe, expect, it } from 'vitest';
import type { BillsOverlap } from '@/schemas/overlap';
import { Bill } from '@/server/models/Bill';
import { Intake } from '@/server/models/Intake';
import { addBill, listBills, removeBill } from '@/server/services/bills';
import { joinBills } from '@/server/services/bill-joins';
import { undoIntake, keepIntake } from '@/server/services/intake-keep';
import { intakeOverlap } from '@/server/services/intake-overlap';
import type { Actor } from '@/server/policies/actor';
import { billCsv, bring, bringAndKeep, confirmAll, scene } from '../setup/intake';

/** December came estimated in the first file; the utility read the meter later. January is new. */
const correctedCsv = `From,To,kWh,Max kW,Energy charge USD,Demand charge USD,Total USD
2025-12-01,2025-12-31,2391000,4996,130017.20,32973.60,162990.80
2026-01-01,2026-01-31,2400000,5000,130500.00,33000.00,163500.00
`;

async function readyToKeep(actor: Actor, code: string, fileName: string, content: string) {
  return confirmAll(actor, await bring(actor, code, 'bills', fileName, content));
}

const plain = (texts: string[]) => texts.map((text) => text.replaceAll('\u00a0', ' '));
const totals = async (engagementId: number) =>
  (await listBills(engagementId)).map(({ from, totalMinor }) => [from, totalMinor]);

/** 169,325.29, 162,893.16 and 162,990.80 as the files print them. */
const old = [
  ['2025-11-01', 16_932_529],
  ['2025-12-01', 16_289_316],
];
const fresh = [
  ['2025-11-01', 16_932_529],
  ['2025-12-01', 16_299_080],
  ['2026-01-01', 16_350_000],
];

describe('a file of bills that overlaps kept ones', () => {
  it('is shown side by side, and nothing is kept before a choice', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'bills', 'first.csv', billCsv);
    const ready = await readyToKeep(consultant, code, 'corrected.csv', correctedCsv);
    const overlap = (await intakeOverlap(consultant, ready.id)) as BillsOverlap;
    expect(overlap).toMatchObject({
      kind: 'bills',
      asks: true,
      apart: 1,
      bills: [
        {
          comes: { from: '2025-12-01', kwh: 2_391_000, kw: 4996, totalMinor: 16_299_080, row: 'row 2' },
          kept: [{ kwh: 2_389_204, totalMinor: 16_289_316, fileName: 'first.csv', isJoined: false }],
        },
      ],
    });
    expect(plain(overlap.bills[0]!.differences)).toEqual([
      'Energy: 2,389,204 kWh kept, 2,391,000 kWh in the file.',
      'Energy charge: 129,919.56 USD kept, 130,017.20 USD in the file.',
      'Total: 162,893.16 USD kept, 162,990.80 USD in the file.',
    ]);
    await expect(keepIntake(consultant, ready.id, ready.version)).rejects.toMatchObject({ status: 409 });
    expect(await totals(engagement.id)).toEqual(old);

    const keptNew = await keepIntake(consultant, ready.id, ready.version, 'keep-new');
    expect(await totals(engagement.id)).toEqual(fresh);
    await undoIntake(consultant, keptNew.id, keptNew.version);
    expect(await totals(engagement.id)).toEqual(old);

    const undone = (await Intake.findByPk(ready.id))!;
    await keepIntake(consultant, undone.id, undone.version, 'keep-old');
    expect(await totals(engagement.id)).toEqual([...old, fresh[2]]);
  }, 240_000);

  it('keeps invoice number, estimated reading, and quantity and rate of a line, as the file prints them', async () => {
    const { consultant, engagement, code } = await scene();
    const printed = `Invoice,From,To,Read type,kWh,Energy rate USD/kWh,Energy charge USD,Total USD
A-101,2025-11-01,2025-11-30,Actual,1000,0.05,50.00,50.00
A-102,2025-12-01,2025-12-31,Estimated,1200,0.05,60.00,60.00
`;
    await bringAndKeep(consultant, code, 'bills', 'rates.csv', printed);
    expect(await listBills(engagement.id)).toMatchObject([
      { invoice: 'A-101', estimated: false, lines: [{ amountMinor: 5000, quantity: 1000, unit: 'kWh', rate: 0.05 }] },
      { invoice: 'A-102', estimated: true, lines: [{ amountMinor: 6000, quantity: 1200, unit: 'kWh', rate: 0.05 }] },
    ]);
  }, 240_000);

  it('that holds the same bills again leaves nothing to keep beside the old ones', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'bills', 'first.csv', billCsv);
    const again = await readyToKeep(consultant, code, 'again.csv', billCsv);
    const overlap = (await intakeOverlap(consultant, again.id)) as BillsOverlap;
    expect(overlap.bills.map(({ differences }) => differences)).toEqual([[], []]);
    await expect(keepIntake(consultant, again.id, again.version, 'keep-old')).rejects.toMatchObject({
      status: 409,
      message: expect.stringContaining('Put the file aside') as string,
    });
    expect((await Intake.findByPk(again.id))?.state).toBe('read');
    expect(await totals(engagement.id)).toEqual(old);
  }, 240_000);

  it('takes joined invoices apart when one of them is put away', async () => {
    const { consultant, engagement, code } = await scene();
    const typed = { quantities: {}, lines: [{ label: 'Energy', amountMinor: 100 }], totalMinor: 100 };
    const parts = [
      await addBill(consultant, code, { ...typed, from: '2025-11-20', to: '2025-12-01' }),
      await addBill(consultant, code, { ...typed, from: '2025-12-01', to: '2025-12-20' }),
    ];
    await joinBills(consultant, code, { bills: parts.map(({ id, version }) => ({ id, version })), note: '' });
    const ready = await readyToKeep(consultant, code, 'corrected.csv', correctedCsv);
    const overlap = (await intakeOverlap(consultant, ready.id)) as BillsOverlap;
    expect(overlap.bills[0]?.kept).toMatchObject([{ from: '2025-12-01', to: '2025-12-20', isJoined: true }]);
    await keepIntake(consultant, ready.id, ready.version, 'keep-new');
    expect(await totals(engagement.id)).toEqual([['2025-11-20', 100], ...fresh.slice(1)]);
  }, 240_000);

  it('is not undone over a bill that was kept for those days since', async () => {
    const { consultant, engagement, code } = await scene();
    await bringAndKeep(consultant, code, 'bills', 'first.csv', billCsv);
    const ready = await readyToKeep(consultant, code, 'corrected.csv', correctedCsv);
    const kept = await keepIntake(consultant, ready.id, ready.version, 'keep-new');
    const december = (await listBills(engagement.id)).find(({ from }) => from === '2025-12-01')!;
    await removeBill(consultant, code, december.id, december);
    await addBill(consultant, code, {
      from: '2025-12-01',
      to: '2025-12-15',
      quantities: {},
      lines: [],
      totalMinor: 500,
    });
    await expect(undoIntake(consultant, kept.id, kept.version)).rejects.toMatchObject({
      status: 409,
      message: expect.stringMatching(
        /bring back the bill of 1 Dec 2025 to 31 Dec 2025.*1 Dec 2025 to 14 Dec/,
      ) as string,
    });
    expect((await Intake.findByPk(kept.id))?.state).toBe('kept');
    expect(await Bill.unscoped().count({ where: { engagementId: engagement.id } })).toBe(4);
  }, 240_000);
});
