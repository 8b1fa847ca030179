import { quantityOf } from './bill-words';
import type { BillCharge } from './bill-types';
import { scaled, unitMeaning } from './units';

/** Lines that share the energy of one bill by steps of its amount. */
const tierWords = /\b(first|next|over|above|block|tier|step|remaining|additional|up to|excess|balance of)\b/i;

interface Measured {
  label: string;
  figure: number;
}

/**
 * Quantities of a bill by what its lines charge: the energy, and the demands as billed. Reactive energy that is charged is
 * mostly an excess, so it is no quantity of the bill. What the lines leave open is left out.
 */
export function quantitiesOfLines(lines: readonly BillCharge[]): Record<string, number> {
  const found = new Map<string, Measured[]>();
  for (const { label, quantity, unit } of lines) {
    const meaning = unit === undefined ? null : unitMeaning(unit);
    if (quantity === undefined || !meaning || meaning.quantity === 'reactive' || meaning.quantity === 'other') continue;
    const named = quantityOf(`${label} (${unit})`)?.quantity;
    if (named === undefined) continue;
    const name = named.replace(/^max(?=K)/, 'billed');
    found.set(name, [...(found.get(name) ?? []), { label, figure: scaled(quantity, meaning.factor) }]);
  }
  const quantities: Record<string, number> = {};
  for (const [name, measured] of found) {
    const figure = wholeOf(measured, name.startsWith('kwh'));
    if (figure !== null) quantities[name] = figure;
  }
  const parts = Object.entries(quantities).filter(([name]) => /^kwh[A-Z]/.test(name) && !name.startsWith('kwhExport'));
  if (quantities.kwh === undefined && !found.has('kwh') && parts.length > 1)
    quantities.kwh = parts.reduce((sum, [, figure]) => sum + figure, 0);
  return quantities;
}

/** What several lines of one quantity come to; null where they leave it open. */
function wholeOf(measured: readonly Measured[], isEnergy: boolean): number | null {
  const figures = [...new Set(measured.map(({ figure }) => figure))];
  const [first] = figures;
  if (figures.length === 1 && first !== undefined) return first;
  if (!isEnergy) return null;
  const tiers = measured.filter(({ label }) => tierWords.test(label));
  const sum = tiers.reduce((running, { figure }) => running + figure, 0);
  const others = [...new Set(measured.filter((one) => !tiers.includes(one)).map(({ figure }) => figure))];
  if (tiers.length > 1 && others.every((figure) => Math.abs(figure - sum) < 0.5)) return sum;
  const most = Math.max(...figures);
  const rest = figures.filter((figure) => figure !== most).reduce((running, figure) => running + figure, 0);
  return figures.length > 2 && Math.abs(most - rest) < 0.5 ? most : null;
}
