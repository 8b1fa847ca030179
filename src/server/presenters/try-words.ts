import {
  formatBillName,
  formatList,
  formatMoney,
  formatNumber,
  formatPeriod,
  formatQuantity,
} from '../../components/ui/format';
import type { AssumedMonth, Schedule } from '../../core/tariff';
import type { TryView } from '../../schemas/try-out';

const factor = (pf: number) => formatNumber(pf, { decimals: pf === Math.round(pf * 100) / 100 ? 2 : 3 });

/** The finding with its amount, or what is still to be typed. */
export function tryHeadline(view: TryView): string {
  const { bill, currency, target, waiting, faults } = view;
  if (Object.keys(faults).length > 0) return 'This month cannot be priced yet: one entry needs a change.';
  if (!bill) {
    return waiting.length > 0
      ? `Type ${formatList(waiting)}: the bill appears as you type.`
      : 'Type what the bill says: it is priced as you type.';
  }
  const total = `This bill is ${formatMoney(bill.totalMinor, currency)}`;
  if (bill.targetMinor === null) return `${total}.`;
  const saving = bill.totalMinor - bill.targetMinor;
  const raised = `With the power factor raised to ${factor(target)} it would be`;
  if (saving === 0) return `${total}. ${raised} the same.`;
  return `${total}. ${raised} ${formatMoney(Math.abs(saving), currency)} ${saving > 0 ? 'less' : 'more'}.`;
}

/** The try-out as plain text, for a mail. */
export function trySummary(
  view: TryView,
  about: { schedule: Schedule; period: { from: string; to: string }; month: AssumedMonth },
): string {
  const { currency, days, target, lookBacks, measured } = view;
  const bill = view.bill!;
  const { schedule, period, month } = about;
  const { publisher, title } = schedule.source;
  const money = (minor: number) => formatMoney(minor, currency);
  const assumed = measured.filter(({ state }) => state === 'assumed');
  const lines = [
    `${[publisher, schedule.title].filter(Boolean).join(': ')}${title ? ` (${title})` : ''}`,
    `${formatBillName(period)}, ${formatPeriod(period.from, period.to, { year: true })}, ${days} days`,
    '',
    ...figuresOf(view, month),
    '',
    ...bill.lines.map(({ label, amountMinor }) => `${label}: ${money(amountMinor)}`),
    `Bill: ${money(bill.totalMinor)}`,
    ...(bill.poorFactorMinor === null ? [] : [`Of it for poor power factor: ${money(bill.poorFactorMinor)}`]),
    ...(bill.targetMinor === null
      ? []
      : [
          `With the power factor raised to ${factor(target)}: ${money(bill.targetMinor)}, ${money(bill.totalMinor - bill.targetMinor)} less in this month`,
        ]),
    '',
    ...assumed.map(({ label, value, unit, words }) => `Assumed: ${label} ${quantity(value!, unit)}, ${words}.`),
    ...lookBacks.map(({ label, value, unit, words }) => `Ratchet: ${label} ${quantity(value ?? 0, unit)}, ${words}.`),
    '',
    'Calculated from figures told in short. What a motor can deliver is limited by its stator, its field and the voltage of the plant; settings are reviewed and made by qualified persons.',
  ];
  return lines
    .join('\n')
    .replaceAll('\u00a0', ' ')
    .replace(/\n{3,}/g, '\n\n');
}

function figuresOf({ whole }: TryView, { energyKwh, peakKw }: AssumedMonth): string[] {
  const told = [
    energyKwh !== null && quantity(energyKwh, 'kWh'),
    peakKw !== null && quantity(peakKw, 'kW'),
    whole.kvarh !== null && quantity(whole.kvarh, 'kvarh'),
    whole.pf !== null && `average power factor ${factor(whole.pf)}`,
  ].filter((words) => typeof words === 'string');
  return told.length > 0 ? [told.join(', ')] : [];
}

const quantity = (value: number, unit: string) =>
  unit ? formatQuantity(value, unit, { upTo: Math.abs(value) < 10_000 ? 1 : 0 }) : formatNumber(value, { upTo: 3 });
