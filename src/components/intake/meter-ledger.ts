import { billQuantity, daysBetween, type BillView, type MeterCheck, type MeterFigure } from '../../schemas/bill';
import { formatBillName } from '../ui/format';
import type { LedgerColumn, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import { offInPercent } from './meter-words';

const order = ['kwh', 'maxKw', 'maxKva', 'kvarh', 'kvarhLeading', 'powerFactor'];
const sums = new Set(['kwh', 'kvarh', 'kvarhLeading']);

/** Quantities that any bill prints and any meter could show, in their order. */
const namesOf = (checks: MeterCheck[]) =>
  order.filter((name) => checks.some(({ figures }) => figures.some((figure) => figure.name === name)));

const tones = { true: undefined, false: 'fault', null: 'quiet' } as const;

function columnsOf(names: string[]): LedgerColumn[] {
  return [
    { key: 'name', head: 'Bill of' },
    { key: 'days', head: 'Days', kind: 'number', spare: true },
    ...names.flatMap((name): LedgerColumn[] => {
      const { label, unit } = billQuantity(name);
      const decimals = name === 'powerFactor' ? 2 : 0;
      return [
        { key: `${name}:printed`, head: label, unit: unit ? `${unit} billed` : 'billed', kind: 'number', decimals },
        { key: `${name}:metered`, head: 'Metered', unit: unit || undefined, kind: 'number', decimals, quiet: true },
        ...(sums.has(name) ? [{ key: `${name}:off`, head: 'Off', align: 'right' as const }] : []),
      ];
    }),
    { key: 'said', head: 'Readings', wrap: true, quiet: true },
  ];
}

function figureCells({ name, printed, metered, agrees }: MeterFigure, isLeast: boolean): Record<string, LedgerValue> {
  const tone = tones[`${agrees}`];
  if (metered === null) return { [`${name}:printed`]: printed };
  return {
    [`${name}:printed`]: { value: printed, tone: agrees === false ? 'fault' : undefined },
    [`${name}:metered`]: { value: metered, prefix: isLeast && name !== 'powerFactor' ? '≥' : undefined },
    [`${name}:off`]: isLeast ? null : { value: offInPercent(printed, metered), tone },
  };
}

/** How many readings there are, in a word. */
function readingsWords({ missing, estimated }: MeterCheck): string {
  if (missing > 0) return `${missing} missing`;
  return estimated > 0 ? `${estimated} estimated` : 'all';
}

/** Bills beside the readings: billed, metered, by how much they are off; a letter where something is to be said. */
export function meterLedger(bills: BillView[], checks: MeterCheck[]): LedgerData {
  const columns = columnsOf(namesOf(checks));
  const letters = meterLetters(checks);
  const rows = checks.flatMap((check): LedgerRow[] => {
    const bill = bills.find(({ id }) => id === check.billId);
    if (!bill) return [];
    const cells: Record<string, LedgerValue> = {
      name: formatBillName(bill),
      days: daysBetween(bill.from, bill.to),
      said: readingsWords(check),
    };
    for (const figure of check.figures) Object.assign(cells, figureCells(figure, check.missing > 0));
    const differs = check.figures.some(({ agrees }) => agrees === false);
    const finding = letters.get(check.billId);
    return [{ id: String(bill.id), cells, finding, caution: !differs, kind: differs ? 'asks' : 'plain' }];
  });
  return { columns, rows };
}

/** Remarks that hold for every bill are said once; what is left is each bill's own. */
export function sharedRemarks(checks: MeterCheck[]): { shared: string[]; own: MeterCheck[] } {
  const [first, ...others] = checks;
  const shared =
    first && others.length > 0
      ? first.remarks.filter((remark) => others.every(({ remarks }) => remarks.includes(remark)))
      : [];
  const ownOf = (check: MeterCheck) => check.remarks.filter((remark) => !shared.includes(remark));
  return { shared, own: checks.map((check) => ({ ...check, remarks: ownOf(check) })) };
}

/** Numbers of the bills with something of their own to say, the same in the table and on the slips. */
export function meterLetters(checks: MeterCheck[]): Map<number, string> {
  const said = sharedRemarks(checks).own.filter(({ remarks }) => remarks.length > 0);
  return new Map(said.map(({ billId }, index) => [billId, String(index + 1)]));
}
