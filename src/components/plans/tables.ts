import { addDays } from '../../core/load';
import { toMinorUnits, wordOrdinal } from '../../core/units';
import { constantFieldA } from '../../schemas/plan-settings';
import { settingValueWords } from '../ui/setting-words';
import type { PricedBillView, PlanView, YearView } from '../../schemas/plan';
import type { LedgerCell, LedgerColumn, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import { formatAmount, formatBillName, formatDay, formatNumber } from '../ui/format';
import { groupNames, hoursWords } from './words';

interface Entry {
  label: string;
  unit: string;
  cell: (plan: PlanView) => LedgerValue;
  kind?: LedgerRow['kind'];
}

/** Standing and plans side by side. The plan shown in full is picked out. */
export function plansTable(year: YearView, shownId: number | null): LedgerData {
  const { currency } = year;
  const exact = (amount: number) => formatAmount(toMinorUnits(amount, currency), currency);
  const whole = (amount: number) => formatNumber(amount);
  const onlyPlans = (cell: (plan: PlanView) => LedgerValue) => (plan: PlanView) =>
    plan.id === null ? null : cell(plan);
  const entries: Entry[] = [
    ...year.standing.fields.map(({ motorId, name }): Entry => ({
      label: `${name} field`,
      unit: 'A',
      cell: (plan) => fieldCell(plan, motorId),
    })),
    ...(year.plans.some((plan) => plan.banks.length > 0) ? bankEntries : []),
    { label: 'pf at peak, worst bill', unit: '', cell: pfCell },
    ...groupNames
      .filter(([group]) => [year.standing, ...year.plans].some((plan) => plan.groupTotals[group] !== 0))
      .map(([group, label]): Entry => ({ label, unit: currency, cell: (plan) => exact(plan.groupTotals[group]) })),
    { label: 'Bills of the year', unit: currency, cell: (plan) => exact(plan.yearTotal), kind: 'total' },
    { label: 'Saved a year', unit: currency, cell: onlyPlans(savingCell) },
    { label: 'Work, once', unit: currency, cell: onlyPlans((plan) => whole(plan.capitalCost)) },
    { label: 'Upkeep a year', unit: currency, cell: onlyPlans((plan) => whole(plan.yearlyUpkeep)) },
    { label: 'Simple payback', unit: 'months', cell: onlyPlans(paybackCell) },
    { label: 'Net present value', unit: currency, cell: onlyPlans(valueCell) },
    { label: 'Extra losses of the motors', unit: 'kWh', cell: onlyPlans((plan) => whole(plan.extraLossKwh)) },
    { label: 'Hours leading at the meter', unit: 'h', cell: (plan) => hoursWords(plan.hoursLeading.after) },
    { label: 'Nearest limit', unit: '', cell: (plan) => plan.nearestLimit },
  ];
  const plans = [year.standing, ...year.plans];
  return {
    columns: [
      { key: 'entry', head: 'Entry', headUnseen: true, wrap: true },
      { key: 'unit', head: 'Unit', quiet: true },
      ...plans.map((plan): LedgerColumn => ({
        key: keyOf(plan),
        head: plan.name,
        unit: plan.id === null ? 'as it runs now' : plan.chosen ? 'chosen' : 'proposed',
        align: 'right',
        wrap: true,
        picked: plan.id !== null && plan.id === shownId,
      })),
    ],
    rows: entries.map(({ label, unit, cell, kind }) => ({
      id: label,
      kind,
      cells: { entry: label, unit, ...Object.fromEntries(plans.map((plan) => [keyOf(plan), cell(plan)])) },
    })),
  };
}

const keyOf = (plan: PlanView) => `plan-${plan.id ?? 'standing'}`;

function fieldCell(plan: PlanView, motorId: number): LedgerValue {
  const field = plan.fields.find((one) => one.motorId === motorId);
  if (!field) return null;
  const constantA = constantFieldA(field);
  if (constantA === null) return { value: settingValueWords(field, plan.spans) };
  const panelA = field.panelA?.[0];
  const note = typeof panelA === 'number' ? `panel ${formatNumber(panelA, { decimals: 2 })}` : undefined;
  return { value: formatNumber(constantA, { upTo: 1 }), note };
}

const bankEntries: Entry[] = [
  {
    label: 'Capacitors',
    unit: 'kvar',
    cell: (plan) => {
      const [bank] = plan.banks;
      if (!bank) return { value: 'none', tone: 'quiet' };
      const { kvar, detuningPercent } = bank;
      const note = detuningPercent === undefined ? 'plain' : `detuned, ${formatNumber(detuningPercent, { upTo: 2 })} %`;
      return { value: formatNumber(kvar), note };
    },
  },
  {
    label: 'Resonance with the supply',
    unit: 'order',
    cell: ({ banks }) => {
      const [bank] = banks;
      if (!bank) return null;
      if (!bank.resonance) return { value: 'not checked', tone: 'warn' };
      const { order, near } = bank.resonance;
      const words = near.length > 0 ? `near the ${near.map(wordOrdinal).join(', ')}` : undefined;
      return { value: formatNumber(order, { decimals: 1 }), note: words, tone: near.length > 0 ? 'fault' : undefined };
    },
  },
];

function pfCell({ worstPf }: PlanView): LedgerValue {
  if (!worstPf) return { value: 'not known', tone: 'quiet' };
  return `${formatNumber(worstPf.value, { decimals: 2 })}${worstPf.leading ? ' leading' : ''}`;
}

function savingCell({ saving }: PlanView): LedgerCell {
  if (saving > 0) return { value: formatNumber(saving), tone: 'leading', strong: true };
  return { value: saving === 0 ? 'nothing' : `${formatNumber(-saving)} more`, tone: 'fault' };
}

function paybackCell({ paybackWords, appraisal }: PlanView): LedgerCell {
  if (paybackWords === 'never') return { value: 'never', tone: 'fault' };
  return { value: formatNumber((appraisal.simplePaybackYears ?? 0) * 12, { decimals: 1 }), strong: true };
}

const valueCell = ({ appraisal, economics }: PlanView): LedgerCell => ({
  value: formatNumber(appraisal.npv),
  strong: true,
  tone: appraisal.npv < 0 ? 'fault' : undefined,
  note: `${economics.horizonYears} years, ${formatNumber(economics.discountPercent, { upTo: 1 })}\u00a0%`,
});

/** One bill line by line, before and after; each figure can be asked why. */
export function billLines(
  before: PricedBillView,
  after: PricedBillView,
  currency: string,
  planName: string,
): LedgerData {
  const minor = (amount: number) => toMinorUnits(amount, currency);
  const ids = [...new Set([...before.lines, ...after.lines].map((line) => line.id))];
  const cellOf = (bill: PricedBillView, id: string): LedgerValue => {
    const line = bill.lines.find((one) => one.id === id);
    if (!line) return null;
    return {
      value: minor(line.amount),
      why: {
        title: `Why ${formatAmount(minor(line.amount), currency)} ${currency}: ${line.label}, bill of ${formatBillName(bill)}`,
        steps: [
          {
            label: line.explanation,
            result: formatAmount(minor(line.amount), currency),
            kind: 'equals',
            source: line.clause ? `Clause ${line.clause}` : undefined,
          },
        ],
      },
    };
  };
  const amountOf = (bill: PricedBillView, id: string) => bill.lines.find((line) => line.id === id)?.amount ?? 0;
  const money = { kind: 'money' as const, currency };
  return {
    columns: [
      { key: 'line', head: 'Line' },
      { key: 'before', head: 'Standing', ...money },
      { key: 'after', head: planName, ...money },
      { key: 'change', head: 'Change', ...money, signed: true, strong: true },
    ],
    rows: ids.map((id) => ({
      id,
      cells: {
        line: (after.lines.find((line) => line.id === id) ?? before.lines.find((line) => line.id === id))?.label ?? id,
        before: cellOf(before, id),
        after: cellOf(after, id),
        change: minor(amountOf(after, id) - amountOf(before, id)),
      },
    })),
    total: {
      line: `Bill of ${formatDay(before.from)} to ${formatDay(addDays(before.to, -1))}`,
      before: minor(before.total),
      after: minor(after.total),
      change: minor(after.total - before.total),
    },
  };
}

/** From standing to the plan by groups of charges: what it takes away, what its losses take back. */
export function changeTable(year: YearView, plan: PlanView): LedgerData {
  const minor = (amount: number) => toMinorUnits(amount, year.currency);
  const money = { kind: 'money' as const, currency: year.currency };
  const changes = groupNames
    .map(([group, label]) => ({ label, change: plan.groupTotals[group] - year.standing.groupTotals[group] }))
    .filter(({ change }) => Math.abs(change) >= 0.005);
  return {
    columns: [
      { key: 'group', head: `From standing to ${plan.name}` },
      { key: 'change', head: 'Change a year', ...money, signed: true },
    ],
    rows: [
      {
        id: 'standing',
        kind: 'subtotal',
        cells: { group: 'Standing', change: formatAmount(minor(year.standing.yearTotal), year.currency) },
      },
      ...changes.map(({ label, change }): LedgerRow => ({
        id: label,
        cells: { group: label, change: { value: minor(change), tone: change < 0 ? 'leading' : undefined } },
      })),
    ],
    total: { group: plan.name, change: formatAmount(minor(plan.yearTotal), year.currency) },
  };
}
