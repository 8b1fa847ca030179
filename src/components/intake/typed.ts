import { minorUnitDecimals, toMinorUnits } from '../../core/units';
import { billInput, type BillInput } from '../../schemas/bill';
import { typedNumber } from '../ui/typed-number';
import { placesToKeep, type TypedPages, type TypedPlaces } from './pages/typed-places';

/** A line as typed: its amount, and what it was worked out from where the bill prints it. */
export interface TypedLine extends TypedPlaces {
  label: string;
  amount: string;
  quantity: string;
  unit: string;
  rate: string;
}

/** A line nobody has typed yet. */
export const emptyLine = (label = '', unit = ''): TypedLine => ({ label, amount: '', quantity: '', unit, rate: '' });

/** What stands in the form: text as typed, the last day as people say it. */
export interface TypedBill extends TypedPages {
  invoice: string;
  from: string;
  lastDay: string;
  readOn: string;
  estimated: boolean;
  quantities: ({ name: string; figure: string } & TypedPlaces)[];
  lines: TypedLine[];
  total: string;
}

/** Fields of the form by their path, with what is wrong. */
export type TypedFaults = Record<string, string>;

/** An amount as typed, in minor units; null where it is none or finer than the smallest coin. */
export function typedAmount(text: string, currency: string): number | null {
  const amount = typedNumber(text) ?? NaN;
  if (Number.isNaN(amount)) return null;
  const fraction = text.split('.')[1]?.replace(/\D/g, '') ?? '';
  return fraction.length > minorUnitDecimals(currency) ? null : toMinorUnits(amount, currency);
}

const dayMs = 86_400_000;
const shifted = (date: string, days: number) =>
  /^\d{4}-\d{2}-\d{2}$/.test(date) ? new Date(Date.parse(date) + days * dayMs).toISOString().slice(0, 10) : date;

/** The day after the last one: where the period ends. */
export const dayAfter = (date: string) => shifted(date, 1);
export const dayBefore = (date: string) => shifted(date, -1);

/** The sum of the lines that can be read so far, in minor units. */
export function typedSum(lines: TypedBill['lines'], currency: string): number {
  return lines.reduce((sum, line) => sum + (typedAmount(line.amount, currency) ?? 0), 0);
}

/** Whether a figure of power factor is one in per cent: with the sign, or too great for a fraction. */
export function isPercent(name: string, figure: string): boolean {
  if (name !== 'powerFactor') return false;
  return /%\s*$/.test(figure) || (typedNumber(figure) ?? 0) >= 10;
}

/** A quantity as typed; a power factor in per cent (`85`, `85 %`) becomes a fraction. Empty: undefined; unreadable: NaN. */
export function typedQuantity(name: string, figure: string): number | undefined {
  if (!isPercent(name, figure)) return typedNumber(figure);
  const percent = typedNumber(figure.replace(/%\s*$/, ''));
  // Shifting the point in the text keeps 85.3 from becoming 0.8529999.
  return percent === undefined ? NaN : Number((percent / 100).toFixed(8));
}

const numberFault = 'Write a number such as 2,479,826 or 0.83.';
const rateFault = 'Write the price of one unit, such as 0.00376.';
const amountFault = 'Write an amount such as 1,947.33.';

/** The bill as typed, or what is wrong with it by field. Empty quantities and lines are left out. */
export function readTyped(typed: TypedBill, currency: string): { bill: BillInput } | { faults: TypedFaults } {
  const faults: TypedFaults = {};
  const quantities: Record<string, number> = {};
  typed.quantities.forEach(({ name, figure }, index) => {
    const read = typedQuantity(name, figure);
    if (read === undefined) return;
    if (Number.isNaN(read)) faults[`quantities.${index}.figure`] = numberFault;
    else quantities[name] = read;
  });
  const lines: (BillInput['lines'][number] & { at: number })[] = [];
  typed.lines.forEach((line, at) => {
    if (line.amount.trim() === '') return;
    const amountMinor = typedAmount(line.amount, currency);
    if (amountMinor === null) faults[`lines.${at}.amount`] = amountFault;
    const worked = { quantity: typedNumber(line.quantity) ?? null, rate: typedNumber(line.rate) ?? null };
    for (const [name, value] of Object.entries(worked)) {
      if (Number.isNaN(value)) faults[`lines.${at}.${name}`] = name === 'rate' ? rateFault : numberFault;
    }
    const isRead = amountMinor !== null && !Object.values(worked).some(Number.isNaN);
    if (isRead) lines.push({ label: line.label, amountMinor, ...worked, unit: line.unit || null, at });
  });
  const totalMinor = typed.total.trim() === '' ? null : typedAmount(typed.total, currency);
  if (typed.total.trim() !== '' && totalMinor === null) faults.total = amountFault;
  const parsed = billInput.safeParse({
    from: typed.from,
    to: dayAfter(typed.lastDay),
    invoice: typed.invoice || null,
    readOn: typed.readOn || null,
    estimated: typed.estimated,
    quantities,
    lines: lines.map(({ at: _at, ...line }) => line),
    totalMinor,
    places: placesToKeep(
      typed,
      lines.map(({ at }) => at),
    ),
    attachmentIds: typed.attachmentIds,
  });
  for (const issue of parsed.error?.issues ?? []) faults[fieldOf(issue.path, typed, lines)] ??= issue.message;
  return parsed.success && Object.keys(faults).length === 0 ? { bill: parsed.data } : { faults };
}

const lineFields = ['label', 'quantity', 'unit', 'rate'];

/** The field of the form that an issue of the bill belongs to. */
function fieldOf(path: PropertyKey[], typed: TypedBill, lines: { at: number }[]): string {
  const [head, second, third] = path.map(String);
  if (head === 'to') return 'lastDay';
  if (head === 'totalMinor') return 'total';
  if (head === 'quantities') return `quantities.${typed.quantities.findIndex(({ name }) => name === second)}.figure`;
  if (head === 'lines') {
    const field = lineFields.find((name) => name === third) ?? 'amount';
    return `lines.${lines[Number(second)]?.at ?? 0}.${field}`;
  }
  return head ?? 'from';
}
