import { dayNumber } from '../../core/load';
import type { BillsStation, BillView } from '../../schemas/bill';
import { listBills } from './bills';
import type { OpenEngagement } from './engagements';
import { listIntakes } from './intervals';
import { joinSuggestions } from './join-suggestions';
import { meterChecks } from './meter-check';

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
    joinable: joinSuggestions(all),
  };
}
