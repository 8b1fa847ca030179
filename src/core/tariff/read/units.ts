import { meterUnits } from '../grammar/words';
import { nearestName } from '../nearest';
import { asText } from './fields';
import type { TextContext } from './text-reader';
import { valueOf, type MapTree } from './tree';

const otherUnits: ReadonlySet<string> = new Set([
  ...meterUnits,
  'kV',
  'MW',
  'MWh',
  'Mvar',
  'Mvarh',
  'MVA',
  'MVAh',
  'Wh',
  'var',
  'VA',
]);

/** Whether a unit is one that meters show. */
export function isMeterUnit(unit: string): boolean {
  return otherUnits.has(unit);
}

/**
 * The unit as said. By its unit a quantity is known to be energy, which decides how its line is shared between parts of a period:
 * so a slip in a meter's unit is refused.
 */
export function unitText(map: MapTree, { problems }: TextContext): string | undefined | 'problem' {
  const tree = valueOf(map, 'unit');
  if (!tree) return undefined;
  const word = asText(tree, problems, 'Write unit: kVA.');
  if (!word) return 'problem';
  const near = nearestName(word.text, meterUnits, 1);
  if (otherUnits.has(word.text) || near === undefined) return word.text;
  problems.add(word, `"${word.text}" is not a unit of a meter.`, `Did you mean "${near}"?`);
  return 'problem';
}
