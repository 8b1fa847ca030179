import type { BusSupply, Upstream } from '../../core/plan';
import { supplyInput, type SupplyInput, type SupplyView } from '../../schemas/supply';
import { freshen } from '../db/fresh';
import { inTx } from '../db/tx';
import { staleVersion } from '../errors';
import { Supply } from '../models/Supply';
import type { OpenEngagement } from './engagements';

/** Nothing is known of the supply. */
const unknown: SupplyInput = supplyInput.parse({});

/** What is known of the supply of an engagement's plant, and what it does not allow to be said. */
export async function supplyOf({ engagement }: OpenEngagement): Promise<SupplyView> {
  const row = await Supply.findOne({ where: { engagementId: engagement.id } });
  const entries = row?.entries ?? unknown;
  // The first save writes version 0: "nothing yet" must be another number.
  return { ...entries, version: row ? row.version + 1 : 0, missing: missingOf(entries) };
}

/**
 * Writes down the supply.
 *
 * @throws {ServiceError} 409 with both versions where somebody saved in between
 */
export async function changeSupply(
  opened: OpenEngagement,
  { version, supply }: { version: number; supply: SupplyInput },
): Promise<SupplyView> {
  const engagementId = opened.engagement.id;
  await inTx(async () => {
    const row = await Supply.findOne({ where: { engagementId } });
    if (row) await freshen(row);
    if ((row ? row.version + 1 : 0) !== version) throw staleVersion('The supply', supply, await supplyOf(opened));
    if (row) await row.update({ entries: supply });
    else await Supply.create({ engagementId, entries: supply });
  });
  return supplyOf(opened);
}

/** The supply as the calculations take it; what is not known is left out. */
export function supplyForTask(entries: SupplyInput): { supply?: BusSupply; upstream?: Upstream } {
  const supply = busSupply(entries);
  const upstream = entries.meterUpstream === true ? upstreamOf(entries) : null;
  return { ...(supply ? { supply } : {}), ...(upstream ? { upstream } : {}) };
}

function busSupply(entries: SupplyInput): BusSupply | null {
  const { shortCircuitKva, xOverR, noLoadPercent, allowedLowPercent, allowedHighPercent } = entries;
  if (shortCircuitKva === null) return null;
  return {
    shortCircuitKva,
    ...(xOverR === null ? {} : { xOverR }),
    ...(noLoadPercent === null ? {} : { noLoadPu: noLoadPercent / 100 }),
    ...(allowedLowPercent === null || allowedHighPercent === null
      ? {}
      : { allowedPu: { low: allowedLowPercent / 100, high: allowedHighPercent / 100 } }),
  };
}

/** Base of a cable without a transformer: any will do, the ohms decide. [kVA] */
const cableBaseKva = 1000;

/**
 * Transformer and cable in series.
 *
 *     r = load loss / kVA,   x = sqrt(z^2 - r^2),   ohms on kV^2 1000 / kVA
 *
 * Derivation: the load loss is r of rated current at rated kVA; per unit of an ohm is its share of the base impedance.
 */
function upstreamOf(entries: SupplyInput): Upstream | null {
  const { transformerKva, impedancePercent, loadLossKw, busVoltageV, cableResistanceOhm, cableReactanceOhm } = entries;
  const hasTransformer = transformerKva !== null && impedancePercent !== null && loadLossKw !== null;
  const hasCable = busVoltageV !== null && cableResistanceOhm !== null && cableReactanceOhm !== null;
  if (!hasTransformer && !hasCable) return null;
  const ratedKva = transformerKva ?? cableBaseKva;
  const r = hasTransformer ? loadLossKw / transformerKva : 0;
  const z = hasTransformer ? impedancePercent / 100 : 0;
  const baseOhm = hasCable ? ((busVoltageV / 1000) ** 2 * 1000) / ratedKva : 1;
  return {
    ratedKva,
    resistancePu: r + (hasCable ? cableResistanceOhm / baseOhm : 0),
    reactancePu: Math.sqrt(Math.max(0, z * z - r * r)) + (hasCable ? cableReactanceOhm / baseOhm : 0),
  };
}

/** What is not computed, and for want of which entry. */
function missingOf(entries: SupplyInput): string[] {
  const said: string[] = [];
  if (entries.shortCircuitKva === null)
    said.push(
      'Resonance of capacitors and bus voltage are not computed: the short-circuit power at the bus is not known.',
    );
  else if (entries.allowedLowPercent === null)
    said.push('Hours outside the allowed voltage are not told: no band is written.');
  if (entries.meterUpstream === null)
    said.push('Losses of transformer and cable are in no saving: on which side of them the meter stands is not known.');
  else if (entries.meterUpstream && !upstreamOf(entries))
    said.push(
      'The meter counts the losses of transformer or cable, but they are in no saving: kVA, impedance and load loss are not all known.',
    );
  return said;
}
