import { billQuantity, type BillView } from '../../../schemas/bill';
import type { UsedPlace } from './PageViewer';

const heads: Record<string, string> = {
  from: 'First day',
  lastDay: 'Last day',
  total: 'Printed total',
  invoice: 'Invoice',
  readOn: 'Read on',
};

/** What a kept field is called: `quantities.kwh.figure` -> "Energy", `lines.2.amount` -> the line's own name. */
function labelOf(key: string, bill: BillView): string {
  const [list, name = '', field] = key.split('.');
  if (list === 'quantities') return billQuantity(name).label;
  if (list !== 'lines') return heads[key] ?? key;
  const line = bill.lines[Number(name)]?.label ?? `Line ${Number(name) + 1}`;
  return field === 'amount' ? line : `${line}, ${field}`;
}

/** Where the values of a kept bill stand on its pages. */
export const keptPlaces = (bill: BillView): UsedPlace[] =>
  Object.entries(bill.places ?? {}).map(([path, place]) => ({ path, place, label: labelOf(path, bill) }));
