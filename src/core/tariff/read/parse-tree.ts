import { isAlias, isMap, isScalar, isSeq, LineCounter, parseDocument, type Document, type Node, type Pair } from 'yaml';
import { ScheduleError } from '../errors';
import { nestedTooDeep } from './nesting';
import { Problems } from './problems';
import type { MapEntry, MapTree, ScalarTree, Tree } from './tree';
import { wordYamlError } from './yaml-words';

/** Longest schedule file. [bytes of UTF-8] */
export const longestScheduleBytes = 200_000;

/**
 * Reads the text of a schedule into a tree.
 *
 * YAML 1.2 core, one document, no anchors, aliases, merge keys or tags, every key once.
 *
 * @throws {ScheduleError} if the text is too long, no YAML, or no map
 */
export function parseTree(text: string): { root: MapTree; problems: Problems } {
  const bytes = new TextEncoder().encode(text).length;
  if (bytes > longestScheduleBytes) {
    const message = `the file has ${bytes} bytes, at most ${longestScheduleBytes} are read.`;
    throw new ScheduleError([{ line: 1, column: 1, path: '', message, remedy: 'Split it into several schedules.' }]);
  }
  refuseDeep(text);
  const lines = new LineCounter();
  const document = parseDocument(text, {
    version: '1.2',
    schema: 'core',
    merge: false,
    uniqueKeys: false,
    prettyErrors: false,
    lineCounter: lines,
    logLevel: 'error',
  });
  const problems = new Problems(lines);
  addSyntaxErrors(document, text, problems);
  problems.throwIfAny();
  const root = new TreeBuilder(problems).build(document.contents, '', 0);
  if (root.kind !== 'map') problems.add({ offset: 0, path: '' }, 'is no schedule.', 'Begin with schedule: and an id.');
  problems.throwIfAny();
  return { root: root as MapTree, problems };
}

/** The package composes by calling itself: what nests too deep would exhaust the stack, in the worst case the process. */
function refuseDeep(text: string): void {
  const found = nestedTooDeep(text);
  if (!found) return;
  const lines = new LineCounter();
  lines.addNewLine(0);
  for (let at = text.indexOf('\n'); at >= 0; at = text.indexOf('\n', at + 1)) lines.addNewLine(at + 1);
  const problems = new Problems(lines);
  problems.add({ offset: found.offset, path: '' }, found.message, found.remedy);
  problems.throwIfAny();
}

function addSyntaxErrors(document: Document, text: string, problems: Problems): void {
  for (const error of document.errors) {
    const { message, remedy } = wordYamlError(error, text);
    problems.add({ offset: error.pos[0], path: '' }, message, remedy);
  }
}

class TreeBuilder {
  constructor(private readonly problems: Problems) {}

  build(node: unknown, path: string, offset: number): Tree {
    if (isAlias(node)) {
      this.problems.add(
        { offset: node.range?.[0] ?? offset, path },
        'points to another part of the file (*).',
        'Write it out.',
      );
      return emptyScalar(path, offset);
    }
    if (isMap(node)) {
      this.refuseDecoration(node, path);
      return this.buildMap(node.items as Pair[], path, node.range?.[0] ?? offset);
    }
    if (isSeq(node)) {
      this.refuseDecoration(node, path);
      const at = node.range?.[0] ?? offset;
      return {
        kind: 'list',
        path,
        offset: at,
        items: node.items.map((item, i) => this.build(item, `${path}.${i + 1}`, at)),
      };
    }
    if (isScalar(node)) {
      this.refuseDecoration(node, path);
      return scalarTree(node.value, node.source, node.type, path, node.range?.[0] ?? offset);
    }
    return emptyScalar(path, offset);
  }

  private refuseDecoration(node: Node & { anchor?: string; tag?: string }, path: string): void {
    const at = { offset: node.range?.[0] ?? 0, path };
    if (node.anchor !== undefined)
      this.problems.add(at, `carries an anchor (&${node.anchor}).`, 'Leave it out; write values where they are used.');
    else if (node.tag !== undefined) this.problems.add(at, `carries a tag (${node.tag}).`, 'Leave it out.');
  }

  private buildMap(pairs: Pair[], path: string, offset: number): MapTree {
    const entries: MapEntry[] = [];
    const seen = new Map<string, number>();
    for (const pair of pairs) {
      const key = this.keyOf(pair, path, offset);
      if (key === undefined) continue;
      const entryPath = path === '' ? key.text : `${path}.${key.text}`;
      const first = seen.get(key.text);
      if (first !== undefined) {
        this.problems.add(
          { offset: key.offset, path: entryPath },
          `stands twice (first in line ${this.problems.lineOf(first)}).`,
          'Keep one.',
        );
        continue;
      }
      seen.set(key.text, key.offset);
      entries.push({
        key: key.text,
        offset: key.offset,
        path: entryPath,
        value: this.build(pair.value, entryPath, key.offset),
      });
    }
    return { kind: 'map', path, offset, entries };
  }

  private keyOf(pair: Pair, path: string, offset: number): { text: string; offset: number } | undefined {
    const { key } = pair;
    if (!isScalar(key)) {
      const at = (key as Node | null)?.range?.[0] ?? offset;
      this.problems.add(
        { offset: at, path: path === '' ? '' : path },
        'has a key that is no single word.',
        'Use a name or a number before the colon.',
      );
      return undefined;
    }
    this.refuseDecoration(key, path);
    const tree = scalarTree(key.value, key.source, key.type, path, key.range?.[0] ?? offset);
    return { text: tree.text, offset: tree.offset };
  }
}

function scalarTree(
  value: unknown,
  source: string | undefined,
  type: string | undefined,
  path: string,
  offset: number,
): ScalarTree {
  const isPlain = type === 'PLAIN' || type === undefined;
  const text = isPlain ? (source ?? '') : String(value);
  const kept = typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean' ? value : null;
  return {
    kind: 'scalar',
    path,
    offset,
    text: kept === null && isPlain && source === undefined ? '' : text,
    value: kept,
    textOffset: isPlain ? offset : offset + 1,
  };
}

function emptyScalar(path: string, offset: number): ScalarTree {
  return { kind: 'scalar', path, offset, text: '', value: null, textOffset: offset };
}
