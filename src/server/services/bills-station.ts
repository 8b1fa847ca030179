import { dayNumber, localDateStartMs } from '../../core/load';
import type { BillsStation, BillView, MeterCheck } from '../../schemas/bill';
import { ServiceError } from '../errors';
import { listBills } from './bills';
import type { OpenEngagement } from './engagements';
import { listIntakes } from './intervals';
import { loadSeries } from './readings';

/** Everything the station Bills shows. */
export async function billsStation(opened: OpenEngagement): Promise<BillsStation> {
  const { engagement, site } = opened;
  const [all, files] = await Promise.all([listBills(engagement.id), listIntakes(opened, 'bills')]);
  const begins = dayNumber(engagement.yearFrom);
  const ends = dayNumber(engagement.yearTo);
  const inYear = (bill: BillView) => {
    const middle = (dayNumber(bill.from) + dayNumber(bill.to)) / 2;
    return middle >= begins && middle < ends;
  };
  const bills = all.filter(inYear);
  return {
    code: engagement.code,
    currency: engagement.currency,
    timeZone: site.timeZone,
    year: { from: engagement.yearFrom, to: engagement.yearTo },
    bills,
    laterBills: all.filter((bill) => !inYear(bill)),
    files,
    meterChecks: await meterChecks(opened, bills),
  };
}

/** Sums the kept readings over every bill that prints its energy; a period with a missing reading is left out. */
async function meterChecks({ meter, site }: OpenEngagement, bills: BillView[]): Promise<MeterCheck[]> {
  const printed = bills.filter((bill) => bill.quantities.kwh !== undefined);
  const [first] = printed;
  if (!first) return [];
  const startOf = (date: string) => localDateStartMs(date, site.timeZone);
  const end = printed.reduce((latest, bill) => (bill.to > latest ? bill.to : latest), first.to);
  const load = await loadSeries(meter.id, startOf(first.from), startOf(end)).catch((error: unknown) => {
    if (error instanceof ServiceError) return null;
    throw error;
  });
  if (!load) return [];
  const indexOf = (date: string) => Math.round((startOf(date) - load.startMs) / (load.stepMinutes * 60_000));
  return printed.flatMap((bill) => {
    const meterKwh = load.kwh.subarray(indexOf(bill.from), indexOf(bill.to)).reduce((sum, kwh) => sum + kwh, 0);
    return Number.isNaN(meterKwh) ? [] : [{ billId: bill.id, billedKwh: bill.quantities.kwh ?? 0, meterKwh }];
  });
}
