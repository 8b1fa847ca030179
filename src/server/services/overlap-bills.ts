import { formatMoney, formatNumber, formatQuantity } from '../../components/ui/format';
import { billQuantity, type BillInput } from '../../schemas/bill';
import type { BillBeside, BillsBeside, BillsOverlap } from '../../schemas/overlap';
import { Bill } from '../models/Bill';
import { BillLine } from '../models/BillLine';
import { Intake } from '../models/Intake';
import { billsWithin, type OpenIntake } from './intake-guard';
import type { HowToRead } from './intake-read';
import { daysInWords } from './intake-words';
import { comingBills, type ComingBill } from './keep-bills';

type Line = Pick<BillInput['lines'][number], 'label' | 'amountMinor'>;

/** A bill with all that can differ from another. */
interface Compared extends BillBeside {
  quantities: Record<string, number>;
  lines: Line[];
}

const billed = (totalMinor: number | null, lines: Line[]) =>
  totalMinor ?? (lines.length > 0 ? lines.reduce((sum, line) => sum + line.amountMinor, 0) : null);

function compared(bill: Omit<Compared, 'kwh' | 'kw'>): Compared {
  const { quantities, lines } = bill;
  const kw = quantities.maxKw ?? quantities.billedKw ?? null;
  return { ...bill, kwh: quantities.kwh ?? null, kw, totalMinor: billed(bill.totalMinor, lines) };
}

const ofInput = ({ from, to, invoice, estimated, quantities, lines, totalMinor }: BillInput) =>
  compared({ from, to, invoice: invoice ?? null, isEstimated: estimated ?? false, quantities, lines, totalMinor });

async function ofKept(bill: Bill): Promise<Compared> {
  const lines = await BillLine.findAll({ where: { billId: bill.id }, order: ['position', 'id'] });
  const { periodFrom: from, periodTo: to, invoice, estimated: isEstimated, quantities, totalMinor } = bill;
  return compared({ from, to, invoice, isEstimated, quantities, lines, totalMinor });
}

const shown = ({ quantities: _quantities, lines: _lines, ...bill }: Compared): BillBeside => bill;

/** Lines by label, those of one label added. */
function amounts(lines: Line[]): Map<string, number> {
  const sums = new Map<string, number>();
  for (const { label, amountMinor } of lines) sums.set(label, (sums.get(label) ?? 0) + amountMinor);
  return sums;
}

/** In what a bill of the file differs from a kept one, the greatest matters first. */
function differencesOf(kept: Compared, comes: Compared, currency: string): string[] {
  const differences: string[] = [];
  const note = (label: string, was: string, is: string) =>
    differences.push(`${label}: ${was} kept, ${is} in the file.`);
  if (kept.from !== comes.from || kept.to !== comes.to) note('Period', daysInWords(kept), daysInWords(comes));
  if (kept.isEstimated !== comes.isEstimated) {
    const [was, is] = kept.isEstimated ? ['estimated', 'read'] : ['read', 'estimated'];
    note('Reading', was!, is!);
  }
  if (kept.invoice !== comes.invoice) note('Invoice', kept.invoice ?? 'none', comes.invoice ?? 'none');
  for (const name of new Set([...Object.keys(kept.quantities), ...Object.keys(comes.quantities)])) {
    const [was, is] = [kept.quantities[name], comes.quantities[name]];
    if (was === is) continue;
    const { label, unit } = billQuantity(name);
    const inWords = (value: number | undefined) =>
      value === undefined ? 'none' : unit ? formatQuantity(value, unit, { upTo: 3 }) : formatNumber(value, { upTo: 4 });
    note(label, inWords(was), inWords(is));
  }
  const [old, fresh] = [amounts(kept.lines), amounts(comes.lines)];
  const money = (minor: number | null | undefined) =>
    typeof minor === 'number' ? formatMoney(minor, currency) : 'none';
  for (const label of new Set([...old.keys(), ...fresh.keys()])) {
    if (old.get(label) !== fresh.get(label)) note(label, money(old.get(label)), money(fresh.get(label)));
  }
  if (kept.totalMinor !== comes.totalMinor) note('Total', money(kept.totalMinor), money(comes.totalMinor));
  return differences;
}

async function besideOf({ input, sourceRow }: ComingBill, kept: Bill[], currency: string): Promise<BillsBeside> {
  const comes = ofInput(input);
  const files = await Intake.findAll({
    where: { id: kept.flatMap(({ intakeId }) => intakeId ?? []) },
    attributes: ['id', 'fileName'],
  });
  const older = await Promise.all(kept.map(ofKept));
  return {
    comes: { ...shown(comes), row: sourceRow },
    kept: kept.map((bill, index) => ({
      ...shown(older[index]!),
      id: bill.id,
      fileName: files.find(({ id }) => id === bill.intakeId)?.fileName ?? null,
      isJoined: bill.joinedToId !== null,
    })),
    differences: older.flatMap((bill) => differencesOf(bill, comes, currency)),
  };
}

/** The kept bills that share days with those of a file, side by side with what differs. */
export async function billsOverlap(open: OpenIntake, how: HowToRead): Promise<BillsOverlap> {
  const { id, currency } = open.opened.engagement;
  const coming = await comingBills(open, how);
  const beside = await Promise.all(
    coming.map(async (bill) => ({ bill, kept: await billsWithin(id, bill.input.from, bill.input.to) })),
  );
  const shared = beside.filter(({ kept }) => kept.length > 0);
  const bills = await Promise.all(shared.map(({ bill, kept }) => besideOf(bill, kept, currency)));
  return { kind: 'bills', asks: bills.length > 0, currency, apart: coming.length - bills.length, bills };
}
