import { minorUnitDecimals, toMinorUnits } from '../../core/units';
import { billInput, type BillInput } from '../../schemas/bill';
import { typedNumber } from '../ui/typed-number';
import { placesToKeep, type TypedPages, type TypedPlaces } from './pages/typed-places';

/** What stands in the form: text as typed, the last day as people say it. */
export interface TypedBill extends TypedPages {
  from: string;
  lastDay: string;
  quantities: ({ name: string; figure: string } & TypedPlaces)[];
  lines: ({ label: string; amount: string } & TypedPlaces)[];
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

const numberFault = 'Write a number such as 2,479,826 or 0.83.';
const amountFault = 'Write an amount such as 1,947.33.';

/** The bill as typed, or what is wrong with it by field. Empty quantities and lines are left out. */
export function readTyped(typed: TypedBill, currency: string): { bill: BillInput } | { faults: TypedFaults } {
  const faults: TypedFaults = {};
  const quantities: Record<string, number> = {};
  typed.quantities.forEach(({ name, figure }, index) => {
    const read = typedNumber(figure);
    if (read === undefined) return;
    if (Number.isNaN(read)) faults[`quantities.${index}.figure`] = numberFault;
    else quantities[name] = read;
  });
  const lines: { label: string; amountMinor: number; at: number }[] = [];
  typed.lines.forEach(({ label, amount }, at) => {
    if (amount.trim() === '') return;
    const amountMinor = typedAmount(amount, currency);
    if (amountMinor === null) faults[`lines.${at}.amount`] = amountFault;
    else lines.push({ label, amountMinor, at });
  });
  const totalMinor = typed.total.trim() === '' ? null : typedAmount(typed.total, currency);
  if (typed.total.trim() !== '' && totalMinor === null) faults.total = amountFault;
  const parsed = billInput.safeParse({
    from: typed.from,
    to: dayAfter(typed.lastDay),
    quantities,
    lines: lines.map(({ label, amountMinor }) => ({ label, amountMinor })),
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

/** The field of the form that an issue of the bill belongs to. */
function fieldOf(path: PropertyKey[], typed: TypedBill, lines: { at: number }[]): string {
  const [head, second, third] = path.map(String);
  if (head === 'to') return 'lastDay';
  if (head === 'totalMinor') return 'total';
  if (head === 'quantities') return `quantities.${typed.quantities.findIndex(({ name }) => name === second)}.figure`;
  if (head === 'lines') return `lines.${lines[Number(second)]?.at ?? 0}.${third === 'label' ? 'label' : 'amount'}`;
  return head ?? 'from';
}
