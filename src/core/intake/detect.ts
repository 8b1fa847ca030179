import { profileColumns, sampleRows, shareOf, withoutFooters, type ColumnProfile } from './cells';
import { codedChannel } from './channel-codes';
import type { TableBlock } from './block';
import { findChannels } from './detect-values';
import { findTimeColumns } from './detect-time';
import { columnEvidence, guess, useOf, valuesShown, type RoleFinding, type Test } from './evidence';
import { columnLetter, type Grid } from './grid';
import { isBlankWord, voteDecimalMark, type DecimalVote } from './numbers';
import { senseOf } from './power-factor';
import { preambleMultiplier, preambleUnit } from './preamble';
import { furtherStamps } from './further-stamps';
import { valueRoles } from './extract';
import { qualityOf } from './quality';
import type { ColumnMap, ColumnUse, StampStyle } from './column-map';
import type { ColumnEvidence, Guess } from './types';
import { findWideColumns, type WideColumns } from './wide';
import { isForeignUnit, unitMeaning, unitOfHeader } from './units';
import { mentions } from './words';

/** Everything about the columns of a file of intervals that can be told before its rows are read one by one. */
interface IntervalDetection {
  layout: 'long' | 'wide';
  decimalMark: '.' | ',';
  columns: ColumnUse[];
  stamp: StampStyle;
  evidence: ColumnEvidence[];
  guesses: Guess[];
}

/** Detects the meaning of every column; what the column map says is not overruled here but by `mergeMap`. */
export function detectColumns(
  grid: Grid,
  block: TableBlock,
  options: { timeZone: string; delimiter?: string; map: Partial<ColumnMap> },
): IntervalDetection {
  const rows = withoutFooters(grid, sampleRows(block.firstRow, block.lastRow, 360));
  const profiles = profileColumns(grid, block.names, rows);
  const guesses: Guess[] = [headerGuess(grid, block)];
  const decimals = decimalVote(grid, profiles, rows, options);
  guesses.push(decimalGuess(decimals, options.map));
  const decimalMark = options.map.decimalMark ?? decimals.mark;
  const wide = options.map.layout === 'long' ? null : findWideColumns(profiles);
  guesses.push(
    guess('layout', wide ? 'wide' : 'long', [
      [wide?.sure ?? true, wide?.why ?? 'Each row holds the readings of one interval'],
    ]),
  );
  const sections = block.sections ?? [0];
  const time = findTimeColumns({
    grid,
    profiles: profiles.slice(0, sections[1]),
    rows,
    timeZone: options.timeZone,
    map: options.map,
    wide,
    decimalMark,
  });
  guesses.push(...time.guesses);
  const findings = new Map<number, RoleFinding>([
    ...time.findings,
    ...furtherStamps(profiles, time.findings, sections),
  ]);
  if (wide) for (const use of wide.columns) findings.set(use.index, wideFinding(grid, block, wide));
  const open = profiles.filter((profile) => !findings.has(profile.index));
  findLabels(open, findings);
  const remaining = profiles.filter((profile) => !findings.has(profile.index));
  if (!wide) findChannels({ grid, block, profiles: remaining, rows, decimalMark, findings });
  for (const profile of remaining)
    if (!findings.has(profile.index))
      findings.set(profile.index, { role: 'ignore', tests: [[true, 'Holds nothing an interval needs']] });
  const multiplier = preambleMultiplier(grid, block);
  const factor = multiplier?.isUnapplied ? multiplier.factor : null;
  if (factor !== null) proposeFactor(findings, factor, multiplier?.words ?? '');
  const evidence = profiles.map((profile) =>
    columnEvidence(
      profile,
      findings.get(profile.index) ?? { role: 'ignore', tests: [] },
      valuesShown(grid, profile, rows, decimalMark),
      columnLetter(grid.sourceColumn?.(profile.index) ?? profile.index),
    ),
  );
  const minutes = new Map(wide?.columns.map((use) => [use.index, use.minuteOfDay]) ?? []);
  const columns = evidence.map((line) =>
    useOf(line, {
      ...(minutes.has(line.index) ? { minuteOfDay: minutes.get(line.index) ?? 0 } : {}),
      ...(factor !== null && isMultiplied(line.takenAs) ? { factor } : {}),
    }),
  );
  const stamp: StampStyle = { ...time.stamp, ...(wide ? { stepMinutes: wide.stepMinutes, marks: 'begin' } : {}) };
  return {
    layout: wide ? 'wide' : 'long',
    decimalMark,
    columns,
    stamp,
    evidence,
    guesses,
  };
}

const isMultiplied = (role: RoleFinding['role']): boolean =>
  role === 'day-value' || role === 'value' || (valueRoles.has(role) && role !== 'power-factor');

/** A multiplier that the file says is not in its figures yet is proposed, to be confirmed. */
function proposeFactor(findings: ReadonlyMap<number, RoleFinding>, factor: number, words: string): void {
  for (const finding of findings.values())
    if (isMultiplied(finding.role))
      finding.tests.push([false, `Multiplied by ${factor}: above the table stands “${words}”`]);
}

/** A wide table's unit stands in a header, above the table, or nowhere. */
function wideFinding(grid: Grid, block: TableBlock, wide: WideColumns): RoleFinding {
  const named = block.names.map((name) => unitOfHeader(name)).find((unit) => unit !== null);
  const unit = named ?? preambleUnit(grid, block);
  const tests: Test[] = [[wide.sure, wide.why]];
  if (unit) return { role: 'day-value', unit: unit.unit, measure: unit.measure, tests };
  return {
    role: 'day-value',
    unit: 'kWh',
    isUnitAssumed: true,
    tests: [...tests, [false, 'No unit is named: taken as kWh']],
  };
}

/** The header row with what speaks for it. */
export function headerGuess(grid: Grid, block: TableBlock): Guess {
  if (block.headerRow === null)
    return guess('header-row', 'none', [[false, 'No row of names stands above the first row of readings']]);
  const number = grid.rowNumber(block.headerRow);
  return guess('header-row', `row ${number}`, [
    [true, `Words in row ${number}, dates and figures from row ${grid.rowNumber(block.firstRow)}`],
  ]);
}

/** The decimal mark by the cells of the columns of figures. */
export function decimalVote(
  grid: Grid,
  profiles: readonly ColumnProfile[],
  rows: readonly number[],
  options: { delimiter?: string },
): DecimalVote {
  const figures = profiles.filter((profile) => shareOf(profile, 'number') > 0.6);
  const cells = figures.flatMap((profile) =>
    rows
      .slice(0, 200)
      .map((row) => grid.figureText(row, profile.index))
      .filter((text) => !isBlankWord(text)),
  );
  return voteDecimalMark(cells, options.delimiter === ';' ? ',' : '.');
}

/** The decimal mark with what speaks for it. */
export function decimalGuess(vote: DecimalVote, map: Partial<ColumnMap>): Guess {
  const named = (mark: string): string => (mark === ',' ? 'comma' : 'point');
  if (map.decimalMark && map.decimalMark !== vote.mark)
    return guess('decimal-mark', named(map.decimalMark), [[true, 'Given by the column map']]);
  if (vote.comma + vote.point === 0)
    return guess('decimal-mark', named(vote.mark), [
      [vote.sure, vote.sure ? 'No figure has a mark' : 'No figure shows which mark is the decimal one'],
    ]);
  const share = `${Math.max(vote.comma, vote.point)} of ${vote.comma + vote.point} telling figures agree`;
  return guess('decimal-mark', named(vote.mark), [[vote.sure, share]]);
}

/** Columns of words: meter, quality, channel and unit. */
function findLabels(profiles: readonly ColumnProfile[], findings: Map<number, RoleFinding>): void {
  for (const profile of profiles) {
    const filled = profile.sampled - profile.kinds.blank;
    const isText = shareOf(profile, 'text') > 0.5;
    const isMark = isText && mentions(profile.name, 'quality');
    if (filled === 0 || profile.isManyValued || (unitOfHeader(profile.name) && !isMark)) continue;
    const words = [...profile.distinct.keys()];
    if (isSenses(profile, words)) {
      findings.set(profile.index, {
        role: 'sense',
        tests: [[true, `Names the sense of each row: ${words.slice(0, 4).join(', ')}`]],
      });
      continue;
    }
    const isUnit = (word: string): boolean => unitMeaning(word) !== null;
    // A unit of another trade (therms) beside those of energy names rows to leave out.
    const isUnits =
      isText &&
      words.some(isUnit) &&
      words.every((word) => isUnit(word) || (/^\S+$/.test(word) && isForeignUnit(word)));
    const unitsInside =
      isText && !isUnits && words.filter((word) => unitOfHeader(word) !== null).length * 2 >= words.length;
    const known = words.filter((word) => qualityOf(word) !== null).length;
    const isQuality = mentions(profile.name, 'quality') ? known * 2 >= words.length : known === words.length && isText;
    if (isUnits && !(isQuality && mentions(profile.name, 'quality')))
      findings.set(profile.index, {
        role: 'unit',
        tests: [[true, `Every cell is a unit: ${words.slice(0, 4).join(', ')}`]],
      });
    else if (unitsInside || (mentions(profile.name, 'channel') && isText && words.some(namesChannel))) {
      findings.set(profile.index, {
        role: 'channel',
        tests: [[true, `Names the quantity of each row: ${words.slice(0, 4).join(', ')}`]],
      });
    } else if (isQuality && (isText || mentions(profile.name, 'quality')))
      findings.set(profile.index, { role: 'quality', tests: qualityTests(profile, known) });
    else if (mentions(profile.name, 'meter') || (isText && /\bid\b/i.test(profile.name))) {
      findings.set(profile.index, {
        role: 'meter',
        tests: [[words.length === 1, words.length === 1 ? 'One value throughout' : `${words.length} values`]],
      });
    }
  }
}

/** Words of lagging and leading; letters alone count only under a name that speaks of them. */
const isSenses = (profile: ColumnProfile, words: readonly string[]): boolean =>
  words.every((word) => senseOf(word) !== null) &&
  (mentions(profile.name, 'sense') || words.some((word) => word.length > 1));

const namesChannel = (word: string): boolean =>
  codedChannel(word) !== null || mentions(word, 'active') || mentions(word, 'reactive') || mentions(word, 'export');

function qualityTests(profile: ColumnProfile, known: number): Test[] {
  return [
    [mentions(profile.name, 'quality'), 'Its name is that of a mark of quality'],
    [known === profile.distinct.size, `${known} of ${profile.distinct.size} marks are known`],
  ];
}
