import { collectBad } from './bad-values';
import type { ColumnPlan, Extraction } from './extract';
import { isBlankWord, parseNumberText } from './numbers';
import { sensedFactor, senseOf } from './power-factor';
import type { StrandChannel } from './strand';
import type { ColumnUse } from './column-map';

const channelOf = (role: 'power-factor' | 'sense', name: string, values: Float64Array): StrandChannel => ({
  role,
  measure: 'energy',
  name,
  values,
});

/** Power factors of rows as printed; where senses stand behind the figures they are a channel of their own. */
export function readFactors(
  plan: ColumnPlan,
  rows: Uint32Array,
  use: ColumnUse,
  extraction: Extraction,
): StrandChannel[] {
  const { grid, decimalMark } = plan;
  const values = new Float64Array(rows.length);
  const senses = new Float64Array(rows.length).fill(Number.NaN);
  let sensed = 0;
  for (let at = 0; at < rows.length; at += 1) {
    const row = rows[at] ?? 0;
    values[at] = grid.number(row, use.index, decimalMark);
    if (!Number.isNaN(values[at])) continue;
    const found = sensedFactor(grid.text(row, use.index));
    if (found) {
      values[at] = parseNumberText(found.figure, decimalMark);
      senses[at] = found.sense;
      sensed += 1;
    } else collectBad(grid, row, use.index, extraction);
  }
  const factors = channelOf('power-factor', use.name, values);
  return sensed > 0 ? [factors, channelOf('sense', use.name, senses)] : [factors];
}

/** Senses that a column of words names. */
export function readSenses(
  plan: ColumnPlan,
  rows: Uint32Array,
  use: ColumnUse,
  extraction: Extraction,
): StrandChannel[] {
  const values = Float64Array.from(rows, (row) => {
    const text = plan.grid.text(row, use.index);
    const sense = isBlankWord(text) ? null : senseOf(text);
    if (sense === null) collectBad(plan.grid, row, use.index, extraction);
    return sense ?? Number.NaN;
  });
  return [channelOf('sense', use.name, values)];
}
