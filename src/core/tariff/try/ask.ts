import { channelOf } from '../channels';
import type { QuantityDefinition, QuantityEntry } from '../model';
import type { AskedQuantity, QuickFigures, QuickName, ToldMonth, Whole } from './told';

/** Measures of a load that stands still at the mean power, and at the peak; null where that is not known. */
interface Sources {
  mean: Map<string, number> | null;
  peak: Map<string, number> | null;
}

/** What is taken for a quantity, and how it came about. */
export function askFor(quantity: QuantityEntry, told: ToldMonth, whole: Whole, sources: Sources): AskedQuantity {
  const quick = quickNameOf(quantity);
  const typed = told.typed[quantity.name];
  if (typed !== undefined) return { quantity, value: typed, basis: 'typed', quick, words: 'as typed' };
  if (quick) return askQuick(quantity, quick, told.quick, whole);
  if (quantity.definition.kind === 'given') return askGiven(quantity, whole);
  const { definition } = quantity;
  const missing = missingWords(definition, whole);
  if (missing) return { quantity, value: null, basis: 'missing', words: missing };
  const isOfMean = definition.kind === 'measure' && definition.operation !== 'highest';
  const value = (isOfMean ? sources.mean : sources.peak)?.get(quantity.name);
  if (value === undefined) {
    return { quantity, value: null, basis: 'missing', words: 'waits for what the contract supplies' };
  }
  return { quantity, value, basis: 'assumed', words: assumedWords(definition) };
}

function askQuick(quantity: QuantityEntry, quick: QuickName, told: QuickFigures, whole: Whole): AskedQuantity {
  const { energyKwh, peakKw, kvarhPerKwh } = whole;
  const kvarh = energyKwh === null || kvarhPerKwh === null ? null : energyKwh * kvarhPerKwh;
  const value = { energyKwh, peakKw, energyKvarh: told.energyKvarh ?? kvarh }[quick];
  if (value === null) {
    const words = { energyKwh: 'type the kWh', peakKw: 'type the kW', energyKvarh: 'type kvarh or the power factor' };
    return { quantity, value, basis: 'missing', quick, words: words[quick] };
  }
  const isTold = told[quick] !== undefined;
  const words = isTold ? 'as typed' : quick === 'energyKvarh' ? 'kWh and power factor' : 'from what is typed below';
  return { quantity, value, basis: isTold || quick !== 'energyKvarh' ? 'quick' : 'assumed', quick, words };
}

function askGiven(quantity: QuantityEntry, { kvarhPerKwh }: Whole): AskedQuantity {
  const { definition, unit } = quantity;
  if (definition.kind !== 'given') throw new RangeError(`kind must be given, got ${definition.kind}`);
  const unity = powerFactorAtUnity(definition, unit);
  if (unity !== null && kvarhPerKwh !== null) {
    const words = 'the average power factor';
    return { quantity, value: unity * Math.cos(Math.atan(kvarhPerKwh)), basis: 'assumed', words };
  }
  if (definition.default !== undefined) {
    return { quantity, value: definition.default, basis: 'default', words: 'what the schedule takes unless told' };
  }
  return { quantity, value: null, basis: 'missing', words: 'said by the bill alone: type it' };
}

/** What a given power factor is at unity: 1, or 100 where the bill says it in per cent; null for anything else. */
export function powerFactorAtUnity(definition: QuantityDefinition, unit: string): number | null {
  if (definition.kind !== 'given') return null;
  const { unity } = definition;
  const isFraction = unity === 1 && /^(pf|cos|fraction)$/.test(unit);
  const isPercent = unity === 100 && /^(percent|%)$/.test(unit);
  return isFraction || isPercent ? unity! : null;
}

/** Channels a measure reads, its condition included. */
function channelsOf(definition: QuantityDefinition) {
  if (definition.kind !== 'measure' && definition.kind !== 'value') return [];
  const where = definition.kind === 'measure' ? (definition.where?.channels ?? []) : [];
  return [...definition.expression.channels, ...where].map(channelOf);
}

function missingWords(definition: QuantityDefinition, { energyKwh, peakKw, kvarhPerKwh }: Whole): string | null {
  const channels = channelsOf(definition);
  if (!channels.some(({ isActive, usesLagging }) => isActive || usesLagging)) return null;
  const isOfPeak = definition.kind === 'value' || (definition.kind === 'measure' && definition.operation === 'highest');
  if (isOfPeak && peakKw === null) return 'type the kW';
  if (!isOfPeak && energyKwh === null) return 'type the kWh';
  return channels.some(({ usesLagging }) => usesLagging) && kvarhPerKwh === null
    ? 'type kvarh or the power factor'
    : null;
}

function assumedWords(definition: QuantityDefinition): string {
  const channels = channelsOf(definition);
  const isReactive = channels.some(({ usesLagging }) => usesLagging);
  if (!isReactive && channels.some(({ usesLeading }) => usesLeading)) return 'no leading kvarh';
  if (definition.kind === 'value') return 'at the peak, with the power factor of the month';
  if (definition.kind !== 'measure') return '';
  const { operation, window, channel } = definition;
  if (operation === 'lowest') return 'the mean power throughout';
  if (operation === 'highest') {
    if (isReactive) return 'the peak with the power factor of the month';
    return window ? 'the same peak in every window' : 'the same peak throughout';
  }
  if (channel && window) return 'shared by the hours of the windows';
  return 'as if the load stood still at its mean';
}

/** Which quick figure a quantity simply is; none where it is measured over a window, a condition or another cell. */
function quickNameOf({ definition }: QuantityEntry): QuickName | undefined {
  if (definition.kind !== 'measure' || definition.window || definition.where || definition.count !== 1)
    return undefined;
  const { operation, channel, each } = definition;
  if (operation === 'sum' && channel === 'kwh') return 'energyKwh';
  if (operation === 'sum' && channel === 'kvarhLagging') return 'energyKvarh';
  return operation === 'highest' && channel === 'kw' && each === 'demand window' ? 'peakKw' : undefined;
}
