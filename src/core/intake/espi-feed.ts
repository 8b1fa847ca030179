import { SaxesParser, type SaxesTagNS } from 'saxes';
import { intakeError } from './errors';
import { EspiReadings, qualityBit } from './espi-readings';
import { decodePieces } from './text';

const espiNamespace = 'http://naesb.org/espi';
const deepest = 40;
const mostReadings = 1_200_000;
const mostEntries = 250_000;
const longestField = 20_000;
/** What a reading takes in a terse feed; room for as many is made at once. */
const usualReadingBytes = 160;

const kindNames = [
  'UsagePoint',
  'MeterReading',
  'ReadingType',
  'IntervalBlock',
  'LocalTimeParameters',
  'UsageSummary',
  'ElectricPowerUsageSummary',
] as const;
type EspiKind = (typeof kindNames)[number];

/** An element below an object of the feed, for objects whose parts repeat. */
export interface EspiNode {
  name: string;
  text: string;
  children: EspiNode[];
}

/** An entry of the feed that intake needs; related to others by its links only. */
export interface EspiEntry {
  kind: EspiKind;
  title: string;
  self: string;
  up: string;
  related: string[];
  /** Simple children of the object by local name, those of a part as `part.name`. */
  fields: Map<string, string>;
  /** Its readings in the feed's columns, half-open. */
  from: number;
  to: number;
  /** The whole object; kept for summaries alone. */
  tree: EspiNode | null;
  /** Line of the file it begins on. */
  line: number;
}

/** A feed taken apart. */
export interface EspiFeed {
  entries: EspiEntry[];
  readings: EspiReadings;
}

type OpenEntry = Omit<EspiEntry, 'kind'> & { kind: EspiKind | null };

/** The kind by its name. The parser's own string is not kept: it would keep the piece of the feed it was cut from. */
const kindOf = (name: string): EspiKind | null => kindNames.find((kind) => kind === name) ?? null;
const isSummary = (kind: EspiKind | null): boolean => kind === 'UsageSummary' || kind === 'ElectricPowerUsageSummary';

// The least number of 48 bits stands for "no value" (seen in a conformance file).
const noValue = -(2 ** 47);

function numberOf(text: string): number {
  const figure = text.trim() === '' ? Number.NaN : Number(text);
  return Number.isFinite(figure) && figure !== noValue ? figure : Number.NaN;
}

/** A string of its own: one cut from a piece of the feed would keep the whole piece in memory. */
const detached = (text: string): string => ` ${text}`.slice(1);

const blankReading = () => ({ start: Number.NaN, duration: Number.NaN, value: Number.NaN, qualities: 0, line: 0 });

/** Collects a feed while the parser walks it; names are matched by namespace and local name, never by prefix. */
class FeedCollector {
  readonly feed: EspiFeed;
  private readonly path: string[] = [];
  private readonly nodes: EspiNode[] = [];
  private entry: OpenEntry | null = null;
  private reading: ReturnType<typeof blankReading> | null = null;
  private text = '';

  constructor(
    private readonly fileName: string,
    bytes: number,
    private readonly lineOf: () => number,
  ) {
    this.feed = { entries: [], readings: new EspiReadings(Math.min(mostReadings, bytes / usualReadingBytes)) };
  }

  open(tag: SaxesTagNS): void {
    this.path.push(tag.local);
    this.text = '';
    if (this.path.length > deepest)
      throw intakeError('The XML is nested too deep.', this.fileName, 'Ask the sender for a plain ESPI feed.');
    if (tag.local === 'entry') this.entry = this.newEntry();
    const { entry } = this;
    if (!entry) return;
    if (tag.local === 'link') link(entry, tag.attributes.rel?.value ?? '', tag.attributes.href?.value ?? '');
    if (tag.uri !== espiNamespace) return;
    entry.kind ??= kindOf(tag.local);
    if (tag.local === 'IntervalReading') this.reading = blankReading();
    if (isSummary(entry.kind)) this.openNode(entry, tag.local);
  }

  private newEntry(): OpenEntry {
    const at = this.feed.readings.length;
    const names = { kind: null, title: '', self: '', up: '', related: [], fields: new Map<string, string>() };
    return { ...names, from: at, to: at, tree: null, line: this.lineOf() };
  }

  private openNode(entry: OpenEntry, name: string): void {
    const node: EspiNode = { name: detached(name), text: '', children: [] };
    this.nodes.at(-1)?.children.push(node);
    entry.tree ??= node;
    this.nodes.push(node);
  }

  addText(text: string): void {
    if (this.text.length < longestField) this.text += text;
  }

  close(tag: SaxesTagNS): void {
    this.path.pop();
    const { entry } = this;
    if (entry && tag.local === 'title' && entry.kind === null) entry.title = detached(this.text.trim());
    if (entry && tag.uri === espiNamespace) this.closeField(entry, tag.local);
    if (tag.local === 'entry' && entry) this.closeEntry(entry);
    this.text = '';
  }

  private closeField(entry: OpenEntry, name: string): void {
    const node = isSummary(entry.kind) ? this.nodes.pop() : undefined;
    if (this.reading) this.closeInReading(this.reading, name);
    else if (this.text.trim() !== '') {
      const parent = this.path.at(-1) ?? '';
      if (node) node.text = detached(this.text.trim());
      else entry.fields.set(kindOf(parent) ? detached(name) : `${parent}.${name}`, detached(this.text.trim()));
    }
  }

  private closeEntry({ kind, ...entry }: OpenEntry): void {
    this.entry = null;
    this.reading = null;
    this.nodes.length = 0;
    if (kind === null) return;
    this.feed.entries.push({ ...entry, kind, to: this.feed.readings.length });
    if (this.feed.entries.length > mostEntries) throw tooMany(`${mostEntries} entries`, this.fileName);
  }

  private closeInReading(reading: NonNullable<typeof this.reading>, name: string): void {
    if (name === 'value') reading.value = numberOf(this.text);
    else if (name === 'start') reading.start = numberOf(this.text);
    else if (name === 'duration') reading.duration = numberOf(this.text);
    else if (name === 'quality') reading.qualities |= qualityBit(numberOf(this.text));
    else if (name === 'IntervalReading') {
      this.feed.readings.push({ ...reading, line: this.lineOf() });
      this.reading = null;
      if (this.feed.readings.length > mostReadings) throw tooMany(`${mostReadings} readings`, this.fileName);
    }
  }
}

function link(entry: OpenEntry, rel: string, href: string): void {
  const path = detached(href.replace(/\/+$/, ''));
  if (rel === 'self') entry.self = path;
  else if (rel === 'up') entry.up = path;
  else if (rel === 'related') entry.related.push(path);
}

const tooMany = (what: string, fileName: string) =>
  intakeError(`The feed holds more than ${what}.`, fileName, 'Ask for a feed of one meter and one year.');

/**
 * Takes an ESPI feed (NAESB REQ.21, an Atom feed) apart, piece by piece. A document type is refused, so that no entity is
 * ever expanded.
 *
 * @param onBytes  Hears how many bytes are read
 * @throws {IntakeError} if the XML is no feed, is broken or holds a document type.
 */
export function parseEspi(bytes: Uint8Array, fileName: string, onBytes?: (read: number) => void): EspiFeed {
  const parser = new SaxesParser({ xmlns: true, position: true });
  const collector = new FeedCollector(fileName, bytes.length, () => parser.line);
  parser.on('doctype', () => {
    throw intakeError(
      'The XML holds a document type, which readings never need.',
      fileName,
      'Ask the sender for a plain ESPI feed.',
    );
  });
  parser.on('opentag', (tag) => collector.open(tag));
  parser.on('text', (piece) => collector.addText(piece));
  parser.on('cdata', (piece) => collector.addText(piece));
  parser.on('closetag', (tag) => collector.close(tag));
  parser.on('error', (cause) => {
    throw intakeError(
      `The XML is broken: ${cause.message.replace(/^\S+:\s*/, '')}`,
      `${fileName}, line ${parser.line}`,
      'Download the file again; it may have been cut off.',
    );
  });
  for (const piece of decodePieces(bytes, fileName)) {
    parser.write(piece.text);
    onBytes?.(piece.bytesRead);
  }
  parser.close();
  if (collector.feed.entries.length === 0) {
    throw intakeError(
      'The XML is no ESPI feed of readings.',
      fileName,
      'Bring in the interval data as ESPI XML, delimited text or a spreadsheet.',
    );
  }
  return collector.feed;
}
