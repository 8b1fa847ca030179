import type { Place, Places } from '../../../schemas/attachment';
import { saysTheSame } from './printed';

/** What a form keeps about pages, its rows about themselves, so that a place moves with its row. */
export interface TypedPlaces {
  places?: Record<string, Place>;
}

/** The part of a typed bill that has to do with pages. */
export interface TypedPages extends TypedPlaces {
  quantities: ({ name: string } & TypedPlaces)[];
  lines: TypedPlaces[];
  /** Waiting pages that go with the bill when it is kept. */
  attachmentIds?: number[];
}

const rowField = /^(quantities|lines)\.(\d+)\.(\w+)$/;

/** Where the form keeps the place of a field: `lines.2.amount` -> `lines.2.places.amount`, `total` -> `places.total`. */
export const placePath = (path: string) => path.replace(/^(.*\.)?(\w+)$/, '$1places.$2');

/** The place a field was filled from. */
export function placeAt(typed: TypedPages, path: string): Place | null {
  const row = rowField.exec(path);
  if (!row) return typed.places?.[path] ?? null;
  const [, list, index, field = ''] = row;
  return typed[list as 'quantities' | 'lines'][Number(index)]?.places?.[field] ?? null;
}

/** What stands in a field. */
export function textAt(typed: object, path: string): string {
  const found = path
    .split('.')
    .reduce<unknown>((part, key) => (part as Record<string, unknown> | undefined)?.[key], typed);
  return typeof found === 'string' ? found : '';
}

/** Fields with their places, by their path in the form. */
export function placedFields(typed: TypedPages): { path: string; place: Place }[] {
  const of = (places: Record<string, Place> | undefined, prefix: string) =>
    Object.entries(places ?? {}).map(([field, place]) => ({ path: prefix + field, place }));
  return [
    ...of(typed.places, ''),
    ...typed.quantities.flatMap(({ places }, index) => of(places, `quantities.${index}.`)),
    ...typed.lines.flatMap(({ places }, index) => of(places, `lines.${index}.`)),
  ];
}

/** Whether a field still has the figure of its place. */
export const isTrue = (typed: TypedPages, { path, place }: { path: string; place: Place }) =>
  saysTheSame(textAt(typed, path), place.text);

/**
 * Places as a bill keeps them: by the names of quantities and the order of kept lines. A place whose figure was typed over
 * is left out, since it no longer says where the value comes from; without any there is nothing to keep.
 *
 * @param lines  Rows of the form that are kept as lines, in order
 */
export function placesToKeep(typed: TypedPages, lines: readonly number[]): Places | undefined {
  const kept: Places = {};
  for (const { path, place } of placedFields(typed)) {
    if (!isTrue(typed, { path, place })) continue;
    const row = rowField.exec(path);
    if (!row) kept[path] = place;
    else if (row[1] === 'quantities') kept[`quantities.${typed.quantities[Number(row[2])]?.name}.${row[3]}`] = place;
    else if (lines.includes(Number(row[2]))) kept[`lines.${lines.indexOf(Number(row[2]))}.${row[3]}`] = place;
  }
  return Object.keys(kept).length > 0 ? kept : undefined;
}

/** A typed bill with the places it was kept with. */
export function withPlaces<Typed extends TypedPages>(typed: Typed, places: Places): Typed {
  const of = (prefix: string) => {
    const own = Object.entries(places).filter(
      ([key]) => key.startsWith(prefix) && !key.slice(prefix.length).includes('.'),
    );
    return own.length > 0
      ? { places: Object.fromEntries(own.map(([key, place]) => [key.slice(prefix.length), place])) }
      : {};
  };
  return {
    ...typed,
    ...of(''),
    quantities: typed.quantities.map((row) => ({ ...row, ...of(`quantities.${row.name}.`) })),
    lines: typed.lines.map((row, index) => ({ ...row, ...of(`lines.${index}.`) })),
  };
}
