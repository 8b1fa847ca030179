import { collectBad } from './bad-values';
import {
  columnOf,
  factorOf,
  readMarks,
  rowChannelReader,
  type ColumnPlan,
  type Extraction,
  type RowChannel,
} from './extract';
import { footerWords } from './cells';
import { StampScanner } from './stamps';
import type { Strand } from './strand';
import type { ColumnUse } from './column-map';
import { scaled, unitMeaning } from './units';

interface DayRow {
  row: number;
  day: number;
  channel: RowChannel;
}

/** Reads every row of a wide table, a day a row: its cells become readings in the order of time. */
export function extractWide(plan: ColumnPlan): Extraction {
  const { columns } = plan;
  const extraction: Extraction = { strands: [], rowsRead: 0, badValues: [], badStamps: [], notes: [] };
  const cells = columns.filter((use) => use.role === 'day-value');
  const days = readDays(plan, cells, extraction);
  const groups = new Map<RowChannel, DayRow[]>();
  for (const day of days) {
    const group = groups.get(day.channel);
    if (group) group.push(day);
    else groups.set(day.channel, [day]);
  }
  extraction.strands = [...groups].map(([channel, rows]) => strandOf(plan, cells, channel, rows, extraction));
  return extraction;
}

function readDays(plan: ColumnPlan, cells: readonly ColumnUse[], extraction: Extraction): DayRow[] {
  const { grid, block, columns } = plan;
  const scanner = new StampScanner();
  const dateColumn = columnOf(columns, 'date') >= 0 ? columnOf(columns, 'date') : columnOf(columns, 'stamp');
  const meterColumn = columnOf(columns, 'meter');
  const isNamed = columnOf(columns, 'channel') >= 0 || columnOf(columns, 'unit') >= 0;
  const channelOf = rowChannelReader(plan, extraction);
  const unit = unitMeaning(cells[0]?.unit ?? '') ?? unitMeaning('kWh');
  const whole: RowChannel = {
    role: unit?.quantity === 'reactive' ? 'reactive-lagging' : 'active',
    measure: cells[0]?.measure ?? unit?.measure ?? 'energy',
    factor: unit?.factor ?? 1,
    name: '',
  };
  const days: DayRow[] = [];
  for (let row = block.firstRow; row <= block.lastRow; row += 1) {
    if (
      grid.width(row) === 0 ||
      (plan.meter !== undefined && meterColumn >= 0 && grid.text(row, meterColumn) !== plan.meter)
    )
      continue;
    const isDated = grid.scan(row, dateColumn, scanner) && scanner.resolve(plan.stamp.order ?? 'YMD');
    if (!isDated) {
      const text = grid.text(row, dateColumn);
      if (text === '' || footerWords.test(text))
        extraction.notes.push({
          code: 'rows-left-out',
          message: 'A row without a date is no reading.',
          where: `row ${grid.rowNumber(row)}`,
        });
      else extraction.badStamps.push({ place: `row ${grid.rowNumber(row)}`, text });
      continue;
    }
    const day = scanner.day;
    const channel = isNamed ? channelOf(row) : whole;
    if (!channel) continue;
    days.push({ row, day, channel });
  }
  extraction.rowsRead = days.length;
  return days;
}

function strandOf(
  plan: ColumnPlan,
  cells: readonly ColumnUse[],
  channel: RowChannel,
  days: DayRow[],
  extraction: Extraction,
): Strand {
  const { grid, decimalMark } = plan;
  const isTurned = (days[0]?.day ?? 0) > (days.at(-1)?.day ?? 0);
  const ordered = isTurned ? [...days].reverse() : days;
  const count = ordered.length * cells.length;
  const walls = new Float64Array(count);
  const values = new Float64Array(count);
  const rows = new Uint32Array(count);
  const numbered =
    cells.some((use) => (use.minuteOfDay ?? 0) >= 1440) || !cells.some((use) => /[:h.]\d\d/.test(use.name));
  const dayOf = numbered ? new Float64Array(count) : null;
  const own = cells.some((use) => use.factor !== undefined);
  let at = 0;
  for (const { row, day } of ordered) {
    for (const use of cells) {
      const figure = grid.number(row, use.index, decimalMark);
      if (Number.isNaN(figure)) collectBad(grid, row, use.index, extraction);
      // A blank is no reading: extra columns for the long day of autumn are blank on all other days.
      const isSpare = Number.isNaN(figure) && (use.minuteOfDay ?? 0) >= 1440;
      walls[at] = isSpare ? Number.NaN : day * 1440 + (use.minuteOfDay ?? 0);
      if (dayOf) dayOf[at] = day;
      values[at] = scaled(figure, channel.factor) * (own ? factorOf({ ...use, unit: undefined }) : 1);
      rows[at] = row;
      at += 1;
    }
  }
  const marks = readMarks(grid, rows, plan.columns, extraction);
  return {
    walls,
    offsets: null,
    spans: null,
    days: dayOf,
    rows,
    channels: [{ role: channel.role, measure: channel.measure, name: channel.name, values }],
    quality: marks,
    isTurned,
  };
}
