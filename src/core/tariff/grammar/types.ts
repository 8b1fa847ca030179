/** What a name that stands somewhere else in the file may be. */
export type NameOf =
  'window' | 'season' | 'contract' | 'quantity' | 'given' | 'measure' | 'line' | 'figure' | 'history' | 'entry';

/**
 * What may stand behind a field's colon.
 *
 * - `text`: a few words. `number`: a plain number. `date`: 2026-01-31.
 * - `word`: one of the words; `isOpen`: others are taken too, these are the usual ones.
 * - `written`: a text of a fixed form; `pattern` is a regular expression, `forms` are ways to write it; `isNumberToo`: also a plain number.
 * - `formula`: a number or a formula. It reads `quantities` (what is made above), `channels` (those of the meter too) or the `past` (lines too).
 * - `place`: a number or a formula, or a map that gives one by window, season or month.
 * - `name`: a name of the file.
 * - `set`: fields. `kinds`: the fields of exactly one kind, and common ones. `entries`: values under keys the author chooses.
 * - `list`, of at least one value unless `least` says otherwise; `mayStandAlone`: a single value needs no brackets. `either`: one of these.
 */
export type Takes =
  | { kind: 'text' | 'number' | 'date' }
  | { kind: 'word'; words: readonly string[]; isOpen?: true }
  | { kind: 'written'; pattern: string; forms: readonly string[]; isNumberToo?: true }
  | { kind: 'formula'; reads: 'quantities' | 'channels' | 'past' }
  | { kind: 'place'; by: readonly ('window' | 'season' | 'month')[] }
  | { kind: 'name'; of: NameOf }
  | { kind: 'set'; fields: readonly Field[] }
  | { kind: 'kinds'; kinds: readonly Kind[]; common: readonly Field[] }
  | { kind: 'entries'; key: 'own' | 'date' | 'month' | 'step' | NameOf; of: Takes }
  | { kind: 'list'; of: Takes; least?: number; most?: number; mayStandAlone?: true }
  | { kind: 'either'; of: readonly Takes[] };

/** A field: one key of a set of entries. */
export interface Field {
  name: string;
  /** What it says, in a line, for a consultant. */
  about: string;
  takes: Takes;
  /** How it may be written behind the colon. */
  example: string;
  isRequired?: true;
  /** Another field it cannot do without. */
  needs?: string;
  /** What holds where it is left out. */
  leftOut?: string;
  /** Versions may change it. */
  inVersions?: true;
  /** Only versions may say it. */
  onlyInVersions?: true;
}

/** A kind of entry, told by the field of the same name. */
export interface Kind {
  name: string;
  about: string;
  /** Its fields, the one that tells the kind first. */
  fields: readonly Field[];
  /** Of these exactly one is said. */
  oneOf?: readonly string[];
}

/** A function of formulas. */
export interface FunctionWords {
  name: string;
  /** How it is written: `excess(a; b)`. */
  form: string;
  about: string;
  least: number;
  most: number;
}

/** A channel of the meter. */
export interface ChannelWords {
  name: string;
  unit: string;
  about: string;
}

/** Names of fields that may be said outside versions, in order. */
export function fieldNames(fields: readonly Field[]): string[] {
  return fields.filter(({ onlyInVersions }) => !onlyInVersions).map(({ name }) => name);
}
