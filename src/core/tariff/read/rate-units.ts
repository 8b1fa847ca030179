import { clashOf, wordDimension } from './dimensions';
import type { RawExpression } from './expressions';
import { expressionsIn, type RawPlace } from './places';
import { isMeterUnit } from './units';
import type { TextContext } from './text-reader';
import { energyRemedy } from './unit-check';

/** Unit of the quantity a line is charged per. */
function unitOfPer(per: RawExpression, { scope }: TextContext): string {
  const name = per.formula.kind === 'name' ? per.formula.name : '';
  return scope.made.get(scope.families.get(name)?.members[0] ?? name)?.unit ?? '';
}

/** Refuses a rate that says the unit it is for, EUR/kVA, where the line is per another. */
export function checkRateUnit(place: RawPlace, per: RawExpression, context: TextContext): boolean {
  const { problems, reader, currency } = context;
  const unit = unitOfPer(per, context);
  return expressionsIn(place).every((raw) => {
    const [, above, below] = /^([^/]+)\/([^/]+)$/.exec(reader.unitOf(reader.bind(raw, undefined))) ?? [];
    if (above === undefined || below === undefined) return true;
    if (/^[A-Z]{3}$/.test(above) && above !== currency) {
      problems.add(
        raw.tree,
        `the rate is in ${above}, the schedule in ${currency}.`,
        `Give it in ${currency}/${below}.`,
      );
      return false;
    }
    if (!isMeterUnit(below) || !isMeterUnit(unit) || below === unit) return true;
    problems.add(
      raw.tree,
      `the rate is per ${below}, the line per ${unit}.`,
      'Charge the quantity the rate is for, or correct the unit of one.',
    );
    return false;
  });
}

/** Refuses an upper end of another kind than the quantity: kW for kWh. */
export function checkTierEnd(to: RawExpression, per: RawExpression, { problems, reader }: TextContext): boolean {
  const [end, quantity] = [to.found, per.found];
  if (!end || !quantity || 'literal' in end || 'literal' in quantity || !clashOf(end, quantity)) return true;
  const unit = reader.unitOf(reader.bind(to, undefined));
  problems.add(
    to.tree,
    `the upper end is ${wordDimension(end, unit)}, the quantity ${wordDimension(quantity, '')}.`,
    end.power === 1 && quantity.energy === 1 ? 'Multiply it by hours of use: 250 * billedKw.' : energyRemedy,
  );
  return false;
}
