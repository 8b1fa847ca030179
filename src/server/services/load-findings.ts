import { formatBillName } from '../../components/ui/format';
import {
  checkLoad,
  endOfLoad,
  localDateOf,
  localDateStartMs,
  type LoadFinding,
  type LoadSeries,
} from '../../core/load';
import { Bill } from '../models/Bill';
import type { OpenEngagement } from './engagements';
import { billsWithin } from './intake-guard';

/** What the readings of a meter show that may not be true, held against the kept bills too where one meter is billed. */
export async function loadFindings(
  { engagement, meters, site: { timeZone } }: OpenEngagement,
  load: LoadSeries,
): Promise<LoadFinding[]> {
  const [from, to] = [localDateOf(load.startMs, timeZone), localDateOf(endOfLoad(load) - 1, timeZone)];
  const bills = meters.length === 1 ? await billsWithin(engagement.id, from, to) : [];
  return checkLoad(load, { timeZone, said: bills.flatMap((bill) => saidBy(bill, timeZone)) });
}

function saidBy(bill: Bill, timeZone: string) {
  const { kwh } = bill.quantities;
  if (kwh === undefined) return [];
  const { periodFrom: from, periodTo: to } = bill;
  const [fromMs, toMs] = [localDateStartMs(from, timeZone), localDateStartMs(to, timeZone)];
  return [{ name: formatBillName({ from, to }), fromMs, toMs, kwh }];
}
