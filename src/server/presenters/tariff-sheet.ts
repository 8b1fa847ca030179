import type { PricedLine } from '../../core/tariff';
import type { Finding, LinePair, PricedYear, ReconciledBill } from '../../schemas/pricing';
import type { PairView, SheetColumn, SheetRow, TariffSheetView } from '../../schemas/tariff-sheet';
import { toMinorUnits } from '../../core/units';
import { namesBehind } from './why';

/** The year as the tariff sheet shows it. */
export function presentTariffSheet(
  year: PricedYear,
  { origins, ...about }: { code: string; choiceVersion: number; origins: Record<string, string> },
): TariffSheetView {
  const rows = year.bills.map((bill) => rowOf(bill, year, origins));
  const lines = new Map(year.bills.flatMap((bill) => bill.priced.lines.map((line) => [line.id, line.label] as const)));
  return {
    ...about,
    currency: year.currency,
    columns: columnsOf(year, rows),
    rows,
    lines: [...lines].map(([id, label]) => ({ id, label })),
  };
}

const demandLineOf = (bill: ReconciledBill) =>
  bill.priced.lines.find((line) => line.group === 'demand' && line.quantity !== undefined && line.unit !== undefined);

/** The metered peak behind a bill's demand, or its first peak at all. */
function peakNameOf(bill: ReconciledBill): string | undefined {
  const behind = namesBehind(bill.priced, demandLineOf(bill)?.uses ?? []);
  const { quantities } = bill.priced;
  const peaked = (name: string) => quantities[name]?.at !== undefined;
  const sameKind = (name: string) => /^k(W|VA)$/.test(quantities[name]?.unit ?? '');
  return behind.find((name) => peaked(name) && sameKind(name)) ?? Object.keys(quantities).find(peaked);
}

function powerFactorNameOf(bill: ReconciledBill): string | undefined {
  const { quantities, lines } = bill.priced;
  const behind = namesBehind(
    bill.priced,
    lines.flatMap((line) => line.uses),
  );
  return behind.find((name) => {
    const quantity = quantities[name];
    return quantity && /^(pf|cos|powerFactor)/i.test(name) && quantity.value > 0 && quantity.value <= 1;
  });
}

function rowOf(reconciled: ReconciledBill, year: PricedYear, origins: Record<string, string>): SheetRow {
  const { bill, priced, name, pricedMinor, billedMinor, differenceMinor, findings } = reconciled;
  const own = year.findings.filter((finding) => finding.billId === bill.id);
  return {
    billId: bill.id,
    name,
    from: bill.from,
    to: bill.to,
    quantities: quantitiesOf(reconciled),
    ratchet: isSetByRatchet(reconciled, year.lookBacks),
    groups: groupsOf(priced.lines, year.currency),
    pricedMinor,
    billedMinor,
    differenceMinor,
    findings,
    pairs: reconciled.pairs.map((pair, index) => pairOf(pair, index, own, origins)),
    notes: priced.notes,
  };
}

function quantitiesOf(bill: ReconciledBill): SheetRow['quantities'] {
  const { quantities, lines } = bill.priced;
  const energyLines = lines.filter((line) => line.group === 'energy' && line.unit === 'kWh');
  const demand = demandLineOf(bill);
  const peak = peakNameOf(bill);
  const pf = powerFactorNameOf(bill);
  const found: SheetRow['quantities'] = {};
  if (energyLines.length > 0) {
    found.energy = { value: energyLines.reduce((sum, line) => sum + (line.quantity ?? 0), 0), figure: 'group:energy' };
  }
  if (peak) found.peak = { value: quantities[peak]!.value, figure: `name:${peak}` };
  if (pf) found.pf = { value: quantities[pf]!.value, figure: `name:${pf}` };
  if (demand?.quantity !== undefined) found.billed = { value: demand.quantity, figure: `line:${demand.id}` };
  if (demand?.rate !== undefined) found.rate = { value: demand.rate, figure: `line:${demand.id}` };
  return found;
}

/** A demand above what the bill's own peaks give, with a look-back behind it, is set by the ratchet. */
function isSetByRatchet(bill: ReconciledBill, lookBacks: string[]): boolean {
  const demand = demandLineOf(bill);
  if (demand?.quantity === undefined) return false;
  const { quantities } = bill.priced;
  const restsOnPast = (name: string): boolean =>
    lookBacks.includes(name) || (quantities[name]?.uses ?? []).some((used) => restsOnPast(used));
  const behind = namesBehind(bill.priced, demand.uses);
  const own = behind.filter((name) => quantities[name]?.unit === demand.unit && !restsOnPast(name));
  const highestOwn = Math.max(0, ...own.map((name) => quantities[name]!.value));
  return behind.some((name) => lookBacks.includes(name)) && highestOwn < demand.quantity;
}

function groupsOf(lines: PricedLine[], currency: string): SheetRow['groups'] {
  const groups = { energy: 0, demand: 0, reactive: 0, other: 0 };
  for (const line of lines) {
    const group =
      line.group === 'energy' || line.group === 'demand' || line.group === 'reactive' ? line.group : 'other';
    groups[group] += toMinorUnits(line.amount, currency);
  }
  return groups;
}

function pairOf(pair: LinePair, index: number, findings: Finding[], origins: Record<string, string>): PairView {
  const { line, billed } = pair;
  const label = line?.label ?? billed.map((one) => one.label).join(' + ');
  const finding = findings.find((one) =>
    line ? one.lineId === line.id : one.lineId === null && one.lineLabel === label,
  );
  return {
    key: `${line?.id ?? 'alone'}-${index}`,
    lineId: line?.id ?? null,
    label,
    group: line?.group ?? null,
    clause: line?.clause ?? null,
    quantity: line?.quantity ?? null,
    unit: line?.unit ?? null,
    rate: line?.rate ?? null,
    pricedMinor: pair.pricedMinor,
    billed: billed.map(({ label: printed, amountMinor }) => ({ label: printed, amountMinor })),
    billedMinor: pair.billedMinor,
    differenceMinor: pair.differenceMinor,
    matchedBy: pair.matchedBy,
    remembered: billed.map((one) => origins[one.label]).find((words) => words !== undefined) ?? null,
    finding: finding?.letter ?? null,
  };
}

/** Columns that at least one bill fills, with units and decimals of what they hold. */
function columnsOf(year: PricedYear, rows: SheetRow[]): SheetColumn[] {
  const [first] = year.bills;
  if (!first) return [];
  const peak = peakNameOf(first);
  const demand = demandLineOf(first);
  const all: SheetColumn[] = [
    { key: 'energy', head: 'Energy', unit: 'kWh', decimals: 0 },
    { key: 'peak', head: 'Peak', unit: peak ? first.priced.quantities[peak]!.unit : 'kW', decimals: 0 },
    { key: 'pf', head: 'pf', unit: '', decimals: 2 },
    { key: 'billed', head: 'Billed', unit: demand?.unit ?? 'kW', decimals: 0 },
    { key: 'rate', head: 'Rate', unit: `${year.currency}/${demand?.unit ?? 'kW'}`, decimals: 2 },
  ];
  return all.filter(({ key }) => rows.some((row) => row.quantities[key] !== undefined));
}
