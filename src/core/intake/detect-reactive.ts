import { set, type Candidate, type ValueInput } from './candidates';
import type { Test } from './evidence';
import { sensedFactor } from './power-factor';

/** Ratings of equipment and contracts that stand in every row. */
const platesWords =
  /\b(name ?plate|rated|rating|transformer|trafo|contract(ed)?|subscribed|souscrite|installed|capacity|nenn\w*)\b/i;

const hasSense = ({ findings }: ValueInput): boolean =>
  [...findings.values()].some((finding) => finding.role === 'sense');

const isBelow = ({ figures }: Candidate): boolean => figures.some((figure) => figure < 0);

/** Lagging and leading apart, or one signed column; apparent energy or a power factor serve only where both lack. */
export function chooseReactive(input: ValueInput, used: Candidate[]): void {
  const reactive = used.filter((candidate) => candidate.meaning.role.startsWith('reactive'));
  const best = (['energy', 'register', 'power'] as const).find((measure) =>
    reactive.some((candidate) => candidate.meaning.measure === measure),
  );
  for (const candidate of reactive) {
    if (candidate.meaning.measure === best) setReactive(input, candidate);
    else set(input, candidate, 'ignore', [[true, 'The other reactive column says the same']]);
  }
  chooseSubstitute(input, used, reactive.length > 0);
}

function setReactive(input: ValueInput, candidate: Candidate): void {
  const { meaning, figures } = candidate;
  const tests: Test[] = [[meaning.isPlain, meaning.why]];
  const isVaried = figures.some((figure) => figure !== 0 && !Number.isNaN(figure));
  tests.push([isVaried, isVaried ? 'Figures throughout' : 'Nought throughout: cannot be tested on this file']);
  if (meaning.role !== 'reactive-signed' || isBelow(candidate)) set(input, candidate, meaning.role, tests);
  else if (hasSense(input))
    set(input, candidate, 'reactive-signed', [
      ...tests.slice(1),
      [true, 'Another column says of each row whether it lags or leads'],
    ]);
  else set(input, candidate, 'reactive-lagging', [...tests, [true, 'None below nought: taken as lagging']]);
}

/** Apparent energy, or else a power factor; a power factor that tells the sense serves beside apparent energy too. */
function chooseSubstitute(input: ValueInput, used: readonly Candidate[], hasReactive: boolean): void {
  const substitutes = used.filter(({ meaning }) => meaning.role === 'apparent' || meaning.role === 'power-factor');
  const isPlate = ({ profile }: Candidate): boolean => platesWords.test(profile.name);
  const hasApparent = substitutes.some((other) => other.meaning.role === 'apparent' && !isPlate(other));
  for (const candidate of substitutes) {
    const { role } = candidate.meaning;
    const isSensed = [...candidate.profile.distinct.keys()].some((text) => sensedFactor(text) !== null);
    const tellsSense = role === 'power-factor' && !hasSense(input) && (isSensed || isBelow(candidate));
    const serves = !hasReactive && !isPlate(candidate) && (role === 'apparent' || !hasApparent || tellsSense);
    if (!serves) {
      const why = isPlate(candidate)
        ? 'Named as a rating, not a reading'
        : hasReactive
          ? 'Not needed beside the reactive columns'
          : 'Not needed beside the apparent energy';
      set(input, candidate, 'ignore', [[true, why]]);
    } else set(input, candidate, role, [senseTest(hasSense(input), isSensed, isBelow(candidate))]);
  }
}

function senseTest(isBeside: boolean, isBehind: boolean, isBelowNought: boolean): Test {
  const worked = 'No reactive column: kvarh are worked out from it';
  if (isBeside) return [true, `${worked}, lagging or leading as another column says of each row`];
  if (isBehind) return [true, `${worked}, lagging or leading as the word behind each figure says`];
  if (isBelowNought) return [false, `${worked}; figures below nought are read as leading`];
  return [false, `${worked}, taken as lagging: the file does not tell the sense`];
}

/** A column of senses says nothing where every reactive column names its own. */
export function dropIdleSense({ findings }: ValueInput): void {
  const serves = [...findings.values()].some(({ role }) =>
    ['reactive-signed', 'apparent', 'power-factor'].includes(role),
  );
  if (serves) return;
  for (const [index, finding] of findings)
    if (finding.role === 'sense')
      findings.set(index, { role: 'ignore', tests: [[true, 'The reactive columns name their own sense']] });
}
