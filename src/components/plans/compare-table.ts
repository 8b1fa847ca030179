import { toMinorUnits } from '../../core/units';
import type { BankView, PlanField, PlanView, YearView } from '../../schemas/plan';
import { constantFieldA } from '../../schemas/plan-settings';
import { formatAmount, formatNumber } from '../ui/format';
import type { LedgerCell, LedgerColumn, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import { amperes, settingValueWords } from '../ui/setting-words';
import { bankKvar, kindWords, nearWords } from './verdict';
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
    ...year.standing.fields.map((field) => fieldEntry(year, field)),
    ...(year.plans.some((plan) => plan.banks.length > 0) ? bankEntries : []),
    ...(year.plans.some((plan) => plan.replacements.length > 0) ? [replacementEntry] : []),
    { label: 'pf at peak, worst bill', unit: '', cell: pfCell },
    ...groupNames
      .filter(([group]) => [year.standing, ...year.plans].some((plan) => plan.groupTotals[group] !== 0))
      .map(([group, label]): Entry => ({ label, unit: currency, cell: (plan) => exact(plan.groupTotals[group]) })),
    { label: 'Bills of the year', unit: currency, cell: (plan) => exact(plan.yearTotal), kind: 'total' },
    { label: 'Saved a year', unit: currency, cell: onlyPlans(savingCell) },
    { label: 'Work, once', unit: currency, cell: onlyPlans(costCell) },
    { label: 'Upkeep a year', unit: currency, cell: onlyPlans((plan) => whole(plan.yearlyUpkeep)) },
    { label: 'Simple payback', unit: 'months', cell: onlyPlans(paybackCell) },
    { label: 'Net present value', unit: currency, cell: onlyPlans(valueCell) },
    { label: 'Extra losses', unit: 'kWh', cell: onlyPlans((plan) => whole(plan.extraLossKwh)) },
    { label: 'Hours leading at the meter', unit: 'h', cell: (plan) => hoursWords(plan.hoursLeading.after) },
    ...(year.standing.voltage ? [voltageEntry] : []),
    ...(year.plans.some((plan) => hoursLimited(plan) > 0) ? [limitedEntry] : []),
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
        unit: plan.id === null ? 'as it runs now' : `${kindWords(plan)}${plan.chosen ? ', chosen' : ''}`,
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

/** A motor's row: amperes in the column's unit where every plan holds some, else in words. */
function fieldEntry(year: YearView, { motorId, name }: PlanField): Entry {
  const settings = [year.standing, ...year.plans].flatMap((plan) =>
    plan.fields.filter((one) => one.motorId === motorId),
  );
  const isConstant = settings.every((one) => constantFieldA(one) !== null);
  return {
    label: isConstant ? `${name} field` : `${name} set to`,
    unit: isConstant ? 'A' : '',
    cell: (plan) => fieldCell(plan, motorId, isConstant),
  };
}

function fieldCell(plan: PlanView, motorId: number, isConstant: boolean): LedgerValue {
  const field = plan.fields.find((one) => one.motorId === motorId);
  if (!field) return null;
  const constantA = constantFieldA(field);
  if (constantA === null) return settingValueWords(field, plan.spans);
  const panelA = field.panelA?.[0];
  const note = typeof panelA === 'number' ? `panel ${formatNumber(panelA, { decimals: 2 })}` : undefined;
  return { value: isConstant ? formatNumber(constantA, { upTo: 1 }) : amperes(constantA), note };
}

/** "5 × 300, switched, detuned 7 %". */
function bankNote({ steps, stepKvar, holdsPowerFactor, detuningPercent }: BankView): string {
  return [
    steps > 1 ? `${steps}\u00a0×\u00a0${formatNumber(stepKvar, { upTo: 1 })}` : null,
    holdsPowerFactor === undefined ? 'fixed' : `switched to ${formatNumber(holdsPowerFactor, { decimals: 2 })}`,
    detuningPercent === undefined ? 'plain' : `detuned ${formatNumber(detuningPercent, { upTo: 2 })}\u00a0%`,
  ]
    .filter((part) => part !== null)
    .join(', ');
}

const none: LedgerCell = { value: 'none', tone: 'quiet' };

const bankEntries: Entry[] = [
  {
    label: 'Capacitors',
    unit: 'kvar',
    cell: (plan) =>
      plan.banks.length === 0
        ? none
        : { value: formatNumber(bankKvar(plan)), note: plan.banks.map(bankNote).join('; ') },
  },
  {
    label: 'Resonance with the supply',
    unit: 'order',
    cell: ({ banks }) => {
      if (banks.length === 0) return null;
      const known = banks.flatMap(({ resonance }) => (resonance ? [resonance] : []));
      if (known.length < banks.length)
        return { value: 'not checked', tone: 'warn', note: 'short-circuit power not known' };
      const near = [...new Set(known.flatMap((one) => one.near))];
      const value = known.map(({ order }) => formatNumber(order, { decimals: 1 })).join(', ');
      return {
        value,
        note: near.length > 0 ? nearWords(near) : undefined,
        tone: near.length > 0 ? 'fault' : undefined,
      };
    },
  },
];

const replacementEntry: Entry = {
  label: 'New motors',
  unit: '',
  cell: ({ replacements }) => {
    if (replacements.length === 0) return none;
    return {
      value: replacements.map(({ name }) => name).join(', '),
      note: replacements
        .map(
          ({ ratedKw, kvarGained }) => `${formatNumber(ratedKw)}\u00a0kW, ${formatNumber(kvarGained)}\u00a0kvar gained`,
        )
        .join('; '),
    };
  },
};

const percentOf = (pu: number) => formatNumber(100 * pu, { decimals: 1 });

const voltageEntry: Entry = {
  label: 'Bus voltage, least to greatest',
  unit: '% of rated',
  cell: ({ voltage }) => {
    if (!voltage) return null;
    const outside = voltage.hoursOutside;
    const note = outside ? `${formatNumber(outside)}\u00a0h outside the band` : undefined;
    return {
      value: `${percentOf(voltage.lowPu)} to ${percentOf(voltage.highPu)}`,
      note,
      tone: outside ? 'warn' : undefined,
    };
  },
};

const hoursLimited = ({ motors, replacements }: PlanView) =>
  [...motors, ...replacements].reduce((sum, one) => sum + one.hoursLimited, 0);

const limitedEntry: Entry = {
  label: 'Hours a regulator is at its limit',
  unit: 'h',
  cell: (plan) => (plan.id === null ? null : hoursWords(hoursLimited(plan))),
};

function costCell({ capitalCost, costParts }: PlanView): LedgerCell {
  const note = costParts.map(({ label, amount }) => `${label.toLowerCase()} ${formatNumber(amount)}`).join(', ');
  return { value: formatNumber(capitalCost), note: costParts.length > 1 ? note : undefined };
}

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
