import type { PricedBill } from '../../core/tariff';
import { toMinorUnits } from '../../core/units';
import type { TriedCause } from '../../schemas/pricing';
import { quantitiesOf, type CauseTarget, type Supposition } from './suppositions';
import { otherMultipliers, otherRoundings, otherWindows, printedQuantities } from './suppositions-of-measuring';
import { otherBases, otherPeriods, otherRatchets, otherSeasons, otherVersions } from './suppositions-of-rates';
import type { TrialPricing } from './trial-pricing';

/** What is supposed, the most telling first: where several fit, the first names the finding. */
const kinds = [
  otherRatchets,
  otherSeasons,
  otherVersions,
  otherWindows,
  otherRoundings,
  otherBases,
  otherPeriods,
  otherMultipliers,
  printedQuantities,
];

function amountMinor(bill: PricedBill | undefined, { lineId }: CauseTarget): number | null {
  if (!bill) return null;
  const amount = lineId === null ? bill.total : bill.lines.find((line) => line.id === lineId)?.amount;
  return amount === undefined ? null : toMinorUnits(amount, bill.currency);
}

/** A cause, unless it cannot be priced or changes nothing. */
function tried(trial: TrialPricing, target: CauseTarget, { kind, label, bill }: Supposition): TriedCause[] {
  const minor = amountMinor(bill(), target);
  if (minor === null || minor === amountMinor(trial.priced[target.index], target)) return [];
  const missMinor = target.billedMinor - minor;
  return [{ kind, label, missMinor, fits: Math.abs(missMinor) <= trial.basis.toleranceMinor }];
}

/** Of several that miss by the same in the same way the first; of what fits everything, so that nobody is sure too soon. */
function eachOnce(causes: TriedCause[]): TriedCause[] {
  const known = new Set<string>();
  return causes.filter(({ kind, missMinor, fits }) => {
    const key = `${kind} ${missMinor}`;
    return fits || (!known.has(key) && known.add(key));
  });
}

/** Suppositions in every bill of the year: they come to something else only where a look-back carries them on. */
function carriedOn(trial: TrialPricing, target: CauseTarget, supposed: Supposition[]): TriedCause[] {
  if (!quantitiesOf(trial, target).some(({ definition }) => definition.kind === 'past')) return [];
  return supposed.flatMap(({ kind, label, throughout }) =>
    throughout ? tried(trial, target, { kind, label: `${label}, in every bill`, bill: throughout }) : [],
  );
}

/**
 * Tries the likely causes of a difference by pricing with each.
 *
 * @returns what fits first, the most telling kind before a mere quantity; what does not, by how near it comes
 */
export function causesOf(trial: TrialPricing, target: CauseTarget): TriedCause[] {
  const supposed = kinds.flatMap((suppose) => suppose(trial, target));
  let causes = supposed.flatMap((one) => tried(trial, target, one));
  if (!causes.some(({ fits }) => fits)) causes = [...causes, ...carriedOn(trial, target, supposed)];
  const fitting = causes.filter((cause) => cause.fits);
  const others = causes.filter((cause) => !cause.fits).sort((a, b) => Math.abs(a.missMinor) - Math.abs(b.missMinor));
  return eachOnce([...fitting, ...others]);
}
