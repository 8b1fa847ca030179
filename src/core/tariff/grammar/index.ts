/**
 * The words of the schedule language as plain data: one table, from which the reader knows its fields, the JSON Schema is made and
 * editors complete. It imports nothing that a browser lacks; import this folder there, not the tariff's own index.
 *
 *     scheduleGrammar.parts                             sections and head fields, in order
 *     takesAt(['quantities', 'maxKva'])                 { kind: 'kinds', kinds: [sum, highest, ...], common: [unit, round, ...] }
 *     takesAt(['charges', 'energy', 'tiers', '1'])      { kind: 'set', fields: [to, rate] }
 *     takesAt(['versions', '2026-08-01', 'charges', 'energy'])   the same as without the version
 *
 * Every {@link Field} says its `name`, `about` (a line for a consultant), what it `takes` (see {@link Takes}), an `example` of what stands
 * behind the colon, `isRequired`, `leftOut` (what holds then), `onlyInVersions`.
 */
import { channelTable, factTable, functionTable } from './formulas';
import { chargeFields, chargeKinds } from './charges';
import { exampleFields, readingFields } from './examples';
import { allParts, versionParts } from './parts';
import { quantityFields, quantityKinds } from './quantities';
import type { Takes } from './types';
import * as words from './words';

export type { ChannelWords, Field, FunctionWords, Kind, NameOf, Takes } from './types';

/** The language as data. */
export const scheduleGrammar = {
  parts: allParts,
  versionParts,
  quantityKinds,
  quantityFields,
  chargeKinds,
  chargeFields,
  exampleFields,
  readingFields,
  functions: functionTable,
  channels: channelTable,
  facts: factTable,
  words,
} as const;

/**
 * What may stand at a place of the file; nothing where the path leads nowhere.
 *
 * @param path  Keys from the top, list items by number; a key of the author's own counts as it is
 */
export function takesAt(path: readonly string[]): Takes | undefined {
  let takes: Takes | undefined = { kind: 'set', fields: allParts };
  for (const key of path) takes = takes && below(takes, key);
  return takes;
}

function below(takes: Takes, key: string): Takes | undefined {
  switch (takes.kind) {
    case 'set':
      return takes.fields.find(({ name }) => name === key)?.takes;
    case 'kinds':
      return [...takes.kinds.flatMap(({ fields }) => fields), ...takes.common].find(({ name }) => name === key)?.takes;
    case 'entries':
      return takes.of;
    case 'list':
      return /^\d+$/.test(key) ? takes.of : undefined;
    case 'either':
      return takes.of.map((inner) => below(inner, key)).find((inner) => inner !== undefined);
    case 'place':
      return placeBelow(takes.by, key);
    default:
      return undefined;
  }
}

function placeBelow(by: readonly ('window' | 'season' | 'month')[], key: string): Takes {
  if (key === 'months' && by.includes('month'))
    return { kind: 'entries', key: 'month', of: { kind: 'formula', reads: 'quantities' } };
  const rest = by.filter((what) => what === 'season');
  return by.includes('window') ? { kind: 'place', by: rest } : { kind: 'formula', reads: 'quantities' };
}
