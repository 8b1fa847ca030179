/** Zone of the tables. */
export const zone = 'Etc/UTC';

/** Stamps of quarter-hours from the beginning of an invented day. */
export const stamp = (at: number): string =>
  new Date(Date.UTC(2025, 5, 10) + at * 900_000).toISOString().slice(0, 16).replace('T', ' ');

/** A table of quarter-hours: one row per entry, cells after the stamp. */
export const table = (header: string, rows: (string | number)[][]): string =>
  [header, ...rows.map((cells, at) => [stamp(at), ...cells].join(','))].join('\n');

/** Codes of notes, in order. */
export const codes = (notes: { code: string }[]): string[] => notes.map((note) => note.code);
