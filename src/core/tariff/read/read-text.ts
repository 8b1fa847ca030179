import { calendarCountries, problemWithCalendar } from '../calendar/holidays';
import { holidayFields, zeroKwhFields } from '../grammar/entries';
import { fieldNames } from '../grammar/types';
import { isCalendarDate } from '../../load';
import type { HolidayRule, NumberPlace, ScheduleText } from '../model';
import { minorUnitDecimals, type Rounding } from '../../units';
import { didYouMean } from '../nearest';
import { readCharge } from './charges';
import { readDemandWindow, readSeasons, readWindow } from './clock';
import { ExpressionReader } from './expressions';
import { asMap, asNumber, asText, asWords, checkFields, readRounding } from './fields';
import { readContractInput, readRate } from './inputs';
import type { Problems } from './problems';
import { readQuantity } from './quantities';
import { Scope, type NameInfo, type Slots } from './scope';
import type { TextContext } from './text-reader';
import { entryOf, valueOf, type MapEntry, type MapTree } from './tree';

/** What is the same in all texts of a schedule. */
export interface SharedParts {
  problems: Problems;
  slots: Slots;
  currency: string;
  notes: { path: string; message: string }[];
}

/** Reads a merged text: resolves names, expands families, compiles formulas. */
export function readText(
  root: MapTree,
  from: string,
  note: string | undefined,
  shared: SharedParts,
): { text: ScheduleText; context: TextContext } {
  const context = beginContext(root, shared);
  announceNames(root, context);
  for (const entry of entriesOf(root, 'contract', context)) readContractInput(entry, context);
  for (const entry of entriesOf(root, 'rates', context)) readRate(entry, context);
  for (const entry of entriesOf(root, 'quantities', context)) readQuantity(entry, context);
  for (const entry of entriesOf(root, 'charges', context)) readCharge(entry, context);
  context.reader.checkLookedBack();
  completeUnits(context);
  const { seasons, windows, holidays, demandWindow, rounding, zeroKwh, contract, rates, quantities, charges, scope } =
    context;
  const text: ScheduleText = {
    from,
    note,
    contract,
    rates,
    quantities,
    charges,
    families: scope.families,
    seasons,
    windows,
    holidays,
    demandWindow,
    rounding,
    zeroKwh,
    dependsOnSeason: placesOf(context).some((place) => place.kind === 'seasons'),
    dependsOnMonth: placesOf(context).some((place) => place.kind === 'months'),
  };
  return { text, context };
}

function beginContext(root: MapTree, { problems, slots, currency, notes }: SharedParts): TextContext {
  const scope = new Scope(problems, slots);
  const zeroKwh = readZeroKwh(root, problems);
  const dates = new Set(dateInputs(root));
  const windowTree = valueOf(root, 'demandWindow');
  const roundTree = valueOf(root, 'rounding');
  const context: TextContext = {
    scope,
    problems,
    reader: new ExpressionReader(scope, problems, zeroKwh, dates, currency, notes),
    currency,
    windows: new Map(),
    holidays: readHolidays(root, problems),
    demandWindow: windowTree && readDemandWindow(windowTree, problems),
    rounding: (roundTree && readRounding(roundTree, problems)) ?? minorUnit(currency),
    zeroKwh,
    contract: [],
    rates: [],
    quantities: [],
    charges: [],
    usedWindows: new Set(),
    notes,
  };
  readCalendar(root, context);
  return context;
}

function minorUnit(currency: string): Rounding {
  return { step: Number(`1e-${minorUnitDecimals(currency)}`), mode: 'nearest' };
}

function dateInputs(root: MapTree): string[] {
  const contract = valueOf(root, 'contract');
  if (contract?.kind !== 'map') return [];
  return contract.entries.flatMap((entry) => {
    const unit = entry.value.kind === 'map' ? valueOf(entry.value, 'unit') : undefined;
    return unit?.kind === 'scalar' && unit.text === 'date' ? [entry.key] : [];
  });
}

function readZeroKwh(root: MapTree, problems: Problems): ScheduleText['zeroKwh'] {
  const tree = valueOf(root, 'zeroKwh');
  const map = tree && asMap(tree, problems, 'Write { pf: 1, ratio: 0 }.');
  const rules: ScheduleText['zeroKwh'] = {};
  if (!map || !checkFields(map, fieldNames(zeroKwhFields), 'zeroKwh', problems))
    return { pf: tree && 1, ratio: tree && 0 };
  for (const key of ['pf', 'ratio'] as const) {
    const value = valueOf(map, key);
    if (value) rules[key] = asNumber(value, problems, 'Write a number.') ?? 0;
  }
  return rules;
}

function readHolidays(root: MapTree, problems: Problems): HolidayRule {
  const rule: HolidayRule = { add: [], drop: [] };
  const tree = valueOf(root, 'holidays');
  const map = tree && asMap(tree, problems, 'Write { calendar: PT, add: [2026-12-24] }.');
  if (!map || !checkFields(map, fieldNames(holidayFields), 'holidays', problems)) return rule;
  for (const key of ['add', 'drop'] as const) {
    const dates = valueOf(map, key);
    if (dates?.kind === 'list' && dates.items.length === 0) continue;
    for (const word of dates ? (asWords(dates, problems, 'Write [2026-12-24].') ?? []) : []) {
      if (isCalendarDate(word.text)) rule[key].push(word.text);
      else problems.add(word, `"${word.text}" is not a date.`, 'Write 2026-12-24.');
    }
  }
  const calendar = valueOf(map, 'calendar');
  const name = calendar && asText(calendar, problems, 'Write PT, or IT-32.')?.text;
  const wrong = name === undefined ? undefined : problemWithCalendar(name);
  if (wrong && name !== undefined)
    problems.add(
      calendar!,
      wrong,
      didYouMean(name, calendarCountries(), 'Write a country such as PT, or a part of one such as IT-32.'),
    );
  else rule.calendar = name;
  return rule;
}

function readCalendar(root: MapTree, context: TextContext): void {
  const { problems, windows } = context;
  const seasons = valueOf(root, 'seasons');
  const seasonMap = seasons && asMap(seasons, problems, 'Write { summer: 05-01 to 10-31, winter: rest }.');
  context.seasons = seasonMap && readSeasons(seasonMap, problems);
  for (const entry of entriesOf(root, 'windows', context)) {
    const window = readWindow(entry, windows, context.seasons, problems);
    windows.set(entry.key, window ?? { name: entry.key, path: entry.path, words: '', rules: [] });
  }
  if (windows.size > 30)
    problems.add(
      entryOf(root, 'windows')!,
      `there are ${windows.size} windows, at most 30 are read.`,
      'Leave some out.',
    );
}

const nameSections: [string, NameInfo['kind']][] = [
  ['contract', 'contract'],
  ['rates', 'rate'],
  ['quantities', 'quantity'],
  ['charges', 'line'],
];

function announceNames(root: MapTree, context: TextContext): void {
  for (const [section, kind] of nameSections) {
    for (const entry of entriesOf(root, section, context)) context.scope.announce(entry.key, kind, entry);
  }
}

function entriesOf(root: MapTree, section: string, { problems }: TextContext): MapEntry[] {
  const tree = valueOf(root, section);
  if (!tree || (tree.kind === 'scalar' && tree.value === null)) return [];
  return asMap(tree, problems, 'Write names with their entries.')?.entries ?? [];
}

function completeUnits({ quantities, scope, reader }: TextContext): void {
  for (const quantity of quantities) {
    const { definition } = quantity;
    if (
      definition.kind !== 'past' ||
      quantity.unit !== '' ||
      definition.take.kind === 'count' ||
      definition.take.kind === 'streak'
    )
      continue;
    quantity.unit = reader.unitOf(definition.expression);
    const info = scope.made.get(quantity.name);
    if (info) info.unit = quantity.unit;
  }
}

/** Every place of a number in a text. */
function placesOf({ rates, charges }: TextContext): NumberPlace[] {
  const ofCharges = charges.flatMap(({ definition }) => {
    switch (definition.kind) {
      case 'amount':
        return [definition.amount];
      case 'per':
      case 'percent':
        return definition.price.map((tier) => tier.rate);
      default:
        return [definition.to];
    }
  });
  return [...rates.map((rate) => rate.place), ...ofCharges];
}
