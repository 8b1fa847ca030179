import type { BillPlan } from './bill-plan';
import { readPlannedBills } from './bills';
import { intakeError } from './errors';
import type { EspiEntry, EspiFeed } from './espi-feed';
import type { ColumnPlan } from './extract';
import { columnLetter, type Grid } from './grid';
import { placePlanned, type IntervalPlan } from './intervals';
import type { NemFile } from './nem12';
import type { PlacedStrand } from './series';
import type { Trace, TraceRow } from './trace-types';
import type { ReadOptions } from './types';

const mostRows = 60;
const charactersShown = 120;

/** A reading that has part in an interval: its row and its place in its strand. */
interface Part {
  row: number;
  at: number;
}

/** Readings behind the interval that begins at an instant; of a register the one before or after it as well. */
function partsAt(placed: readonly PlacedStrand[], ms: number): Part[] {
  const minute = ms / 60_000;
  const longest = Math.max(...placed.map(({ timeline }) => timeline.stepMinutes));
  const parts: Part[] = [];
  for (const { strand, timeline } of placed) {
    const { stepMinutes, utc, style } = timeline;
    const isRegister = strand.channels.some((channel) => channel.measure === 'register');
    const isEnd = style.marks === 'end' || style.marks === 'own-day-end';
    const before = isRegister && isEnd ? stepMinutes : 0;
    const after = isRegister && !isEnd ? stepMinutes : 0;
    for (let at = 0; at < utc.length; at += 1) {
      const begin = utc[at] ?? Number.NaN;
      const holds = begin <= minute && minute < begin + stepMinutes;
      if (holds || (begin >= minute - before && begin < minute + longest + after))
        parts.push({ row: strand.rows[at] ?? 0, at });
    }
  }
  return parts;
}

function traceOf(fileName: string, unit: Trace['unit'], rows: TraceRow[], sheet?: string): Trace {
  if (rows.length === 0)
    throw intakeError(
      'No row of the file holds this interval.',
      fileName,
      'It is missing in the file, or the file does not reach so far.',
    );
  const unique = rows.filter((row, at) => rows.findIndex((other) => sameRow(row, other)) === at);
  return { fileName, unit, rows: unique.slice(0, mostRows), more: Math.max(0, unique.length - mostRows), sheet };
}

const sameRow = (one: TraceRow, other: TraceRow): boolean =>
  one.number === other.number && JSON.stringify(one.cells) === JSON.stringify(other.cells);

/** The rows of a table that give an interval, with the cells that were read. */
export function traceTable(planned: IntervalPlan, options: ReadOptions, ms: number): Trace {
  const { placed } = placePlanned(planned, options);
  const { plan, opened } = planned;
  const dayCells = plan.columns.filter((use) => use.role === 'day-value');
  const rows = partsAt(placed, ms).map(({ row, at }) =>
    tableRow(plan, row, dayCells.length === 0 ? null : (dayCells[at % dayCells.length]?.index ?? null)),
  );
  return traceOf(options.fileName, 'row', rows, opened.dialect.sheet);
}

/** The cells of a row that have a meaning; of a wide row the one reading alone. */
function tableRow({ grid, columns }: Pick<ColumnPlan, 'grid' | 'columns'>, row: number, only: number | null): TraceRow {
  const used = columns.filter((use) => use.role !== 'ignore' && (use.role !== 'day-value' || use.index === only));
  const cells = used.map((use) => ({
    name: use.name || `Column ${columnLetter(use.index)}`,
    text: grid.text(row, use.index).slice(0, charactersShown),
  }));
  return { number: grid.rowNumber(row), cells };
}

/** The row (or column) of a table of bills in which a bill begins. */
export function traceTableBill(plan: BillPlan, options: ReadOptions, from: string): Trace {
  const { bills, report } = readPlannedBills(plan, options);
  const number = report.billRows?.[bills.findIndex((bill) => bill.period.from === from)];
  const row = number === undefined ? -1 : rowOfNumber(plan.grid, number);
  const rows = row < 0 ? [] : [tableRow(plan, row, null)];
  return traceOf(options.fileName, plan.isTransposed ? 'column' : 'row', rows, plan.opened.dialect.sheet);
}

function rowOfNumber(grid: Grid, number: number): number {
  for (let row = 0; row < grid.rows; row += 1) if (grid.rowNumber(row) === number) return row;
  return -1;
}

/** The readings of a feed that give an interval, by their lines. */
export function traceFeed(feed: EspiFeed, placed: readonly PlacedStrand[], options: ReadOptions, ms: number): Trace {
  const { starts, durations, values, qualities, lines } = feed.readings;
  const rows = partsAt(placed, ms).map(({ row }): TraceRow => {
    const start = starts[row] ?? Number.NaN;
    return {
      number: lines[row] ?? 0,
      cells: [
        { name: 'start', text: Number.isNaN(start) ? 'follows the one before' : String(start) },
        { name: 'duration', text: String(durations[row] ?? '') },
        { name: 'value', text: String(values[row] ?? '') },
        { name: 'quality', text: codesOf(qualities[row] ?? 0) },
      ].filter((cell) => cell.text !== '' && cell.text !== 'NaN'),
    };
  });
  return traceOf(options.fileName, 'line', rows);
}

const codesOf = (bits: number): string =>
  Array.from({ length: 31 }, (_, code) => code)
    .filter((code) => (bits & (1 << code)) !== 0)
    .join(', ');

/** The summary of a feed that gives a bill. */
export function traceSummary(entry: EspiEntry | undefined, options: ReadOptions): Trace {
  const cells = (entry?.tree?.children ?? []).map((node) => ({
    name: node.name,
    text: (node.text || node.children.map((part) => `${part.name} ${part.text}`).join(', ')).slice(0, charactersShown),
  }));
  return traceOf(options.fileName, 'line', entry ? [{ number: entry.line, cells }] : []);
}

/** The 300 records that give an interval, with its value alone. */
export function traceNem(file: NemFile, placed: readonly PlacedStrand[], options: ReadOptions, ms: number): Trace {
  const { grid } = file;
  const rows = placed.flatMap((one) => {
    const perDay = 1440 / one.timeline.stepMinutes;
    return partsAt([one], ms).map(({ row, at }): TraceRow => {
      const place = at % perDay;
      const cells = [
        { name: 'Record', text: grid.text(row, 0) },
        { name: 'Stream', text: one.strand.channels[0]?.name ?? '' },
        { name: 'Date', text: grid.text(row, 1) },
        { name: `Value ${place + 1} of ${perDay}`, text: grid.text(row, place + 2) },
        { name: 'Quality', text: grid.text(row, perDay + 2) },
      ];
      return { number: grid.rowNumber(row), cells };
    });
  });
  return traceOf(options.fileName, 'row', rows);
}
