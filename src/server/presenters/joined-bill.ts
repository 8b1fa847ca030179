import { billQuantity, daysBetween, type BillLineView, type BillView } from '../../schemas/bill';

const demands = ['billedKw', 'billedKva', 'maxKw', 'maxKva'];

/** The invoice that carries the demand: of the first kind of demand that any of them prints, the highest. */
function carrierOf(parts: BillView[]): BillView | null {
  const name = demands.find((one) => parts.some((part) => (part.quantities[one] ?? 0) > 0));
  if (!name) return null;
  return parts.reduce((highest, part) =>
    (part.quantities[name] ?? 0) > (highest.quantities[name] ?? 0) ? part : highest,
  );
}

/**
 * Quantities of the whole: energies add up, demands are the highest, anything else (a power factor) is that of the invoice
 * that carries the demand, or the one all of them print. An energy that one of them does not print is not known for the whole.
 */
function quantitiesOf(parts: BillView[]): Record<string, number> {
  const carrier = carrierOf(parts);
  const names = [...new Set(parts.flatMap((part) => Object.keys(part.quantities)))];
  const whole: Record<string, number> = {};
  for (const name of names) {
    const printed = parts.flatMap((part) => part.quantities[name] ?? []);
    const { unit } = billQuantity(name);
    if (unit === 'kWh' || unit === 'kvarh') {
      if (printed.length === parts.length) whole[name] = printed.reduce((sum, one) => sum + one, 0);
    } else if (unit !== '') whole[name] = Math.max(...printed);
    else {
      const told = carrier?.quantities[name] ?? (new Set(printed).size === 1 ? printed[0] : undefined);
      if (told !== undefined) whole[name] = told;
    }
  }
  return whole;
}

/** Lines of the same label added; quantity and rate stay where all of them were billed at one rate. */
function linesOf(parts: BillView[]): BillLineView[] {
  const whole = new Map<string, BillLineView>();
  for (const line of parts.flatMap((part) => part.lines)) {
    const before = whole.get(line.label);
    whole.set(line.label, before ? added(before, line) : line);
  }
  return [...whole.values()];
}

function added(one: BillLineView, other: BillLineView): BillLineView {
  const amountMinor = one.amountMinor + other.amountMinor;
  const [billed, nought] = one.amountMinor === 0 ? [other, one] : [one, other];
  if (nought.amountMinor === 0) return { ...billed, id: one.id, amountMinor };
  const isAlike = one.rate === other.rate && one.unit === other.unit;
  const quantity =
    isAlike && typeof one.quantity === 'number' && typeof other.quantity === 'number'
      ? one.quantity + other.quantity
      : null;
  return { ...one, amountMinor, quantity, unit: isAlike ? one.unit : null, rate: isAlike ? one.rate : null };
}

/** File and rows of the whole; null where the invoices came by different ways. */
function sourceOf(parts: BillView[]): BillView['source'] {
  const [first] = parts.map((part) => part.source);
  if (!first || parts.some((part) => part.source?.intakeId !== first.intakeId)) return null;
  const rows = parts.flatMap((part) => part.source?.row ?? []);
  return { ...first, row: rows.length > 0 ? rows.join(', ') : null };
}

/** Invoices that make one bill, as the bill everybody else sees: its id is that of the first. `parts` are in order. */
export function joinedBill(parts: BillView[], joinNote: string | null): BillView {
  const [first] = parts;
  const last = parts.at(-1);
  if (!first || !last) throw new RangeError('parts must hold at least one bill, got none');
  const lines = linesOf(parts);
  const linesMinor = lines.reduce((sum, line) => sum + line.amountMinor, 0);
  const totals = parts.flatMap((part) => part.totalMinor ?? []);
  const totalMinor = totals.length === parts.length ? totals.reduce((sum, total) => sum + total, 0) : null;
  return {
    ...first,
    to: last.to,
    days: daysBetween(first.from, last.to),
    invoice: null,
    readOn: last.readOn,
    estimated: parts.some((part) => part.estimated),
    quantities: quantitiesOf(parts),
    lines,
    linesMinor,
    totalMinor,
    differenceMinor: totalMinor === null || lines.length === 0 ? null : linesMinor - totalMinor,
    source: sourceOf(parts),
    pages: parts.flatMap((part) => part.pages ?? []),
    places: {},
    parts,
    joinNote,
  };
}
