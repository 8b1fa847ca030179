import { isMap, isNode, isScalar, isSeq, LineCounter, parseDocument } from 'yaml';

/** Line of a path ("charges.demand", "examples.2") in a text, or of the nearest entry that holds it. */
export type LineOf = (path: string) => number | null;

/** Parts of the longest path looked for: versions, day, charges, name. */
const deepest = 4;

/** Finds lines of entries; a broken text has none. */
export function linesOf(text: string): LineOf {
  const counter = new LineCounter();
  const { contents } = parseDocument(text, { lineCounter: counter });
  const lines = new Map<string, number>();
  const keysOf = (node: unknown, prefix: string) => {
    if (isSeq(node)) node.items.forEach((item, index) => itemOf(item, `${prefix}${index + 1}`));
    if (!isMap(node)) return;
    for (const { key, value } of node.items) {
      if (!isScalar(key) || !key.range) continue;
      const path = `${prefix}${key.source ?? String(key.value)}`;
      lines.set(path, counter.linePos(key.range[0]).line);
      if (path.split('.').length < deepest) keysOf(value, `${path}.`);
    }
  };
  const itemOf = (node: unknown, path: string) => {
    if (isNode(node) && node.range) lines.set(path, counter.linePos(node.range[0]).line);
  };
  keysOf(contents, '');
  return (path) => {
    for (let parts = path.split('.'); parts.length > 0; parts = parts.slice(0, -1)) {
      const line = lines.get(parts.join('.'));
      if (line !== undefined) return line;
    }
    return null;
  };
}
