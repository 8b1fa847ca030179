import type { EnergyDifference, ReconciledBill } from '../../schemas/pricing';
import { energiesDiffer } from '../../core/load';
import { toMinorUnits } from '../../core/units';
import type { ScheduleText } from '../../core/tariff';

const isEnergy = (name: string, unit: string | undefined) => (unit ? unit === 'kWh' : /^kwh/i.test(name));

/**
 * Where a bill prints another energy than the intervals of its period add up to: of the quantities that differ the greatest,
 * so that the whole stands before its parts. Null where they agree, or the bill prints none that the schedule works out.
 */
export function energyDifference(bill: ReconciledBill, text: ScheduleText): EnergyDifference | null {
  const units = new Map(text.quantities.map(({ name, unit }) => [name, unit]));
  const compared = Object.entries(bill.bill.quantities).flatMap(([name, printedKwh]) => {
    const metered = bill.priced.quantities[name];
    if (!metered || !isEnergy(name, units.get(name))) return [];
    return [{ printedKwh, meteredKwh: metered.value }];
  });
  const differing = compared.filter(({ printedKwh, meteredKwh }) => energiesDiffer(printedKwh, meteredKwh));
  const [widest] = differing.sort((a, b) => b.meteredKwh - a.meteredKwh);
  if (!widest) return null;
  const rate = meanEnergyRate(bill);
  const worth = rate === null ? null : (widest.printedKwh - widest.meteredKwh) * rate;
  return { ...widest, worthMinor: worth === null ? null : toMinorUnits(worth, bill.bill.currency) };
}

/** What a kWh of the bill costs in its energy lines at the schedule's rates. */
function meanEnergyRate({ priced }: ReconciledBill): number | null {
  const lines = priced.lines.filter(({ group, unit }) => group === 'energy' && unit === 'kWh');
  const kwh = lines.reduce((sum, line) => sum + (line.quantity ?? 0), 0);
  return kwh > 0 ? lines.reduce((sum, line) => sum + line.amount, 0) / kwh : null;
}
