import {
  capital,
  formatDate,
  formatList,
  formatMajor,
  formatMoney,
  formatNumber,
  formatSpelled,
} from '../../components/ui/format';
import type { PricedYear } from '../../schemas/pricing';

const billsWord = (count: number) => (count === 1 ? 'bill' : 'bills');

/** Names of the bills that cannot be compared, since readings of their period are missing. */
const incompleteBills = ({ bills }: PricedYear) =>
  bills.filter((bill) => bill.missingReadings > 0).map(({ name }) => name);

/** The sheet's heading: the finding with its amount. */
export function tariffHeadline(year: PricedYear): string {
  const { bills, currency, totals } = year;
  const money = (minor: number) => formatMoney(minor, currency);
  const compared = bills.filter((bill) => bill.differenceMinor !== null);
  const incomplete = incompleteBills(year);
  if (compared.length === 0 && incomplete.length > 0) {
    const which = bills.length === 1 ? 'the bill cannot' : `none of the ${formatSpelled(bills.length)} bills can`;
    return `Readings are missing, so ${which} be held against the schedule yet.`;
  }
  if (compared.length === 0) {
    return `${capital(formatSpelled(bills.length))} ${billsWord(bills.length)} priced at ${money(totals.pricedMinor)}; none says what the utility charged.`;
  }
  const faulty = compared.filter((bill) => bill.findings.length > 0);
  const rest = compared.filter((bill) => bill.findings.length === 0);
  const largest = Math.max(0, ...rest.map((bill) => Math.abs(bill.differenceMinor ?? 0)));
  const agreement = largest === 0 ? 'agree to the cent' : `agree within ${cents(largest, currency)}`;
  if (faulty.length === 0) {
    return `The utility billed rightly: ${rest.length === 1 ? 'the bill' : `all ${formatSpelled(rest.length)} bills`} ${agreement.replace('agree', rest.length === 1 ? 'agrees' : 'agree')}.`;
  }
  const whole = faulty.reduce((sum, bill) => sum + (bill.differenceMinor ?? 0), 0);
  const verb = whole >= 0 ? 'over-billed' : 'under-billed';
  const over = `The utility ${verb} ${money(Math.abs(whole))} in`;
  if (rest.length === 0)
    return `${over} ${compared.length === 1 ? 'its one bill' : `all ${formatSpelled(compared.length)} bills`}.`;
  const head = `${over} ${formatSpelled(faulty.length)} of ${formatSpelled(compared.length)} ${billsWord(compared.length)}`;
  return `${head}; the other ${rest.length === 1 ? `one ${agreement.replace('agree', 'agrees')}` : `${formatSpelled(rest.length)} ${agreement}`}.`;
}

function cents(minor: number, currency: string): string {
  return minor < 13 && currency === 'USD'
    ? `${formatSpelled(minor)} ${minor === 1 ? 'cent' : 'cents'}`
    : formatMoney(minor, currency);
}

/** The line under the heading: from what, on what, and what poor power factor costs. */
export function tariffLead(year: PricedYear, schedule: { title: string; inForce: string | null }): string {
  const { readings, route, totals, currency } = year;
  const source =
    route === 'intervals'
      ? `Priced from ${formatNumber(readings.present)} readings`
      : 'Priced from the quantities printed on the bills, since no meter intervals are kept,';
  const force = schedule.inForce ? ` as in force from ${formatDate(schedule.inForce)}` : '';
  const cost = `Poor power factor costs ${formatMoney(totals.reactiveMinor, currency, { whole: true })} of this year.`;
  const incomplete = incompleteBills(year);
  const missing = formatNumber(readings.expected - readings.present);
  const left =
    incomplete.length > 0
      ? ` ${missing} readings are missing: ${formatList(incomplete)} ${incomplete.length === 1 ? 'is' : 'are'} priced too low and compared with no bill.`
      : '';
  return `${source} on ${schedule.title}${force}. ${cost}${left}${year.clock ? ` ${year.clock}` : ''}`;
}

/** What share of the cost of poor power factor sits in which lines, as a sentence with its amount. */
export function reactiveFinding(parts: { demand: number; reactive: number; other: number }, currency: string): string {
  const total = parts.demand + parts.reactive + parts.other;
  if (Math.abs(total) < 0.005) return 'Poor power factor cost nothing on these bills.';
  const named: [string, number][] = [
    ['the demand lines', parts.demand],
    ['the lines for kvarh and power factor', parts.reactive],
    ['taxes, adjustments and energy', parts.other],
  ];
  const [place, amount] = named.sort((a, b) => Math.abs(b[1]) - Math.abs(a[1]))[0]!;
  const share = Math.round((100 * amount) / total);
  return `${share} % of the ${formatMajor(total, currency)} sit in ${place}.`;
}
