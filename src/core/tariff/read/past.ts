import { overs, takes } from '../grammar/words';
import type { PastDefinition, PastSpan } from '../model';
import { didYouMean } from '../nearest';
import { bare, type Found } from './dimensions';
import type { RawExpression } from './expressions';
import { asText } from './fields';
import { readSeasonNames } from './clock';
import type { TextContext } from './text-reader';
import { valueOf, type MapTree } from './tree';

/** A look back parsed. */
export interface RawPast {
  expression: RawExpression;
  found: Found;
  define(window: string | undefined): { definition: PastDefinition; unit: string };
}

/** Reads `past`, `take`, `over`, `season`. */
export function readPast(map: MapTree, context: TextContext): RawPast | undefined {
  const { reader } = context;
  const take = takeOf(map, context);
  const over = take && overOf(map, take.kind === 'streak', context);
  const season = seasonOf(map, context);
  const rules = { anyTime: over !== undefined && !over.includesThis };
  const expression = reader.parse(valueOf(map, 'past')!, rules);
  if (!take || !over || season === 'problem' || !expression) return undefined;
  const isCounted = take.kind === 'count' || take.kind === 'streak';
  return {
    expression,
    found: isCounted ? bare : expression.found,
    define: (window) => {
      const bound = reader.bind(expression, window, rules);
      const unit = isCounted ? '' : reader.unitOf(bound);
      return { unit, definition: { kind: 'past', expression: bound, take, over, season } };
    },
  };
}

function takeOf(map: MapTree, { problems }: TextContext): PastDefinition['take'] | undefined {
  const tree = valueOf(map, 'take');
  if (!tree) {
    problems.add(map, 'does not say what to take of the past.', `Add take: ${takes.join(', ')}.`);
    return undefined;
  }
  const word = asText(tree, problems, `Write ${takes.join(', ')}.`);
  if (!word) return undefined;
  const several = /^mean of (\d+) highest$/.exec(word.text);
  if (several && Number(several[1]) > 0) return { kind: 'mean', highest: Number(several[1]), words: word.text };
  for (const kind of ['highest', 'lowest', 'mean', 'sum', 'count', 'streak'] as const) {
    if (word.text === kind) return { kind, words: kind };
  }
  problems.add(
    word,
    `"${word.text}" is nothing to take of the past.`,
    didYouMean(word.text, takes, `Write ${takes.join(', ')}.`),
  );
  return undefined;
}

function overOf(map: MapTree, isStreak: boolean, { problems }: TextContext): PastSpan | undefined {
  const tree = valueOf(map, 'over');
  if (isStreak) {
    if (!tree) return { kind: 'streak', count: 0, includesThis: true, words: 'in a row' };
    problems.add(tree, 'is not said of a streak.', 'Leave it out: a streak ends with this period.');
    return undefined;
  }
  const remedy = `Write over: ${overs.join(', or ')}.`;
  if (!tree) {
    problems.add(map, 'does not say over which periods.', remedy);
    return undefined;
  }
  const word = asText(tree, problems, remedy);
  if (!word) return undefined;
  const last = /^(this and )?last (\d+) periods?$/.exec(word.text);
  if (last && Number(last[2]) >= 1)
    return { kind: 'last', count: Number(last[2]), includesThis: last[1] !== undefined, words: word.text };
  const year = /^(this and )?earlier periods of this year$/.exec(word.text);
  if (year) return { kind: 'year', count: 0, includesThis: year[1] !== undefined, words: word.text };
  problems.add(word, `"${word.text}" is no span of periods.`, didYouMean(word.text, overs, remedy));
  return undefined;
}

function seasonOf(map: MapTree, { problems, seasons }: TextContext): PastDefinition['season'] | 'problem' {
  const tree = valueOf(map, 'season');
  if (!tree) return undefined;
  const word = asText(tree, problems, 'Write wholly winter, or mostly winter.');
  if (!word) return 'problem';
  const found = /^(wholly|mostly)\s+(\S+)$/.exec(word.text);
  if (!found) {
    problems.add(
      word,
      `"${word.text}" does not say how much of a period lies in the season.`,
      'Write wholly winter, or mostly winter.',
    );
    return 'problem';
  }
  const name = found[2]!;
  const [index] = readSeasonNames({ ...word, text: name }, seasons, problems) ?? [];
  return index === undefined ? 'problem' : { index, name, isWholly: found[1] === 'wholly' };
}
