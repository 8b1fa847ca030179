import { readCell } from './bill-cells';
import { billMeaning } from './bill-words';
import { shareOf, type ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';
import type { Grid } from './grid';
import { unitMeaning, unitOfHeader } from './units';

/** Meaning of a column of figures by its name and by what stands beside the figures in its cells. */
export function meaningOf(
  grid: Grid,
  profile: ColumnProfile,
  rows: readonly number[],
  decimalMark: '.' | ',',
): RoleFinding {
  const isFigures = shareOf(profile, 'number') > (unitOfHeader(profile.name) ? 0.2 : 0.7);
  if (!isFigures)
    return {
      role: 'ignore',
      tests: [[true, profile.kinds.blank === profile.sampled ? 'Blank throughout' : 'Words, no figures']],
    };
  const figures = rows
    .map((row) => readCell(grid, row, profile.index, decimalMark))
    .filter(({ value }) => !Number.isNaN(value));
  const share = (isSo: (figure: (typeof figures)[number]) => boolean): number =>
    figures.filter(isSo).length / Math.max(1, figures.length);
  const unit = unitOfHeader(profile.name) ? undefined : figures.find((figure) => figure.unit)?.unit;
  const isInUnit = unit !== undefined && share((figure) => figure.unit !== undefined) > 0.5;
  if (share((figure) => figure.per !== undefined) > 0.5)
    return { role: 'rate', tests: [[true, 'Its cells are prices of a unit']] };
  const isMoney = !isInUnit && share((figure) => figure.currency !== undefined) > 0.3;
  const isBracketed =
    !unitOfHeader(profile.name) && rows.some((row) => /^\(.*\)$/.test(grid.figureText(row, profile.index)));
  const name = isInUnit ? `${profile.name} (${unit})` : profile.name;
  const meaning = billMeaning(name, isMoney || (isBracketed && !isInUnit));
  const tests: RoleFinding['tests'] = isInUnit
    ? [[true, `Its cells are in ${unitMeaning(unit)?.unit ?? unit}`]]
    : meaning.tests;
  return { role: meaning.role, quantity: meaning.quantity, unit: meaning.unit, tests };
}

/** A quantity has one column: a second one of the same meaning is left out, to be looked at. */
export function settleDoubles(profiles: readonly ColumnProfile[], findings: Map<number, RoleFinding>): void {
  const seen = new Map<string, ColumnProfile>();
  for (const profile of profiles) {
    const finding = findings.get(profile.index);
    if (!finding?.quantity) continue;
    const first = seen.get(finding.quantity);
    if (first)
      findings.set(profile.index, {
        role: 'ignore',
        tests: [[false, `Means the same as “${first.name}”, which is taken`]],
      });
    else seen.set(finding.quantity, profile);
  }
}
