import { localDateOf, zoneOffsetMs } from '../load';
import type { EspiEntry, EspiFeed, EspiNode } from './espi-feed';
import { scaledUnit } from './espi-meaning';
import type { BillCharge, BillRecord } from './bill-types';
import type { IntakeNote } from './types';
import { scaled } from './units';

/** Amounts of a feed are whole hundred-thousandths of the currency (NAESB REQ.21). */
const amountsPerUnit = 100_000;
const dayMs = 86_400_000;

/** A summary as a bill, with what had to be said about it. */
export interface SummaryBill {
  bill: BillRecord;
  /** ISO code; undefined where the feed names none that is known. */
  currency: string | undefined;
  /** Line of the file it begins on. */
  line: number;
  notes: IntakeNote[];
}

// Numbers of ISO 4217, from memory.
const currencies = new Map(
  Object.entries({
    36: 'AUD',
    124: 'CAD',
    203: 'CZK',
    208: 'DKK',
    356: 'INR',
    392: 'JPY',
    410: 'KRW',
    484: 'MXN',
    554: 'NZD',
    578: 'NOK',
    710: 'ZAR',
    752: 'SEK',
    756: 'CHF',
    826: 'GBP',
    840: 'USD',
    978: 'EUR',
    985: 'PLN',
    986: 'BRL',
  }),
);

// Kinds of line items (REQ.21): what a line is called that has no note of its own.
const lineKinds: Record<string, string> = {
  1: 'Generation',
  2: 'Delivery',
  3: 'Usage',
  4: 'Administration',
  5: 'Tax',
  6: 'Energy credit',
  7: 'Administrative credit',
  8: 'Credit',
};
const payment = '9';
const information = '10';

const child = (node: EspiNode, name: string): EspiNode | undefined => node.children.find((one) => one.name === name);
const textOf = (node: EspiNode, name: string): string => child(node, name)?.text ?? '';

function amountOf(text: string): number | null {
  const figure = text === '' ? Number.NaN : Number(text);
  return Number.isFinite(figure) ? figure / amountsPerUnit : null;
}

/** Entries that are summaries of a billed period. */
export const summariesOf = (feed: EspiFeed): EspiEntry[] => feed.entries.filter((entry) => entry.tree !== null);

/** The bill of a summary; null where it has neither period nor anything that was billed. */
export function billOfSummary(
  { tree, line }: EspiEntry,
  { timeZone, currencyCode }: { timeZone: string; currencyCode: string | undefined },
): SummaryBill | null {
  if (!tree) return null;
  const notes: IntakeNote[] = [];
  const where = `line ${line}`;
  const period = periodOf(tree, timeZone, where, notes);
  if (!period) return null;
  const quantities = quantitiesOf(tree, where, notes);
  const total = amountOf(textOf(tree, 'billLastPeriod'));
  const charges = chargesOf(tree, where, notes);
  noteRest(charges, total, where, notes);
  if (total === null && charges.length === 0 && Object.keys(quantities).length === 0) return null;
  const number = textOf(tree, 'currency') || currencyCode || '';
  const currency = currencies.get(String(Number(number)));
  if (number !== '' && !currency)
    notes.push({ code: 'currency-unknown', message: `The currency number ${number} is not known.`, where });
  return { bill: { period, quantities, charges, total }, currency, line, notes };
}

/** Local dates of the period; its ends are instants, taken to the nearest local midnight. */
function periodOf(tree: EspiNode, timeZone: string, where: string, notes: IntakeNote[]): BillRecord['period'] | null {
  const span = child(tree, 'billingPeriod');
  const [start, duration] = [Number(span && textOf(span, 'start')), Number(span && textOf(span, 'duration'))];
  if (!span || !(start > 0) || !(duration > 0)) return null;
  const ends = [start, start + duration].map((seconds) => seconds * 1000);
  const [from = '', to = ''] = ends.map((ms) => localDateOf(ms + dayMs / 2, timeZone));
  const isOff = ends.some((ms) => (ms + zoneOffsetMs(ms, timeZone)) % dayMs !== 0);
  if (isOff) {
    notes.push({
      code: 'period-not-midnight',
      message: `The billed period does not begin and end at midnight in ${timeZone}: ${from} and ${to} are the nearest days. Check the zone and the printed bill.`,
      where,
    });
  }
  return { from, to };
}

const demandNames: Record<string, string> = { kW: 'maxKw', kVA: 'maxKva', kvar: 'maxKvar' };
const energyNames: Record<string, string> = { kWh: 'kwh', kvarh: 'kvarh', kVAh: 'kvah' };

function quantitiesOf(tree: EspiNode, where: string, notes: IntakeNote[]): Record<string, number> {
  const quantities: Record<string, number> = {};
  const take = (part: string, names: Record<string, string>): void => {
    const node = child(tree, part);
    const measured = node && measurementOf(node);
    if (!node || textOf(node, 'value') === '') return;
    const name = measured && names[measured.unit];
    if (measured && name) quantities[name] = measured.figure;
    else
      notes.push({
        code: 'quantity-left-out',
        message: `${part} has the unit code ${textOf(node, 'uom') || 'absent'}, which is none that a bill counts there.`,
        where,
      });
  };
  take('overallConsumptionLastPeriod', energyNames);
  take('peakDemand', demandNames);
  take('ratchetDemand', { kW: 'ratchetKw', kVA: 'ratchetKva' });
  return quantities;
}

/** A measurement in kWh, kvarh, kVAh, kW, kvar or kVA. */
function measurementOf(node: EspiNode): { figure: number; unit: string } | null {
  const unit = scaledUnit(textOf(node, 'uom'), textOf(node, 'powerOfTenMultiplier') || undefined);
  const value = textOf(node, 'value');
  if (!unit || value === '' || !Number.isFinite(Number(value))) return null;
  return { figure: scaled(Number(value) * unit.scale, unit.factor), unit: `k${unit.unit}` };
}

function chargesOf(tree: EspiNode, where: string, notes: IntakeNote[]): BillCharge[] {
  const lines = tree.children.filter((one) => one.name === 'costAdditionalDetailLastPeriod');
  const charges = lines.flatMap((line): BillCharge[] => {
    const amount = amountOf(textOf(line, 'amount'));
    const kind = textOf(line, 'itemKind');
    const label = textOf(line, 'note') || lineKinds[kind] || 'Line without a name';
    if (amount === null) return [];
    if (kind === payment || kind === information) {
      const what = kind === payment ? 'a payment' : 'for information';
      notes.push({ code: 'line-left-out', message: `“${label}” (${amount}) is ${what}, no charge.`, where });
      return [];
    }
    return [{ label, amount, ...measuredLine(line, amount) }];
  });
  const lump = amountOf(textOf(tree, 'costAdditionalLastPeriod'));
  return lines.length === 0 && lump !== null && lump !== 0 ? [{ label: 'Additional charges', amount: lump }] : charges;
}

/** A feed may name the additional lines alone: the rest of the total then has none, which is no fault of the bill. */
function noteRest(charges: readonly BillCharge[], total: number | null, where: string, notes: IntakeNote[]): void {
  if (total === null || charges.length === 0) return;
  const rest = total - charges.reduce((sum, { amount }) => sum + amount, 0);
  if (Math.abs(rest) < 0.005) return;
  notes.push({
    code: 'lines-partial',
    message: `The summary names additional lines alone: ${rest.toFixed(2)} of the total of ${total.toFixed(2)} have no line.`,
    where,
  });
}

/** Quantity, unit and rate of a line; the rate only where it gives the amount, since feeds scale it in several ways. */
function measuredLine(line: EspiNode, amount: number): Partial<BillCharge> {
  const node = child(line, 'measurement');
  const measured = node && measurementOf(node);
  if (!measured) return {};
  const { figure: quantity, unit } = measured;
  const printed = Number(textOf(line, 'unitCost') || Number.NaN);
  const fits = (rate: number): boolean => Math.abs(rate * quantity - amount) <= 0.01 * Math.max(0.5, Math.abs(amount));
  const rate = [printed / amountsPerUnit, printed].find((one) => Number.isFinite(one) && fits(one));
  return { quantity, unit, ...(rate === undefined ? {} : { rate }) };
}
