import { quality as grades } from '../load';
import type { TableBlock } from './block';
import { collectBad } from './bad-values';
import { channelMeaning } from './channel-words';
import type { Grid } from './grid';
import { qualityOf } from './quality';
import { columnGroups } from './column-groups';
import { apartBySteps } from './coarser';
import { isConstant, onlyGrows } from './registers';
import { readFactors, readSenses } from './read-factors';
import { readStamps } from './read-stamps';
import { pickReadings, runsBackwards, turnStrand, type Strand, type StrandChannel } from './strand';
import type { ColumnUse, IntervalRole, StampStyle } from './column-map';
import type { IntakeNote } from './types';
import { scaled, unitMeaning, type UnitMeaning } from './units';
import { namesRegister } from './words';

/** The columns of a table by what they are for. */
export interface ColumnPlan {
  grid: Grid;
  block: TableBlock;
  columns: ColumnUse[];
  decimalMark: '.' | ',';
  stamp: StampStyle;
  /** What the file itself hints at, before the map. */
  hints: StampStyle;
  layout: 'long' | 'wide';
  meter?: string | undefined;
}

/** Readings as stamped, and what could not be read. */
export interface Extraction {
  strands: Strand[];
  rowsRead: number;
  /** Cells of value columns that are neither figure nor blank. */
  badValues: { place: string; text: string }[];
  /** Rows whose stamp cannot be read. */
  badStamps: { place: string; text: string }[];
  notes: IntakeNote[];
}

export const valueRoles: ReadonlySet<string> = new Set([
  'active',
  'export',
  'reactive-lagging',
  'reactive-leading',
  'reactive-signed',
  'apparent',
  'power-factor',
]);

/** First column of a role, or -1. */
export function columnOf(columns: readonly ColumnUse[], role: ColumnUse['role']): number {
  return columns.find((use) => use.role === role)?.index ?? -1;
}

/** Reads every row of a long table; tables side by side, each with stamps of its own, are read one after the other. */
export function extractLong(plan: ColumnPlan): Extraction {
  const groups = columnGroups(plan);
  const parts = groups.map((columns) => extractGroup({ ...plan, columns }));
  const [only] = parts;
  if (parts.length === 1 && only) return only;
  const rows = new Set(parts.flatMap((part) => part.strands.flatMap((strand) => [...strand.rows])));
  return {
    strands: parts.flatMap((part) => part.strands),
    rowsRead: rows.size,
    badValues: parts.flatMap((part) => part.badValues),
    badStamps: parts.flatMap((part) => part.badStamps),
    notes: parts.flatMap((part) => part.notes),
  };
}

function extractGroup(plan: ColumnPlan): Extraction {
  const { grid, columns } = plan;
  const stamps = readStamps(plan);
  const { rows } = stamps;
  const extraction: Extraction = {
    strands: [],
    rowsRead: rows.length,
    badValues: [],
    badStamps: stamps.badStamps,
    notes: stamps.notes,
  };
  const explained = columns.find((use) => use.role === 'value');
  const whole: Strand = {
    walls: stamps.walls,
    offsets: stamps.offsets,
    spans: stamps.spans,
    days: stamps.days,
    rows,
    channels: readChannels(plan, rows, extraction),
    quality: readMarks(grid, rows, columns, extraction),
    isTurned: false,
  };
  const strands = explained ? splitChannels(plan, whole, explained, extraction) : apartBySteps(whole);
  // Rows of other quantities are no data.
  if (explained) extraction.rowsRead = strands.reduce((sum, strand) => sum + strand.rows.length, 0);
  extraction.strands = strands.map((strand) => (runsBackwards(strand.walls) ? turnStrand(strand) : strand));
  return extraction;
}

function readChannels(plan: ColumnPlan, rows: Uint32Array, extraction: Extraction): StrandChannel[] {
  const { columns } = plan;
  const values = columns.filter((use) => valueRoles.has(use.role) && use.role !== 'power-factor');
  const figures = readColumns(plan, rows, values, extraction);
  const channels = values.map((use, at): StrandChannel => ({
    role: use.role as IntervalRole,
    measure: use.measure ?? unitMeaning(use.unit ?? '')?.measure ?? 'energy',
    name: use.name,
    values: figures[at] ?? new Float64Array(),
    scale: factorOf(use),
  }));
  for (const use of columns) {
    if (use.role === 'power-factor') channels.push(...readFactors(plan, rows, use, extraction));
    else if (use.role === 'sense') channels.push(...readSenses(plan, rows, use, extraction));
  }
  return channels;
}

/** What a figure of the column is multiplied by to give kWh, kvarh or kVAh. */
export function factorOf(use: ColumnUse, unit: UnitMeaning | null = unitMeaning(use.unit ?? '')): number {
  return (unit?.factor ?? 1) * (use.factor ?? 1);
}

/** Figures of columns over rows, a row at a time; words that are no blank are collected. */
function readColumns(
  plan: ColumnPlan,
  rows: Uint32Array,
  uses: readonly ColumnUse[],
  extraction: Extraction,
): Float64Array[] {
  const { grid, decimalMark } = plan;
  const inOrder = uses
    .map((use) => ({ index: use.index, factor: factorOf(use), figures: new Float64Array(rows.length) }))
    .sort((a, b) => a.index - b.index);
  for (let at = 0; at < rows.length; at += 1) {
    const row = rows[at] ?? 0;
    for (const { index, factor, figures } of inOrder) {
      const figure = grid.number(row, index, decimalMark);
      figures[at] = factor === 1 ? figure : scaled(figure, factor);
      if (Number.isNaN(figure)) collectBad(grid, row, index, extraction);
    }
  }
  return uses.map(
    (use) => inOrder.find((column) => column.index === use.index)?.figures ?? new Float64Array(rows.length),
  );
}

/** Quality of every row, the worst where several columns mark it; marks nobody knows count as measured, with a note. */
export function readMarks(
  grid: Grid,
  rows: Uint32Array,
  columns: readonly ColumnUse[],
  extraction: Extraction,
): Uint8Array | null {
  const uses = columns.filter((use) => use.role === 'quality');
  const read = uses.map((use) => readMarkColumn(grid, rows, use.index, extraction));
  const [first, ...others] = read;
  for (const other of others) first?.forEach((mark, at) => (first[at] = Math.max(mark, other[at] ?? 0)));
  return first ?? null;
}

function readMarkColumn(grid: Grid, rows: Uint32Array, column: number, extraction: Extraction): Uint8Array {
  const known = new Map<string, number>();
  const strange = new Set<string>();
  const marks = new Uint8Array(rows.length);
  for (let at = 0; at < rows.length; at += 1) {
    const text = grid.text(rows[at] ?? 0, column);
    let grade = known.get(text);
    if (grade === undefined) {
      const found = qualityOf(text);
      if (found === null) strange.add(text);
      grade = found ?? grades.measured;
      known.set(text, grade);
    }
    marks[at] = grade;
  }
  if (strange.size > 0) {
    extraction.notes.push({
      code: 'quality-unknown',
      message: `Marks of quality that are not known are read as measured: ${[...strange].slice(0, 8).join(', ')}.`,
    });
  }
  return marks;
}

/** Quantity, unit and factor of a row that names them. */
export interface RowChannel {
  role: IntervalRole;
  measure: StrandChannel['measure'];
  factor: number;
  name: string;
}

/** A reader of the channel a row belongs to, by its channel and unit columns; null for rows of other quantities. */
export function rowChannelReader(plan: ColumnPlan, extraction: Extraction): (row: number) => RowChannel | null {
  const { grid, columns } = plan;
  const channelColumn = columnOf(columns, 'channel');
  const unitColumn = columnOf(columns, 'unit');
  const known = new Map<string, RowChannel | null>();
  return (row) => {
    const name = channelColumn < 0 ? '' : grid.text(row, channelColumn);
    const unitText = unitColumn < 0 ? '' : grid.text(row, unitColumn);
    const key = `${name}\n${unitText}`;
    let found = known.get(key);
    if (found === undefined) {
      const unit = unitMeaning(unitText);
      const meaning = channelMeaning(name === '' ? unitText : name, unit);
      const role = meaning.role === 'reactive-signed' && !/signed|net/i.test(name) ? 'reactive-lagging' : meaning.role;
      found =
        valueRoles.has(role) && !(unitText !== '' && !unit)
          ? { role, measure: meaning.measure, factor: (unit ?? meaning.unit)?.factor ?? 1, name: name || unitText }
          : null;
      if (!found)
        extraction.notes.push({
          code: 'channel-left-out',
          message: `Rows of “${[name, unitText].filter((text) => text !== '').join(', ')}” hold no energy or power and are left out.`,
        });
      known.set(key, found);
    }
    return found;
  };
}

/** A strand for each quantity that the rows of a stacked table name. */
function splitChannels(plan: ColumnPlan, whole: Strand, value: ColumnUse, extraction: Extraction): Strand[] {
  const channelOf = rowChannelReader(plan, extraction);
  const groups = new Map<RowChannel, number[]>();
  whole.rows.forEach((row, at) => {
    const channel = channelOf(row);
    if (!channel) return;
    const group = groups.get(channel);
    if (group) group.push(at);
    else groups.set(channel, [at]);
  });
  const strands = [...groups].map(([channel, positions]): Strand => {
    const rows = Uint32Array.from(positions, (at) => whole.rows[at] ?? 0);
    const [figures = new Float64Array()] = readColumns(plan, rows, [{ ...value, unit: undefined }], extraction);
    const values = figures.map((figure) => scaled(figure, channel.factor));
    const scale = channel.factor * (value.factor ?? 1);
    return pickReadings(whole, positions, [
      { role: channel.role, measure: channel.measure, name: channel.name, values, scale },
    ]);
  });
  markRegisters(strands);
  return strands;
}

/** Channels of a stacked table whose figures only ever grow are registers, and so are such as stand still beside them. */
function markRegisters(strands: readonly Strand[]): void {
  const channels = strands.flatMap((strand) =>
    strand.channels.filter((channel) => channel.measure === 'energy' && channel.role !== 'power-factor'),
  );
  const isGrowing = (channel: StrandChannel): boolean =>
    onlyGrows(channel.values, namesRegister(channel.name)) ||
    onlyGrows(channel.values.slice().reverse(), namesRegister(channel.name));
  for (const channel of channels) if (isGrowing(channel)) channel.measure = 'register';
  if (!channels.some((channel) => channel.measure === 'register')) return;
  for (const channel of channels) if (isConstant(channel.values)) channel.measure = 'register';
}
