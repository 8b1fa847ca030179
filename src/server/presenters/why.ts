import { formatMoney } from '../../components/ui/format';
import type { PricedBill, PricedInput, PricedLine, PricedQuantity } from '../../core/tariff';
import { toMinorUnits, wordNumber } from '../../core/units';
import type { Finding, LinePair, ReconciledBill } from '../../schemas/pricing';
import type { WhyStepView, WhyView } from '../../schemas/tariff-why';
import { wordsOfName } from './schedule';

/** The words of a why panel; pictures are added by the service, which knows the readings. */
export type WhyWords = Omit<WhyView, 'day' | 'lookBack'>;

const mostSteps = 9;

const rounded = (value: number, unit: string) =>
  `${wordNumber(Math.round(value * 1e4) / 1e4)}${unit ? ` ${unit}` : ''}`;

/** A quantity, contract input or rate of a bill by its name. */
export function namedOf(bill: PricedBill, name: string): PricedQuantity | PricedInput | undefined {
  if (Object.hasOwn(bill.quantities, name)) return bill.quantities[name];
  return Object.hasOwn(bill.inputs, name) ? bill.inputs[name] : undefined;
}

const labelOf = (named: { label?: string }, name: string) => named.label ?? wordsOfName(name);

/** Names a figure rests on, nearest first, each once. */
export function namesBehind(bill: PricedBill, uses: string[]): string[] {
  const found: string[] = [];
  const queue = [...uses];
  for (let name = queue.shift(); name !== undefined; name = queue.shift()) {
    const named = namedOf(bill, name);
    if (!named || found.includes(name)) continue;
    found.push(name);
    queue.push(...named.uses);
  }
  return found;
}

function stepOfName(bill: PricedBill, name: string): WhyStepView[] {
  const named = namedOf(bill, name);
  if (!named) return [];
  return [
    {
      label: labelOf(named, name),
      working: named.explanation,
      result: rounded(named.value, named.unit),
      source: named.clause && `clause ${named.clause}`,
    },
  ];
}

/** What stands behind, the furthest first, so that it reads downward to the figure. */
export function stepsBehind(bill: PricedBill, uses: string[]): WhyStepView[] {
  const names = namesBehind(bill, uses).slice(0, mostSteps);
  return names.reverse().flatMap((name) => stepOfName(bill, name));
}

function nextOf(bill: PricedBill, uses: string[]): WhyView['next'] {
  return uses.flatMap((name) => {
    const named = namedOf(bill, name);
    if (named) return [{ figure: `name:${name}`, label: labelOf(named, name) }];
    const line = bill.lines.find((one) => one.id === name);
    return line ? [{ figure: `line:${name}`, label: line.label }] : [];
  });
}

function sourceOf({ bill }: ReconciledBill, code: string): Pick<WhyView, 'source' | 'sourceHref'> {
  const href = `/engagements/${code}/bills`;
  if (!bill.source) return { source: 'the bill, typed by hand', sourceHref: href };
  const row = bill.source.row ? `, ${bill.source.row}` : '';
  return { source: `${bill.source.fileName}${row}`, sourceHref: href };
}

/** A line's own working, as the last step. */
export function lineStep(line: PricedLine, currency: string): WhyStepView {
  return {
    label: line.label,
    working: line.explanation,
    result: formatMoney(toMinorUnits(line.amount, currency), currency),
    kind: 'equals',
    source: line.clause && `clause ${line.clause}`,
  };
}

function billedSteps(pair: LinePair, currency: string): WhyStepView[] {
  if (pair.billedMinor === null) return [{ label: 'The utility billed', working: 'no such line', result: 'nothing' }];
  const labels = pair.billed.map((line) => line.label).join(' + ');
  const billed = { label: 'The utility billed', working: labels, result: formatMoney(pair.billedMinor, currency) };
  if (pair.differenceMinor === 0) return [billed];
  const words = pair.differenceMinor > 0 ? 'Over-billed' : 'Under-billed';
  return [billed, { label: words, result: formatMoney(Math.abs(pair.differenceMinor), currency), kind: 'fault' }];
}

/** Causes as the panel lists them: fitting ones first, each with how far it misses. */
export function causesOf(finding: Finding | undefined, currency: string): WhyView['causes'] {
  if (!finding || finding.causes.length === 0) return undefined;
  return finding.causes.map(({ label, missMinor, fits }) => ({
    label,
    fits,
    off: missMinor === 0 ? 'to the cent' : `${formatMoney(Math.abs(missMinor), currency)} off`,
  }));
}

/** Why a line has its amount. */
export function whyLine(bill: ReconciledBill, line: PricedLine, findings: Finding[], code: string): WhyWords {
  const { currency } = bill.bill;
  const pair = bill.pairs.find((one) => one.line?.id === line.id);
  const finding = findings.find((one) => one.billId === bill.bill.id && one.lineId === line.id);
  return {
    title: `Why ${formatMoney(toMinorUnits(line.amount, currency), currency)}: ${line.label}, bill of ${bill.name}`,
    steps: [
      ...stepsBehind(bill.priced, line.uses),
      lineStep(line, currency),
      ...(pair ? billedSteps(pair, currency) : []),
    ],
    causes: causesOf(finding, currency),
    next: nextOf(bill.priced, line.uses),
    ...sourceOf(bill, code),
  };
}

/** Why a quantity, contract input or rate has its value. */
export function whyName(
  bill: ReconciledBill,
  name: string,
  named: PricedQuantity | PricedInput,
  code: string,
): WhyWords {
  const own = stepOfName(bill.priced, name).map((step): WhyStepView => ({ ...step, kind: 'equals' }));
  return {
    title: `Why ${rounded(named.value, named.unit)}: ${labelOf(named, name)}, bill of ${bill.name}`,
    steps: [...stepsBehind(bill.priced, named.uses), ...own],
    next: nextOf(bill.priced, named.uses),
    ...sourceOf(bill, code),
  };
}

/** Why several lines add up as they do: a group, or the whole bill. */
export function whySum(bill: ReconciledBill, lines: PricedLine[], what: string, code: string): WhyWords {
  const { currency } = bill.bill;
  const sum = lines.reduce((total, line) => total + line.amount, 0);
  const steps = lines.map((line): WhyStepView => {
    return {
      label: line.label,
      working: line.explanation,
      result: formatMoney(toMinorUnits(line.amount, currency), currency),
    };
  });
  return {
    title: `Why ${formatMoney(toMinorUnits(sum, currency), currency)}: ${what}, bill of ${bill.name}`,
    steps: [
      ...steps,
      { label: 'Together', result: formatMoney(toMinorUnits(sum, currency), currency), kind: 'equals' },
    ],
    next: lines.map((line) => ({ figure: `line:${line.id}`, label: line.label })),
    ...sourceOf(bill, code),
  };
}

/** What the utility billed, line by line as printed. */
export function whyBilled(bill: ReconciledBill, code: string): WhyWords {
  const { currency, lines, linesMinor, totalMinor } = bill.bill;
  const steps = lines.map((line): WhyStepView => ({
    label: line.label,
    result: formatMoney(line.amountMinor, currency),
  }));
  if (lines.length > 0)
    steps.push({ label: 'The lines together', result: formatMoney(linesMinor, currency), kind: 'equals' });
  if (totalMinor !== null)
    steps.push({ label: 'Total as printed', result: formatMoney(totalMinor, currency), kind: 'equals' });
  if (totalMinor !== null && lines.length > 0 && totalMinor !== linesMinor) {
    steps.push({
      label: 'The bill does not add up',
      result: formatMoney(totalMinor - linesMinor, currency),
      kind: 'fault',
    });
  }
  return { title: `Billed for ${bill.name}, as printed`, steps, next: [], ...sourceOf(bill, code) };
}

/** Where a bill's difference lies, line by line. */
export function whyDifference(bill: ReconciledBill, findings: Finding[], code: string): WhyWords {
  const { currency, id } = bill.bill;
  const steps = bill.pairs.map((pair): WhyStepView => {
    const label = pair.line?.label ?? pair.billed.map((line) => line.label).join(' + ');
    const priced =
      pair.pricedMinor === null ? 'not in the schedule' : `priced ${formatMoney(pair.pricedMinor, currency)}`;
    const billed = pair.billedMinor === null ? 'not billed' : `billed ${formatMoney(pair.billedMinor, currency)}`;
    return { label, working: `${billed}, ${priced}`, result: formatMoney(pair.differenceMinor, currency) };
  });
  const whole = bill.differenceMinor ?? 0;
  const sum: WhyStepView = {
    label: 'Billed less priced',
    result: formatMoney(whole, currency),
    kind: whole === 0 ? 'equals' : 'fault',
  };
  const own = findings.filter((finding) => finding.billId === id);
  const causes = own.flatMap((finding) =>
    (causesOf(finding, currency) ?? []).map((cause) =>
      own.length > 1 ? { ...cause, label: `${finding.letter}: ${cause.label}` } : cause,
    ),
  );
  return {
    title: `Difference of ${bill.name}`,
    steps: [...steps, sum],
    causes: causes.length > 0 ? causes : undefined,
    next: bill.pairs.flatMap(({ line, differenceMinor }) =>
      line && differenceMinor !== 0 ? [{ figure: `line:${line.id}`, label: line.label }] : [],
    ),
    ...sourceOf(bill, code),
  };
}
