/** A piece of the file as read: where it stands and the path people are told. */
interface TreePlace {
  /** Offset of its first character in the file. */
  offset: number;
  path: string;
}

/** A single value. `text` is as written, without quotes; `value` what YAML makes of it. */
export interface ScalarTree extends TreePlace {
  kind: 'scalar';
  text: string;
  value: string | number | boolean | null;
  /** Offset of the first character of `text`. */
  textOffset: number;
}

/** A list, in order. */
export interface ListTree extends TreePlace {
  kind: 'list';
  items: Tree[];
}

/** Entries by key, in the order of the file, each key once. */
export interface MapTree extends TreePlace {
  kind: 'map';
  entries: MapEntry[];
}

/** A key with its value; offset and path are the key's. */
export interface MapEntry extends TreePlace {
  key: string;
  value: Tree;
}

/** The file as a tree of our own, so that its order and places survive merging. Never changed once made. */
export type Tree = ScalarTree | ListTree | MapTree;

/** The entry under a key, if there. */
export function entryOf(map: MapTree, key: string): MapEntry | undefined {
  return map.entries.find((entry) => entry.key === key);
}

/** The value under a key, if there. */
export function valueOf(map: MapTree | undefined, key: string): Tree | undefined {
  return map && entryOf(map, key)?.value;
}

/** Whether a value is the bare word given. */
export function isWord(tree: Tree | undefined, word: string): boolean {
  return tree?.kind === 'scalar' && tree.text === word;
}
