import { SaxesParser, type SaxesTagNS } from 'saxes';
import { intakeError } from './errors';

const espiNamespace = 'http://naesb.org/espi';
const deepest = 40;
const mostReadings = 1_200_000;

/** One reading of an interval block; NaN where the file leaves a number out. */
export interface EspiReading {
  startS: number;
  durationS: number;
  value: number;
  /** Codes of quality that the reading carries; a reading may have several. */
  qualities: readonly number[];
}

/** An entry of the feed that intervals need; related to others by its links only. */
export interface EspiEntry {
  kind: 'UsagePoint' | 'MeterReading' | 'ReadingType' | 'IntervalBlock' | 'other';
  title: string;
  self: string;
  up: string;
  related: string[];
  /** Simple children of the object by local name. */
  fields: Map<string, string>;
  readings: EspiReading[];
}

const kinds = new Set(['UsagePoint', 'MeterReading', 'ReadingType', 'IntervalBlock']);
const noCodes: readonly number[] = [];

function numberOf(text: string): number {
  const figure = text.trim() === '' ? Number.NaN : Number(text);
  return Number.isFinite(figure) ? figure : Number.NaN;
}

/** Collects entries while the parser walks the feed; names are matched by namespace and local name, never by prefix. */
class FeedCollector {
  readonly entries: EspiEntry[] = [];
  private readonly path: string[] = [];
  private entry: EspiEntry | null = null;
  private reading: EspiReading | null = null;
  private text = '';
  private count = 0;

  constructor(private readonly fileName: string) {}

  open(tag: SaxesTagNS): void {
    this.path.push(tag.local);
    this.text = '';
    if (this.path.length > deepest)
      throw intakeError('The XML is nested too deep.', this.fileName, 'Ask the sender for a plain ESPI feed.');
    if (tag.local === 'entry') {
      this.entry = { kind: 'other', title: '', self: '', up: '', related: [], fields: new Map(), readings: [] };
    }
    const { entry } = this;
    if (!entry) return;
    if (tag.local === 'link') this.link(entry, tag.attributes.rel?.value ?? '', tag.attributes.href?.value ?? '');
    if (tag.uri !== espiNamespace) return;
    if (kinds.has(tag.local) && entry.kind === 'other') entry.kind = tag.local as EspiEntry['kind'];
    if (tag.local === 'IntervalReading') {
      this.reading = { startS: Number.NaN, durationS: Number.NaN, value: Number.NaN, qualities: noCodes };
      this.count += 1;
      if (this.count > mostReadings)
        throw intakeError(
          `The feed holds more than ${mostReadings} readings.`,
          this.fileName,
          'Ask for a feed of one meter and one year.',
        );
    }
  }

  private link(entry: EspiEntry, rel: string, href: string): void {
    const path = href.replace(/\/+$/, '');
    if (rel === 'self') entry.self = path;
    else if (rel === 'up') entry.up = path;
    else if (rel === 'related') entry.related.push(path);
  }

  addText(text: string): void {
    this.text += text;
  }

  close(tag: SaxesTagNS): void {
    this.path.pop();
    const { entry, reading } = this;
    if (entry && tag.local === 'title' && entry.kind === 'other') entry.title = this.text.trim();
    if (entry && tag.uri === espiNamespace) {
      if (reading) this.closeInReading(entry, reading, tag.local);
      else if (this.text.trim() !== '') {
        const parent = this.path.at(-1) ?? '';
        entry.fields.set(kinds.has(parent) ? tag.local : `${parent}.${tag.local}`, this.text.trim());
      }
    }
    if (tag.local === 'entry' && entry) {
      this.entries.push(entry);
      this.entry = null;
    }
    this.text = '';
  }

  private closeInReading(entry: EspiEntry, reading: EspiReading, name: string): void {
    const figure = numberOf(this.text);
    if (name === 'value') reading.value = figure;
    else if (name === 'start') reading.startS = figure;
    else if (name === 'duration') reading.durationS = figure;
    else if (name === 'quality') reading.qualities = [...reading.qualities, figure];
    else if (name === 'IntervalReading') {
      entry.readings.push(reading);
      this.reading = null;
    }
  }
}

/**
 * Entries of an ESPI feed (NAESB REQ.21, an Atom feed). A document type is refused, so that no entity is ever expanded.
 * @throws {IntakeError} if the XML is no feed, is broken or holds a document type.
 */
export function parseEspi(text: string, fileName: string): EspiEntry[] {
  const collector = new FeedCollector(fileName);
  const parser = new SaxesParser({ xmlns: true, position: true });
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
  parser.write(text).close();
  if (!collector.entries.some((entry) => entry.kind !== 'other')) {
    throw intakeError(
      'The XML is no ESPI feed of readings.',
      fileName,
      'Bring in the interval data as ESPI XML, delimited text or a spreadsheet.',
    );
  }
  return collector.entries;
}
