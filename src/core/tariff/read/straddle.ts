import { straddleFields } from '../grammar/entries';
import { fieldNames } from '../grammar/types';
import { straddles } from '../grammar/words';
import type { Straddle, StraddleRule } from '../model';
import { didYouMean } from '../nearest';
import { asText, checkFields } from './fields';
import type { Problems } from './problems';
import { valueOf, type MapTree, type Tree } from './tree';

/** Where nothing is said. */
export const usualStraddle: StraddleRule = {
  straddle: 'days',
  division: 'days',
  ruledBy: { text: null, season: null, month: null },
};

/**
 * Reads `straddle`: one word, or one each for versions (`text`), seasons and rider months.
 *
 * One word says how versions and rider months go; by the first or last day it leaves seasons to be shared by days.
 */
export function readStraddle(root: MapTree, problems: Problems): StraddleRule | undefined {
  const tree = valueOf(root, 'straddle');
  if (!tree) return undefined;
  if (tree.kind !== 'map') {
    const word = readWord(tree, problems);
    return word && ruleOf(word, isRuling(word) ? 'days' : word, word);
  }
  if (!checkFields(tree, fieldNames(straddleFields), 'straddle', problems)) return undefined;
  const wordOf = (field: string, usual: Straddle): Straddle | undefined => {
    const value = valueOf(tree, field);
    return value ? readWord(value, problems) : usual;
  };
  const text = wordOf('text', 'days');
  const season = text && wordOf('season', isRuling(text) ? 'days' : text);
  const month = season && wordOf('month', text);
  if (!text || !season || !month) return undefined;
  const shared = new Set([text, season, month].filter((word) => !isRuling(word)));
  if (shared.size > 1) {
    problems.add(tree, 'says both intervals and days.', 'What is shared is shared in one way; choose one.');
    return undefined;
  }
  return ruleOf(text, season, month);
}

function readWord(tree: Tree, problems: Problems): Straddle | undefined {
  const remedy = `Write ${straddles.join(', ')}.`;
  const word = asText(tree, problems, remedy);
  const found = straddles.find((rule) => rule === word?.text);
  if (word && !found)
    problems.add(word, `"${word.text}" is no way to divide a bill.`, didYouMean(word.text, straddles, remedy));
  return found;
}

function isRuling(word: Straddle): word is 'start' | 'end' {
  return word === 'start' || word === 'end';
}

function ruleOf(text: Straddle, season: Straddle, month: Straddle): StraddleRule {
  const rulingOf = (word: Straddle): 'start' | 'end' | null => (isRuling(word) ? word : null);
  return {
    straddle: text,
    division: [text, season, month].includes('intervals') ? 'intervals' : 'days',
    ruledBy: { text: rulingOf(text), season: rulingOf(season), month: rulingOf(month) },
  };
}
