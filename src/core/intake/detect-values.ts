import { set, type Candidate, type ValueInput } from './candidates';
import { shareOf, type ColumnProfile } from './cells';
import { channelMeaning } from './channel-words';
import { chooseReactive, dropIdleSense } from './detect-reactive';
import { sensedFactor } from './power-factor';
import { preambleUnit } from './preamble';
import { isConstant, onlyGrows } from './registers';
import type { Test } from './evidence';
import { unitOfHeader } from './units';
import { mentions, namesPowerFactor, namesRegister } from './words';

/** Finds what the columns of figures of a long table measure. */
export function findChannels(input: ValueInput): void {
  const candidates = input.profiles
    .filter((profile) => isFigures(profile))
    .map((profile) => ({ profile, meaning: channelMeaning(profile.name), figures: figuresOf(input, profile) }));
  const explained = [...input.findings.values()].some(
    (finding) => finding.role === 'channel' || finding.role === 'unit',
  );
  const isSpoken = candidates.some((candidate) => candidate.meaning.isPlain && candidate.meaning.unit !== null);
  if (explained && !isSpoken) return findExplainedValue(input, candidates);
  for (const [index, finding] of input.findings) {
    if (finding.role !== 'channel' && finding.role !== 'unit') continue;
    input.findings.set(index, { role: 'ignore', tests: [[true, 'Each column of figures names its own quantity']] });
  }
  const used = candidates.filter((candidate) => candidate.meaning.role !== 'ignore');
  if (used.some((candidate) => candidate.meaning.role === 'active')) {
    for (const candidate of used) markRegister(candidate);
    markStanding(used);
    chooseActive(input, used);
  } else nameActive(input, candidates);
  chooseReactive(input, used);
  dropIdleSense(input);
  for (const candidate of candidates) {
    if (input.findings.has(candidate.profile.index)) continue;
    const role = candidate.meaning.role === 'export' ? 'export' : 'ignore';
    set(input, candidate, role, [[true, candidate.meaning.why]]);
  }
}

/** A column of figures; one whose name has a unit may hold many words, which are then refused by their place. */
function isFigures(profile: ColumnProfile): boolean {
  const isNamed = unitOfHeader(profile.name) !== null;
  const filled = profile.sampled - profile.kinds.blank;
  if (namesPowerFactor(profile.name) && [...profile.distinct.keys()].some((text) => sensedFactor(text))) return true;
  return filled === 0 ? isNamed : shareOf(profile, 'number') > (isNamed ? 0.2 : 0.9);
}

function figuresOf(input: ValueInput, profile: ColumnProfile): Float64Array {
  return Float64Array.from(input.rows, (row) => input.grid.number(row, profile.index, input.decimalMark));
}

/** One value column whose quantity another column of the row names. */
function findExplainedValue(input: ValueInput, candidates: Candidate[]): void {
  const value =
    candidates.find((candidate) => mentions(candidate.profile.name, 'value')) ??
    candidates.find((candidate) => candidate.profile.isManyValued) ??
    candidates[0];
  if (value)
    input.findings.set(value.profile.index, {
      role: 'value',
      tests: [[true, 'Explained by the column that names quantity or unit']],
    });
}

/** A column that only ever grows is a register: its differences are the energy. */
function markRegister(candidate: Candidate): void {
  const { meaning, profile, figures } = candidate;
  if (meaning.measure !== 'energy' || !onlyGrows(figures, namesRegister(profile.name))) return;
  candidate.meaning = {
    ...meaning,
    measure: 'register',
    why: `${meaning.why}; it only ever grows, so it is a register and its differences are the energy`,
  };
}

/** Beside a register that runs, a column that stands still is a register too: an export never used, a tariff not in force. */
function markStanding(candidates: readonly Candidate[]): void {
  if (!candidates.some((candidate) => candidate.meaning.measure === 'register')) return;
  for (const candidate of candidates) {
    const { meaning, figures } = candidate;
    const isEnergy = meaning.measure === 'energy' && meaning.role !== 'power-factor';
    if (!isEnergy || !isConstant(figures)) continue;
    const why = `${meaning.why}; it stands still beside a register that runs`;
    candidate.meaning = { ...meaning, measure: 'register', why };
  }
}

/** Extremes within an interval; `15 min` is a length. */
const extremeWords = /\bmax(imum)?\b|(?<!\d\s?)\bmin(imum)?\b|\bpeak (kw|demand)\b/i;

/** The energy drawn: energy before power before registers; parts of a total are not counted beside it. */
function chooseActive(input: ValueInput, used: Candidate[]): void {
  const active = used.filter((candidate) => candidate.meaning.role === 'active');
  const rank = { energy: 0, power: 1, register: 2 };
  const best = Math.min(...active.map((candidate) => rank[candidate.meaning.measure]));
  const alike = active.filter((candidate) => rank[candidate.meaning.measure] === best);
  const averages = alike.filter((candidate) => !extremeWords.test(candidate.profile.name));
  const chosen = averages.length > 0 ? averages : alike;
  for (const candidate of active.filter((other) => !chosen.includes(other))) {
    const why = alike.includes(candidate)
      ? 'An extreme within the interval, not its energy'
      : `The ${best === 0 ? 'energy' : 'power'} column says the same`;
    set(input, candidate, 'ignore', [[true, why]]);
  }
  const total =
    chosen.length > 2
      ? chosen.find((candidate) =>
          isSumOf(
            candidate,
            chosen.filter((other) => other !== candidate),
          ),
        )
      : undefined;
  for (const candidate of chosen) {
    if (total && candidate !== total)
      set(input, candidate, 'ignore', [[true, `Part of ${total.profile.name}, which is counted`]]);
    else set(input, candidate, 'active', activeTests(candidate, chosen.length > 1 && !total));
  }
}

function activeTests(candidate: Candidate, isShared: boolean): Test[] {
  const filled = candidate.figures.filter((figure) => !Number.isNaN(figure));
  const tests: Test[] = [
    [candidate.meaning.isPlain, candidate.meaning.why],
    [filled.length > 0, filled.length > 0 ? 'Figures throughout' : 'No figure in the sample'],
  ];
  const below = filled.filter((figure) => figure < 0).length;
  tests.push([
    below === 0,
    below === 0 ? 'None below nought' : `${below} sampled figures below nought: read as export`,
  ]);
  if (isShared)
    tests.push([
      mentions(candidate.profile.name, 'touRegister'),
      'One of several registers of the energy drawn, added',
    ]);
  return tests;
}

function isSumOf(total: Candidate, parts: Candidate[]): boolean {
  let tried = 0;
  let met = 0;
  total.figures.forEach((figure, at) => {
    const sum = parts.reduce((running, part) => running + (part.figures[at] ?? Number.NaN), 0);
    if (Number.isNaN(figure) || Number.isNaN(sum)) return;
    tried += 1;
    if (Math.abs(figure - sum) <= Math.max(0.02, Math.abs(figure) * 0.002)) met += 1;
  });
  return tried > 2 && met > tried * 0.95 && total.figures.some((figure) => figure > 0);
}

/** No name speaks of energy: the only column of figures is taken, in the unit named above the table or kWh, to be confirmed. */
function nameActive(input: ValueInput, candidates: Candidate[]): void {
  const plain = candidates.filter(
    (candidate) =>
      candidate.meaning.role === 'ignore' &&
      !candidate.meaning.isPlain &&
      !mentions(candidate.profile.name, 'ignorable'),
  );
  const preamble = preambleUnit(input.grid, input.block);
  const preferred = plain.filter((candidate) => mentions(candidate.profile.name, 'value'));
  const chosen = preferred.length === 1 ? preferred : plain;
  for (const candidate of chosen) {
    candidate.meaning = {
      role: 'active',
      unit: preamble,
      measure: preamble?.measure ?? 'energy',
      why: preamble ? `${preamble.unit} is named above the table` : 'No unit is named: taken as kWh',
      isPlain: preamble !== null,
    };
    if (!preamble) markRegister(candidate);
    const several: Test[] =
      chosen.length > 1 ? [[false, `One of ${chosen.length} columns that may each be a meter`]] : [];
    set(input, candidate, 'active', [...activeTests(candidate, false), ...several]);
  }
}
