import { wordOrdinal } from '../../core/units';
import type { AssumedValue } from '../../schemas/motor';
import type { ChargeGroup, PlanView, YearView } from '../../schemas/plan';
import { capacitorCaution } from '../ui/Caution';
import {
  capital,
  formatBillName,
  formatList,
  formatMajor,
  formatNumber,
  formatQuantity,
  formatSpelled,
} from '../ui/format';
import { ceilingWords, paybackInFull } from './money-words';
import { capacitorTurn } from './verdict';

/** Groups in the order of the tables, in words. */
export const groupNames: [ChargeGroup, string][] = [
  ['demand', 'Demand'],
  ['reactive', 'Reactive power'],
  ['energy', 'Energy, losses in it'],
  ['adjustment', 'Riders and credits'],
  ['fixed', 'Fixed'],
  ['tax', 'Tax'],
];

/** What would turn the verdict, and where the plan brings least. */
export function turningWords(year: YearView, plan: PlanView): { turn: string[]; least: string | null } {
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  const capacitors = capacitorTurn(year, plan);
  const turn = [ceilingWords(plan), ...(capacitors ? [capacitors] : [])];
  const savings = plan.bills.map((bill, index) => ({
    name: formatBillName(bill),
    saved: (year.standing.bills[index]?.total ?? 0) - bill.total,
  }));
  const least = savings.reduce((a, b) => (b.saved < a.saved ? b : a), savings[0] ?? { name: '', saved: 0 });
  if (savings.length === 0) return { turn, least: null };
  return { turn, least: leastWords(least, money) };
}

function leastWords(least: { name: string; saved: number }, money: (amount: number) => string): string {
  if (Math.abs(least.saved) < 0.5) return `${least.name}: nothing. What sets that bill does not move with the fields.`;
  return least.saved < 0
    ? `${least.name}: the bill rises by ${money(-least.saved)}.`
    : `${least.name}: ${money(least.saved)} saved.`;
}

/** What the search found, in a sentence. */
export function searchSentence(saving: number, leaveAlone: boolean, currency: string): string {
  if (leaveAlone) return 'Leave the fields alone: no setting within the limits makes the year cheaper.';
  return `The best setting saves ${formatMajor(saving, currency, { whole: true })} a year before any cost of the work.`;
}

/** Hours as a share that people can picture. */
export const hoursWords = (hours: number) => formatNumber(Math.round(hours));

/** What the bills say of a plan: caption and how to read the picture. */
export function billsFinding(year: YearView, plan: PlanView): { finding: string; reading: string } {
  const saved = plan.bills.map((bill, index) => (year.standing.bills[index]?.total ?? 0) - bill.total);
  const fallen = saved.filter((amount) => amount > 0.005).length;
  const most = saved.indexOf(Math.max(...saved));
  const peak = plan.bills[most];
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  const many =
    fallen === saved.length
      ? 'Every bill falls'
      : `${capital(formatSpelled(fallen))} of ${formatSpelled(saved.length)} bills fall`;
  const finding =
    fallen === 0 || !peak ? 'No bill falls.' : `${many}; ${formatBillName(peak)} most, by ${money(saved[most] ?? 0)}.`;
  const energy = plan.groupTotals.energy - year.standing.groupTotals.energy;
  const moved = `the energy lines ${energy < 0 ? 'fall' : 'rise'} by ${money(Math.abs(energy))} a year`;
  const reading = `Solid copper: what remains of demand and reactive lines. Hatched verdigris, figure above: what ${plan.name} takes away; ${moved}.`;
  return { finding, reading };
}

/** What the cumulative cash says of a plan. */
export function paybackFinding(plan: PlanView): string {
  if (plan.paybackWords === 'never')
    return `${plan.name} does not earn back its cost within ${plan.economics.horizonYears} years.`;
  const end = plan.cashFlow.at(-1)?.cumulative ?? 0;
  const after = `after ${plan.economics.horizonYears} years it has brought ${formatMajor(end, plan.currency, { whole: true })}`;
  return plan.paybackWords === 'at once'
    ? `It costs nothing to do; ${after}.`
    : `Paid back in ${paybackInFull(plan.appraisal.simplePaybackYears)}; ${after}.`;
}

/** What the losses do to the saving: how much of the gain they take back, or that they fall too. */
export function lossesFinding(year: YearView, plan: PlanView): string {
  const money = (amount: number) => formatMajor(Math.abs(amount), year.currency, { whole: true });
  const losses = plan.groupTotals.energy - year.standing.groupTotals.energy;
  const gained = plan.saving + losses;
  if (losses <= 0) return `The motors lose less too: ${money(losses)} of energy a year.`;
  if (gained <= 0) return `Extra losses of ${money(losses)} a year bring nothing in return.`;
  return `Extra losses take back ${money(losses)} of the ${money(gained)} gained.`;
}

/** What stands beside plans with capacitors: the usual caution, and each bank's resonance. */
export function capacitorSentences(year: YearView): string[] {
  const banks = year.plans.flatMap(({ name, banks: own }) => own.map((bank) => ({ name, bank })));
  if (banks.length === 0) return [];
  return [
    capacitorCaution,
    ...banks.map(({ name, bank }) => {
      const { resonance } = bank;
      if (!resonance) return `${name}: resonance is not checked, the short-circuit power is not known.`;
      const order = `order ${formatNumber(resonance.order, { decimals: 1 })}`;
      return resonance.near.length > 0
        ? `${name} resonates at ${order}, near the ${resonance.near.map(wordOrdinal).join(' and ')} harmonic: ${bank.detuningPercent ? 'choose another size or tuning' : 'detune it or choose another size'}.`
        : `${name} resonates at ${order}, half an order and more from the usual harmonics.`;
    }),
  ];
}

/** The assumed values that matter to the kvar in hand, in one sentence; null where none does. */
export function assumedSentence(plan: PlanView): string | null {
  const swing = ({ kvarEffect }: AssumedValue) => (kvarEffect ? Math.abs(kvarEffect[1] - kvarEffect[0]) : 0);
  const matter = plan.assumed.filter((one) => swing(one) >= 1).sort((a, b) => swing(b) - swing(a));
  const [widest] = matter;
  if (!widest) return null;
  const names = matter.map(
    (one) => `${one.label.replace(/^([A-Z])(?=[a-z]{2})/, (letter) => letter.toLowerCase())} of ${one.motorName}`,
  );
  const most = formatQuantity(swing(widest), 'kvar');
  return `Assumed, not read from a plate: ${formatList(names)}. Over its range the first moves the kvar in hand by ${most}.`;
}
