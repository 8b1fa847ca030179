import { wordOrdinal } from '../../core/units';
import type { AssumedValue } from '../../schemas/motor';
import type { ChargeGroup, PlanView, YearView } from '../../schemas/plan';
import { capacitorCaution } from '../ui/Caution';
import { directionOf, isAsToday } from '../ui/setting-words';
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

/** Groups in the order of the tables, in words. */
export const groupNames: [ChargeGroup, string][] = [
  ['demand', 'Demand'],
  ['reactive', 'Reactive power'],
  ['energy', 'Energy, losses in it'],
  ['adjustment', 'Riders and credits'],
  ['fixed', 'Fixed'],
  ['tax', 'Tax'],
];

/** All capacitors of a plan together. [kvar] */
export const bankKvar = ({ banks }: PlanView) => banks.reduce((sum, { kvar }) => sum + kvar, 0);

/** What a plan does: "Raise two fields", "Leave the fields alone and add 900 kvar of capacitors". */
export function actionWords(plan: PlanView): string {
  const kvar = bankKvar(plan);
  const bank = kvar > 0 ? ` and add ${formatQuantity(kvar, 'kvar')} of capacitors` : '';
  return `${fieldAction(plan.fields.filter((field) => !isAsToday(field)))}${bank}`;
}

function fieldAction(fields: PlanView['fields']): string {
  const [first] = fields;
  if (!first) return 'Leave the fields alone';
  const all = (direction: 'up' | 'down') => fields.every((field) => directionOf(field) === direction);
  const verb = all('up') ? 'Raise' : all('down') ? 'Lower' : 'Reset';
  return fields.length === 1 ? `${verb} the field of ${first.name}` : `${verb} ${formatSpelled(fields.length)} fields`;
}

/** Plans by net present value, the best first. */
export const byValue = (plans: PlanView[]) => [...plans].sort((a, b) => b.appraisal.npv - a.appraisal.npv);

/** The plan a page shows in full: the chosen one, else the best by net present value. */
export const shownPlan = (year: YearView): PlanView | null => year.chosen ?? byValue(year.plans)[0] ?? null;

const worthDoing = (plan: PlanView) => plan.saving > 0 && plan.appraisal.npv > 0;

/** When a plan has paid for itself, in a sentence's words. */
function paybackPhrase(plan: PlanView): string {
  if (plan.paybackWords === 'never') return `does not pay back within ${plan.economics.horizonYears} years`;
  return plan.paybackWords === 'at once' ? 'costs nothing to do' : `pays back in ${plan.paybackWords}`;
}

/** What a plan does to the year's bills, in a sentence's words. */
function savingPhrase({ saving, currency }: PlanView): string {
  const money = (amount: number) => formatMajor(amount, currency, { whole: true });
  if (Math.round(saving) === 0) return 'saves nothing';
  return saving > 0 ? `saves ${money(saving)} a year` : `makes the year ${money(-saving)} dearer`;
}

/** The finding of the station: what to do, what it saves, what it costs; honest where nothing pays. */
export function plansVerdict(year: YearView, shown: PlanView | null): { title: string; lead: string } {
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  if (!shown) {
    return {
      title: `As it runs now the year costs ${money(year.standing.yearTotal)}; ${money(year.standing.reactiveCost)} of it is the price of reactive power.`,
      lead: 'No plan yet. Search for the best field currents, or enter settings of your own.',
    };
  }
  const best = byValue(year.plans)[0] ?? shown;
  if (!worthDoing(best)) {
    return {
      title: 'Leave the fields alone: no plan brings in more than it costs.',
      lead: `The nearest, ${best.name}, ${savingPhrase(best)} and ${paybackPhrase(best)}.`,
    };
  }
  const cost = shown.capitalCost > 0 ? ` for ${money(shown.capitalCost)}` : '';
  const left = year.standing.reactiveCost - shown.saving;
  return {
    title: `${actionWords(shown)}: ${shown.name} ${savingPhrase(shown)}${cost} and ${paybackPhrase(shown)}.`,
    lead: leadOf(year, shown, left),
  };
}

function leadOf(year: YearView, shown: PlanView, left: number): string {
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  const other = byValue(year.plans).find((plan) => plan.id !== shown.id);
  if (other) {
    const difference = other.appraisal.npv - shown.appraisal.npv;
    return difference > 0
      ? `${other.name} would be worth ${money(difference)} more in present value.`
      : `${other.name} would save ${money(other.saving)} a year and be worth ${money(-difference)} less in present value.`;
  }
  return left > 0
    ? `Of the ${money(year.standing.reactiveCost)} a year that reactive power costs today, ${money(left)} stay.`
    : 'It takes away all that reactive power costs today.';
}

/** What would turn the verdict, and where the plan brings least. */
export function turningWords(year: YearView, plan: PlanView): { turn: string; least: string | null } {
  const money = (amount: number) => formatMajor(amount, year.currency, { whole: true });
  const turn = ceilingWords(plan);
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
