import { formatMoney, formatNumber } from '../../components/ui/format';
import type { AskedQuantity, AssumedMonth, PricedBill, PricedLine, Schedule, TriedBill } from '../../core/tariff';
import { toMinorUnits } from '../../core/units';
import type { ContractField } from '../../schemas/tariff';
import type { TryBill, TryField, TryInput, TryLine, TryView, TryWhy } from '../../schemas/try-out';
import { wordsOfName } from './schedule';
import { tryHeadline, trySummary } from './try-words';
import { lineStep, stepsBehind } from './why';

/** A month priced as told, at unity, and with the field raised; null where the power factor is not known, or already as high. */
export interface TriedMonth {
  now: TriedBill;
  unity: TriedBill | null;
  raised: TriedBill | null;
}

/** Everything a try-out is presented from. */
export interface TryAbout {
  schedule: Schedule;
  input: TryInput;
  fields: ContractField[];
  days: number;
  faults: Record<string, string>;
  month: AssumedMonth | null;
  tried: TriedMonth | null;
}

/** A try-out as its page shows it. */
export function presentTryOut(about: TryAbout): TryView {
  const { schedule, input, fields, days, faults, month, tried } = about;
  const ratio = month?.kvarhPerKwh ?? null;
  const pf = ratio === null ? null : Math.cos(Math.atan(ratio));
  const view: TryView = {
    headline: '',
    currency: schedule.currency,
    days,
    measured: measuredFields(month?.asked ?? []),
    lookBacks: lookBackFields(tried?.now),
    contract: fields,
    whole: { kvarh: ratio === null || month!.energyKwh === null ? null : month!.energyKwh * ratio, pf },
    target: input.target,
    noTarget: noTargetWords(tried, pf),
    waiting:
      month && Object.keys(faults).length === 0 ? [...waitingWords(month.asked), ...untoldWords(fields, input)] : [],
    faults,
    bill: tried && billOf(tried, month!, schedule),
    summary: null,
  };
  return {
    ...view,
    headline: tryHeadline(view),
    summary: view.bill && month && trySummary(view, { schedule, period: input, month }),
  };
}

const states = { typed: 'typed', quick: 'fixed', assumed: 'assumed', default: 'assumed', missing: 'missing' } as const;

/** What the schedule measures; members of a family are told apart by their window. */
function measuredFields(asked: AskedQuantity[]): TryField[] {
  const labelOf = ({ quantity: { label, name } }: AskedQuantity) => label ?? wordsOfName(name);
  const isShared = (label: string) => asked.filter((one) => labelOf(one) === label).length > 1;
  return asked.map((one) => {
    const { quantity, value, basis, quick, words } = one;
    const { name, unit, definition } = quantity;
    const label = labelOf(one);
    const window = 'window' in definition && definition.window ? wordsOfName(definition.window).toLowerCase() : name;
    return {
      key: `q.${name}`,
      label: isShared(label) ? `${label}, ${window}` : label,
      unit,
      value,
      state: quick && basis !== 'typed' ? 'fixed' : states[basis],
      words: quick && basis !== 'typed' ? 'as above' : words,
    };
  });
}

function lookBackFields(now: TriedBill | undefined): TryField[] {
  return (now?.lookBacks ?? []).map(({ name, label, unit, months, value, basis }) => ({
    key: `p.${name}`,
    label: `${label ?? wordsOfName(name)} of earlier months`,
    unit,
    value,
    state: value === null ? 'missing' : basis,
    words: basis === 'typed' ? `all ${months} months before` : `the same as this month, ${months} months back`,
  }));
}

function waitingWords(asked: AskedQuantity[]): string[] {
  const missing = asked.filter(({ basis }) => basis === 'missing');
  const words = missing.map(({ words: how, quantity }) =>
    how.startsWith('type ') ? how.slice(5) : `${quantity.label ?? wordsOfName(quantity.name)} (${how})`,
  );
  return [...new Set(words)];
}

const untoldWords = (fields: ContractField[], { c }: TryInput) =>
  fields.filter((field) => field.default === null && c[field.name] === undefined).map(({ label }) => label);

function noTargetWords(tried: TriedMonth | null, pf: number | null): string | null {
  if (!tried || tried.raised) return null;
  return pf === null
    ? 'Type kvarh or a power factor to see the bill with the field raised.'
    : `The month is at ${formatNumber(pf, { decimals: 3 })} already: there is nothing to raise.`;
}

function billOf({ now, unity, raised }: TriedMonth, month: AssumedMonth, schedule: Schedule): TryBill {
  const { currency } = schedule;
  const minor = (amount: number) => toMinorUnits(amount, currency);
  const pasts = assumedPasts(schedule, now);
  const bill = withHow(now.bill, month.asked, pasts);
  const other = raised && withHow(raised.bill, month.asked.map(movedHow), pasts);
  return {
    lines: bill.lines.map((line) => lineOf(line, bill, other, currency)),
    totalMinor: minor(bill.total),
    targetMinor: other && minor(other.total),
    poorFactorMinor: unity && minor(bill.total) - minor(unity.bill.total),
    notes: bill.notes.filter((note) => !standing.some((start) => note.startsWith(start))),
  };
}

/** Notes that stand over every try-out in other words. */
const standing = ['Priced from printed quantities', 'At unity power factor', 'The history given serves'];

const movedHow = (one: AskedQuantity): AskedQuantity => ({ ...one, words: `${one.words}; at the raised power factor` });

/** Look backs that rest on earlier months nobody told. */
function assumedPasts({ texts }: Schedule, { lookBacks }: TriedBill): Set<string> {
  const untold = new Set(lookBacks.flatMap(({ name, basis }) => (basis === 'assumed' ? [name] : [])));
  const quantities = texts.flatMap((text) => text.quantities);
  return new Set(
    quantities.flatMap(({ name, definition }) =>
      definition.kind === 'past' && definition.expression.names.some((looked) => untold.has(looked)) ? [name] : [],
    ),
  );
}

/** The bill with each asked quantity explained by how it came about, and look backs by what they rest on. */
function withHow(bill: PricedBill, asked: AskedQuantity[], pasts: Set<string>): PricedBill {
  const quantities = { ...bill.quantities };
  for (const { quantity, words } of asked) {
    const priced = quantities[quantity.name];
    if (priced) quantities[quantity.name] = { ...priced, explanation: words };
  }
  for (const name of pasts) {
    const priced = quantities[name];
    const words = priced?.explanation?.replace(
      /(, [A-Z]\w+ \d{4})?\.$/,
      '; every earlier month assumed like this one.',
    );
    if (priced) quantities[name] = { ...priced, explanation: words };
  }
  return { ...bill, quantities };
}

function lineOf(line: PricedLine, bill: PricedBill, other: PricedBill | null, currency: string): TryLine {
  const raised = other?.lines.find(({ id }) => id === line.id);
  return {
    id: line.id,
    label: line.label,
    group: line.group,
    quantity: line.quantity ?? null,
    unit: line.unit ?? '',
    rate: line.rate ?? null,
    // Only a percentage of lines has a rate without a quantity.
    isPercent: line.rate !== undefined && line.quantity === undefined,
    amountMinor: toMinorUnits(line.amount, currency),
    why: whyOf(line, bill, currency),
    targetMinor: raised ? toMinorUnits(raised.amount, currency) : null,
    targetWhy: raised ? whyOf(raised, other!, currency) : null,
  };
}

function whyOf(line: PricedLine, bill: PricedBill, currency: string): TryWhy {
  const amount = formatMoney(toMinorUnits(line.amount, currency), currency);
  return { title: `Why ${amount}: ${line.label}`, steps: [...stepsBehind(bill, line.uses), lineStep(line, currency)] };
}
