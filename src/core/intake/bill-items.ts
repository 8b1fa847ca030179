import { readCell } from './bill-cells';
import { markOf } from './bill-marks';
import { isBalance, namesTotal } from './bill-words';
import { namesMeter } from './bill-labels';
import { shareOf, type ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';
import type { Grid } from './grid';
import { isBlankWord } from './numbers';
import { unitMeaning, unitOfHeader } from './units';

interface ItemsInput {
  grid: Grid;
  rows: readonly number[];
  profiles: readonly ColumnProfile[];
  findings: Map<number, RoleFinding>;
  decimalMark: '.' | ',';
  /** A person says that each row is a line. */
  isGiven: boolean;
}

const labelNames =
  /\b(description|item|line( item)?|charge( type| name| description)?|component|concept|detail|position|element|fee|text|bezeichnung|beschreibung|posten|concepto|descripci[oó]n|libell[ée]|d[ée]signation|descrizione|voce)\b/i;
const lineWords =
  /\b(charges?|energy|demand|tax(es)?|vat|gst|total|kwh|kvarh|kva|kw|customer|service|fees?|reactive|power factor|pf|rider|adjustment|supply|delivery|distribution|transmission|capacity|fuel|levy|surcharge|credit|penalty|discount|rebate|standing|basic|fixed|meter|on.?peak|off.?peak|steuer|arbeit|leistung|entgelt|energ[ií]a|potencia|t[ée]rmino|impuesto|iva|[ée]nergie|puissance|taxe|tva|accisa|quota)\b/i;
const quantityNames =
  /\b(quantity|qty|usage|units? (used|billed)|billed units|volume|consumption|menge|cantidad|quantit[éeà]|quantit[aà]t?)\b/i;
const unitNames = /\b(unit|units|uom|unit of measure|einheit|unidad|unit[ée]|unit[aà])\b/i;
const rateNames = /\b(rate|price|tariff|unit cost|preis|precio|prix|prezzo|satz)\b|\/\s*unit|\bper unit\b/i;
const amountNames =
  /\b(amount|charge|cost|total|value|net|extended|betrag|importe|importo|montant|prix total|[A-Z]{3})\b|[$€£]/i;

/**
 * Columns of a table with a row a line of the bill: label, quantity, unit, rate, amount. False where it has none: rows are then
 * bills. Figures that are the same in all rows of a bill are its quantities and its total.
 */
export function findItems(input: ItemsInput): boolean {
  const groups = groupsOf(input);
  const isRepeated = input.rows.length >= groups.size * 1.8;
  if (!input.isGiven && (!isRepeated || groups.size === 0)) return false;
  const label = labelColumn(input, groups);
  if (!label) return false;
  const { findings, profiles } = input;
  findings.set(label.index, {
    role: 'line-label',
    tests: [[true, `Its words name lines of a bill: ${[...label.distinct.keys()].slice(0, 3).join(', ')}`]],
  });
  const open = profiles.filter((profile) => !findings.has(profile.index) && !namesMeter(profile.name));
  const varied = open.filter((profile) => shareOf(profile, 'number') > 0.6 && isVaried(input, profile, groups));
  const taken = new Set<ColumnProfile>();
  const put = (role: RoleFinding['role'], profile: ColumnProfile | undefined, why: string): void => {
    if (!profile) return;
    taken.add(profile);
    findings.set(profile.index, { role, tests: [[true, why]] });
  };
  const free = (): ColumnProfile[] => varied.filter((profile) => !taken.has(profile));
  put(
    'line-unit',
    open.find((profile) => isUnits(profile)),
    'Units of the lines',
  );
  put(
    'line-rate',
    free().find((profile) => rateNames.test(profile.name) || isPriced(input, profile)),
    'The rate of each line',
  );
  put(
    'line-quantity',
    free().find((profile) => quantityNames.test(profile.name) || unitOfHeader(profile.name)),
    'The quantity of each line',
  );
  const amounts = free().filter((profile) => amountNames.test(profile.name) && !isBalance(profile.name));
  put('line-amount', amounts[0] ?? free().at(-1), 'The amount of each line');
  for (const profile of free())
    findings.set(profile.index, { role: 'ignore', tests: [[true, 'Another figure of the lines']] });
  return [...findings.values()].some(({ role }) => role === 'line-amount');
}

/** Rows of one invoice, or of one period where none is named. */
function groupsOf({ grid, rows, findings }: ItemsInput): Map<string, number[]> {
  const columns = [...findings].filter(([, { role }]) =>
    ['period-from', 'period-to', 'period', 'month', 'year', 'meter', 'invoice'].includes(role),
  );
  const groups = new Map<string, number[]>();
  for (const row of rows) {
    const key = columns.map(([index]) => grid.text(row, index)).join('\n');
    if (key.trim() === '') continue;
    groups.set(key, [...(groups.get(key) ?? []), row]);
  }
  return groups;
}

/** A column of words that differ within each bill and speak of lines. */
function labelColumn(input: ItemsInput, groups: ReadonlyMap<string, number[]>): ColumnProfile | undefined {
  return input.profiles
    .filter((profile) => {
      if (
        input.findings.has(profile.index) ||
        namesMeter(profile.name) ||
        shareOf(profile, 'text') < 0.6 ||
        isUnits(profile)
      )
        return false;
      const words = [...profile.distinct.keys()];
      const share = words.filter((word) => lineWords.test(word) && markOf(word) !== 'estimated').length / words.length;
      return (
        words.length > 1 &&
        (labelNames.test(profile.name) ? share >= 0.2 || input.isGiven : share >= 0.4) &&
        isDistinct(input, profile, groups)
      );
    })
    .sort(
      (a, b) => Number(labelNames.test(b.name)) - Number(labelNames.test(a.name)) || b.distinct.size - a.distinct.size,
    )[0];
}

function isDistinct({ grid }: ItemsInput, profile: ColumnProfile, groups: ReadonlyMap<string, number[]>): boolean {
  const shares = [...groups.values()]
    .filter((rows) => rows.length > 1)
    .map((rows) => new Set(rows.map((row) => grid.text(row, profile.index))).size / rows.length);
  return shares.length > 0 && shares.reduce((sum, share) => sum + share, 0) / shares.length > 0.5;
}

/** Whether the figures of a column differ from line to line. */
function isVaried(
  { grid, decimalMark }: ItemsInput,
  profile: ColumnProfile,
  groups: ReadonlyMap<string, number[]>,
): boolean {
  return [...groups.values()].some((rows) => {
    const figures = rows
      .filter((row) => !isBlankWord(grid.text(row, profile.index)))
      .map((row) => readCell(grid, row, profile.index, decimalMark).value);
    return new Set(figures).size > 1 || (figures.length === 1 && rows.length > 1 && !namesTotal(profile.name));
  });
}

const isUnits = (profile: ColumnProfile): boolean => {
  const words = [...profile.distinct.keys()];
  const known = words.filter(
    (word) => unitMeaning(word) !== null || /^(days?|months?|%|ea|each|lot|kwh|period|tage?|meses)$/i.test(word),
  );
  return (
    words.length > 0 &&
    shareOf(profile, 'number', 'date') < 0.3 &&
    known.length >= words.length * (unitNames.test(profile.name) ? 0.3 : 0.9)
  );
};

const isPriced = ({ grid, rows, decimalMark }: ItemsInput, profile: ColumnProfile): boolean =>
  rows.some((row) => readCell(grid, row, profile.index, decimalMark).per !== undefined);
