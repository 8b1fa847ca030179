import type { BillInput, BillView } from '../../schemas/bill';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { conflict, notFound, staleVersion } from '../errors';
import { Bill } from '../models/Bill';
import { BillLine } from '../models/BillLine';
import { Intake } from '../models/Intake';
import type { Actor } from '../policies/actor';
import { presentBill } from '../presenters/bill';
import { assertPlaces, attachmentsOf, releasePages, takeWaitingPages } from './attachments';
import { joinedBill } from '../presenters/joined-bill';
import { assertStillMeets, releaseInvoices } from './joined-invoices';
import { billsWithin, openForChange } from './intake-guard';
import { daysInWords } from './intake-words';

/** Bills as rows, each invoice by itself. */
export async function presentBills(bills: Bill[]): Promise<BillView[]> {
  const billIds = bills.map((bill) => bill.id);
  const intakeIds = bills.flatMap((bill) => bill.intakeId ?? []);
  const [lines, intakes, pages] = await Promise.all([
    BillLine.findAll({ where: { billId: billIds }, order: ['position', 'id'] }),
    Intake.findAll({ where: { id: intakeIds }, attributes: ['id', 'fileName'] }),
    attachmentsOf(billIds),
  ]);
  return bills.map((bill) =>
    presentBill(
      bill,
      lines.filter((line) => line.billId === bill.id),
      intakes.find((intake) => intake.id === bill.intakeId),
      pages.filter((one) => one.billId === bill.id),
    ),
  );
}

/**
 * The kept bills of an engagement with their lines, ordered by period; invoices that were joined are one bill. The caller has
 * opened the engagement.
 */
export async function listBills(engagementId: number): Promise<BillView[]> {
  const rows = await Bill.findAll({ where: { engagementId }, order: ['periodFrom', 'periodTo', 'id'] });
  const views = new Map((await presentBills(rows)).map((view) => [view.id, view]));
  return groupsOf(rows).map((group) => {
    const parts = group.map((row) => views.get(row.id)!);
    const head = group.find((row) => row.id === row.joinedToId);
    return parts.length === 1 ? parts[0]! : joinedBill(parts, head?.joinNote ?? null);
  });
}

/** The periods of an engagement's bills in order, without anything else of them. */
export async function listPeriods(engagementId: number): Promise<{ from: string; to: string }[]> {
  const attributes = ['id', 'joinedToId', 'periodFrom', 'periodTo'];
  const rows = await Bill.findAll({ where: { engagementId }, attributes, order: ['periodFrom', 'periodTo', 'id'] });
  return groupsOf(rows).map((group) => ({ from: group[0]!.periodFrom, to: group.at(-1)!.periodTo }));
}

/** Rows in order, those that make one bill together. */
function groupsOf(rows: Bill[]): Bill[][] {
  const groups = new Map<number, Bill[]>();
  for (const row of rows) {
    const head = row.joinedToId ?? row.id;
    groups.set(head, [...(groups.get(head) ?? []), row]);
  }
  return [...groups.values()];
}

/**
 * A bill shares no day with another of its engagement: its charges would count twice.
 *
 * @throws {ServiceError} 409 naming both periods
 */
export async function assertNoOverlap(
  engagementId: number,
  period: { from: string; to: string },
  exceptId?: number,
): Promise<void> {
  const others = await billsWithin(engagementId, period.from, period.to);
  const other = others.find((bill) => bill.id !== exceptId);
  if (!other) return;
  const theirs = { from: other.periodFrom, to: other.periodTo };
  const intake = other.intakeId === null ? null : await Intake.findByPk(other.intakeId);
  const remedy = intake
    ? `Undo the file ${intake.fileName} first, or change that bill.`
    : 'Change or remove that bill first.';
  throw conflict(
    `The bill of ${daysInWords(period)} overlaps the bill of ${daysInWords(theirs)} that is already kept. ${remedy}`,
    { period, kept: theirs, intakeId: other.intakeId },
  );
}

async function writeLines(billId: number, lines: BillInput['lines']): Promise<void> {
  for (const [position, line] of lines.entries()) await BillLine.create({ billId, position, ...lineValues(line) });
}

function lineValues({ label, amountMinor, quantity, unit, rate }: BillInput['lines'][number]) {
  return { label, amountMinor, quantity: quantity ?? null, unit: unit || null, rate: rate ?? null };
}

function valuesOf(input: BillInput) {
  const { from, to, quantities, totalMinor, places = null, invoice, readOn, estimated } = input;
  const head = { invoice: invoice || null, readOn: readOn ?? null, estimated: estimated ?? false };
  return { periodFrom: from, periodTo: to, quantities, totalMinor, places, ...head };
}

/** Keeps a bill with its lines. Call inside inTx. */
export async function createBill(
  input: BillInput,
  belongs: { engagementId: number; currency: string; intakeId: number | null; sourceRow: string | null },
): Promise<Bill> {
  await assertNoOverlap(belongs.engagementId, input);
  await assertPlaces(belongs.engagementId, input.places);
  const bill = await Bill.create({ ...belongs, ...valuesOf(input) });
  await writeLines(bill.id, input.lines);
  await takeWaitingPages(bill, input.attachmentIds ?? []);
  return bill;
}

/** Removes a bill with its lines; invoices joined with it come apart. Call inside inTx. */
export async function destroyBill(bill: Bill): Promise<void> {
  await freshen(bill);
  await releaseInvoices(bill);
  for (const line of await BillLine.findAll({ where: { billId: bill.id } })) await line.destroy();
  await releasePages(bill.id);
  await bill.destroy();
}

/**
 * Adds a bill typed by hand.
 *
 * @throws {ServiceError} 404 for those who do not work on the engagement, 409 where it overlaps a kept bill
 */
export async function addBill(actor: Actor, code: string, input: BillInput): Promise<BillView> {
  const { engagement } = await openForChange(actor, code);
  const belongs = { engagementId: engagement.id, currency: engagement.currency, intakeId: null, sourceRow: null };
  const bill = await inTx(() => createBill(input, belongs));
  return first(await presentBills([bill]));
}

/** Changes a bill; its lines are replaced where they differ. */
export async function changeBill(
  actor: Actor,
  code: string,
  id: number,
  change: { version: number; bill: BillInput },
): Promise<BillView> {
  const bill = await openBill(actor, code, id);
  await inTx(async () => {
    await refuseStale(bill, change);
    await assertNoOverlap(bill.engagementId, change.bill, bill.id);
    await assertPlaces(bill.engagementId, change.bill.places);
    await assertStillMeets(bill, change.bill);
    bill.set(valuesOf(change.bill));
    // A change of lines alone is a change of the bill too: its version must move.
    bill.changed('quantities', true);
    await bill.save();
    const kept = await BillLine.findAll({ where: { billId: id }, order: ['position', 'id'] });
    const { lines } = change.bill;
    for (const [position, line] of lines.entries()) {
      const row = kept[position];
      if (row) await row.update({ position, ...lineValues(line) });
      else await BillLine.create({ billId: id, position, ...lineValues(line) });
    }
    for (const row of kept.slice(lines.length)) await row.destroy();
    await takeWaitingPages(bill, change.bill.attachmentIds ?? []);
  });
  return first(await presentBills([bill]));
}

/** Removes a bill. */
export async function removeBill(actor: Actor, code: string, id: number, seen: { version: number }): Promise<void> {
  const bill = await openBill(actor, code, id);
  await inTx(async () => {
    await refuseStale(bill, seen);
    await destroyBill(bill);
  });
}

async function openBill(actor: Actor, code: string, id: number): Promise<Bill> {
  const { engagement } = await openForChange(actor, code);
  const bill = Number.isSafeInteger(id) ? await Bill.findOne({ where: { id, engagementId: engagement.id } }) : null;
  if (!bill) throw notFound();
  return bill;
}

/** Refuses a change of a bill that somebody changed in between. Call it inside inTx. */
async function refuseStale(bill: Bill, seen: { version: number; bill?: BillInput }): Promise<void> {
  await freshen(bill);
  if (bill.version === seen.version) return;
  throw staleVersion('This bill', seen.bill ?? null, first(await presentBills([bill])));
}

function first(views: BillView[]): BillView {
  const [view] = views;
  if (!view) throw notFound();
  return view;
}
