import { z } from 'zod';

/** An empty entry is not known; nothing is computed with it. */
const known = (least: number, most: number, words: string) =>
  z.number({ error: words }).min(least, words).max(most, words).nullable().default(null);

/** How the plant's bus is supplied, as its form sends it. */
export const supplyInput = z
  .object({
    shortCircuitKva: known(100, 1e7, 'The short-circuit power lies between 100 and 10,000,000 kVA.'),
    xOverR: known(0.1, 100, 'X over R lies between 0.1 and 100.'),
    noLoadPercent: known(80, 120, 'The bus voltage lies between 80 and 120 % of rated.'),
    allowedLowPercent: known(80, 100, 'The least allowed voltage lies between 80 and 100 % of rated.'),
    allowedHighPercent: known(100, 120, 'The greatest allowed voltage lies between 100 and 120 % of rated.'),
    transformerKva: known(10, 1e6, 'The transformer lies between 10 and 1,000,000 kVA.'),
    impedancePercent: known(0.5, 30, 'The impedance lies between 0.5 and 30 %.'),
    loadLossKw: known(0.01, 10_000, 'The load loss lies between 0.01 and 10,000 kW.'),
    busVoltageV: known(100, 150_000, 'The bus voltage lies between 100 and 150,000 V.'),
    cableResistanceOhm: known(0, 100, 'The resistance of the cable lies between 0 and 100 ohm.'),
    cableReactanceOhm: known(0, 100, 'The reactance of the cable lies between 0 and 100 ohm.'),
    /** Whether the utility's meter counts the losses of transformer and cable; null: not known. */
    meterUpstream: z.boolean().nullable().default(null),
  })
  .superRefine((supply, context) => {
    const fault = (path: string, message: string) => context.addIssue({ code: 'custom', path: [path], message });
    if (supply.transformerKva === null && (supply.impedancePercent !== null || supply.loadLossKw !== null))
      fault('transformerKva', 'Write the rated kVA too: impedance and loss are told on it.');
    if (supply.transformerKva !== null && supply.loadLossKw !== null && supply.impedancePercent !== null) {
      const resistancePercent = (100 * supply.loadLossKw) / supply.transformerKva;
      if (resistancePercent > supply.impedancePercent)
        fault('loadLossKw', 'This loss makes a resistance above the whole impedance. Check loss, kVA and impedance.');
    }
    const hasCable = supply.cableResistanceOhm !== null || supply.cableReactanceOhm !== null;
    if (hasCable && supply.busVoltageV === null)
      fault('busVoltageV', 'Write the voltage of the bus: what an ohm loses depends on it.');
    if ((supply.allowedLowPercent === null) !== (supply.allowedHighPercent === null))
      fault(
        supply.allowedLowPercent === null ? 'allowedLowPercent' : 'allowedHighPercent',
        'Write both ends of the band.',
      );
  });
export type SupplyInput = z.output<typeof supplyInput>;

/** A change carries the version that was seen; 0 where nothing was entered before. */
export const supplyChangeInput = z.object({ version: z.number().int(), supply: supplyInput });

/** The supply as pages read it, with what it does not allow to be said. */
export interface SupplyView extends SupplyInput {
  version: number;
  /** What is not computed for want of an entry, a sentence each. */
  missing: string[];
}
