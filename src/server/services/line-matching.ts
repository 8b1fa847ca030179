import type { PricedLine } from '../../core/tariff';
import type { BillLineView } from '../../schemas/bill';
import type { MatchedBy } from '../../schemas/pricing';
import { noLine } from '../../schemas/tariff';

/** A line of the schedule with the printed lines that belong to it; either side may be missing. */
export interface Match {
  line: PricedLine | null;
  billed: BillLineView[];
  matchedBy: MatchedBy;
}

/** Words of bills by the group of charge they speak of, in the order they are asked. */
const groupWords: [PricedLine['group'], RegExp][] = [
  ['tax', /\b(tax|taxes|vat|gst|levy|excise)\b/],
  ['reactive', /\b(reactive|kvar|kvarh|power factor|pf|leading|lagging)\b/],
  ['demand', /\b(demand|capacity|kva|kw|peak load)\b/],
  ['adjustment', /\b(fuel|rider|adjustment|adder|surcharge|minimum|credit)\b/],
  ['energy', /\b(energy|kwh|consumption|usage|peak|night|day)\b/],
  ['fixed', /\b(service|customer|basic|standing|fixed|metering|meter|monthly)\b/],
];

const leastSimilarity = 0.5;

const normal = (text: string) =>
  text
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, ' ')
    .trim();

const wordsOfId = (id: string) => id.replace(/([a-z0-9])([A-Z])/g, '$1 $2');

/** Group a printed label speaks of, or null. */
export function groupOfLabel(label: string): PricedLine['group'] | null {
  const words = normal(label);
  return groupWords.find(([, pattern]) => pattern.test(words))?.[0] ?? null;
}

function pairsOfLetters(text: string): string[] {
  return text
    .split(' ')
    .flatMap((word) => Array.from({ length: Math.max(1, word.length - 1) }, (_, i) => word.slice(i, i + 2)));
}

/** Share of letter pairs two labels have in common (Dice's coefficient), 0 to 1. */
export function labelSimilarity(a: string, b: string): number {
  const left = pairsOfLetters(normal(a));
  const right = pairsOfLetters(normal(b));
  const rest = [...right];
  const common = left.filter((pair) => {
    const at = rest.indexOf(pair);
    if (at >= 0) rest.splice(at, 1);
    return at >= 0;
  }).length;
  return (2 * common) / (left.length + right.length);
}

const similarityTo = (label: string, line: PricedLine) => {
  const similarity = Math.max(labelSimilarity(label, line.label), labelSimilarity(label, wordsOfId(line.id)));
  const group = groupOfLabel(label);
  return group !== null && group !== line.group ? similarity * 0.6 : similarity;
};

/** The matching as it grows: what is still free on both sides, and what belongs together. */
class Matching {
  readonly matches: Map<string, Match>;
  free: BillLineView[];

  constructor(
    readonly lines: PricedLine[],
    billed: BillLineView[],
  ) {
    this.matches = new Map(lines.map((line) => [line.id, { line, billed: [], matchedBy: 'none' }]));
    this.free = [...billed];
  }

  openLines(): PricedLine[] {
    return this.lines.filter((line) => this.matches.get(line.id)!.billed.length === 0);
  }

  join(line: PricedLine, billed: BillLineView, matchedBy: MatchedBy): void {
    const match = this.matches.get(line.id)!;
    match.billed.push(billed);
    match.matchedBy = matchedBy;
    this.free = this.free.filter((one) => one !== billed);
  }
}

function byPerson(matching: Matching, remembered: Record<string, string>): BillLineView[] {
  const apart: BillLineView[] = [];
  for (const billed of [...matching.free]) {
    const told = Object.hasOwn(remembered, billed.label) ? remembered[billed.label] : undefined;
    const line = matching.lines.find((one) => one.id === told);
    if (line) matching.join(line, billed, 'person');
    else if (told === noLine) {
      apart.push(billed);
      matching.free = matching.free.filter((one) => one !== billed);
    }
  }
  return apart;
}

function byLabel(matching: Matching): void {
  const open = matching.openLines();
  const ranked = matching.free
    .flatMap((billed) => open.map((line) => ({ billed, line, similarity: similarityTo(billed.label, line) })))
    .filter(({ similarity }) => similarity >= leastSimilarity)
    .sort((a, b) => b.similarity - a.similarity);
  for (const { billed, line } of ranked) {
    const isFree = matching.free.includes(billed) && matching.matches.get(line.id)!.billed.length === 0;
    if (isFree) matching.join(line, billed, 'label');
  }
}

function byAmount(matching: Matching, minorOf: (line: PricedLine) => number): void {
  for (const billed of [...matching.free]) {
    const same = matching
      .openLines()
      .filter((line) => billed.amountMinor !== 0 && minorOf(line) === billed.amountMinor);
    if (same.length === 1) matching.join(same[0]!, billed, 'amount');
  }
}

function byGroup(matching: Matching): void {
  for (const billed of [...matching.free]) {
    const group = groupOfLabel(billed.label);
    const line = matching.openLines().find((one) => one.group === group);
    if (line) matching.join(line, billed, 'group');
  }
}

/**
 * Finds for every printed line its line of the schedule: as a person told, then by label, by equal amount, by group in
 * the order of the bill. What finds none stands alone at the end.
 */
export function matchLines(
  lines: PricedLine[],
  billed: BillLineView[],
  remembered: Record<string, string>,
  minorOf: (line: PricedLine) => number,
): Match[] {
  const matching = new Matching(lines, billed);
  const apart = byPerson(matching, remembered);
  byLabel(matching);
  byAmount(matching, minorOf);
  byGroup(matching);
  const alone = [...apart, ...matching.free].map((one): Match => {
    return { line: null, billed: [one], matchedBy: apart.includes(one) ? 'person' : 'none' };
  });
  return [...matching.matches.values(), ...alone];
}
