import type { EspiEntry } from './espi-feed';
import type { ColumnUse, IntervalRole, Measure } from './column-map';
import { unitMeaning, type UnitMeaning } from './units';

/** What the figures of a meter reading are. */
export interface EspiMeaning {
  role: IntervalRole;
  unit: string;
  /** To kWh, kvarh or kVAh. */
  factor: number;
  measure: Measure;
  why: string;
  sure: boolean;
}

// Codes of units and flows: NAESB REQ.21, as listed in the schema of ESPI (usage.xsd).
const unitsByCode = new Map([
  ['72', 'Wh'],
  ['73', 'varh'],
  ['71', 'VAh'],
  ['38', 'W'],
  ['63', 'var'],
  ['61', 'VA'],
]);
const powerFactorCode = '65';
const foreignUnits = new Map([
  ['169', 'therms of gas'],
  ['42', 'cubic metres'],
  ['119', 'cubic feet'],
  ['6', 'a temperature'],
]);
/** None named, electricity metered at the secondary, at the primary side. */
const electricCommodities = new Set(['', '0', '1', '2']);
const extremes = new Map([
  ['8', 'the maximum'],
  ['9', 'the minimum'],
]);
const instantaneous = '12';

const reactiveSenses = new Map<string, IntervalRole>([
  ['2', 'reactive-lagging'],
  ['3', 'reactive-leading'],
  ['15', 'reactive-lagging'],
  ['18', 'reactive-leading'],
  ['16', 'ignore'],
  ['17', 'ignore'],
  ['5', 'reactive-lagging'],
  ['13', 'reactive-leading'],
  ['1', 'reactive-lagging'],
  ['19', 'reactive-leading'],
]);

/** Unit of a code with the power of ten of its figures: `72`, 3 -> kWh per unit of the figure; null for any other. */
export function scaledUnit(code: string, powerText: string | undefined): (UnitMeaning & { scale: number }) | null {
  const unit = unitMeaning(unitsByCode.get(code) ?? '');
  const power = Number(powerText ?? 0);
  const isSane = Number.isInteger(power) && Math.abs(power) <= 12;
  return unit && isSane ? { ...unit, scale: 10 ** power } : null;
}

/** Settles what a meter reading holds: its type says, a column map overrules. */
export function meaningOfType(
  type: EspiEntry | undefined,
  { given, service }: { given: ColumnUse | undefined; service: string | undefined },
): EspiMeaning {
  const own = ownMeaning(type, service);
  if (!given || (given.role === own.role && (given.unit ?? '') === own.unit && given.factor === undefined)) {
    return { ...own, measure: given?.measure ?? own.measure };
  }
  const why = 'Given by the column map';
  const unit = unitMeaning(given.unit ?? own.unit);
  // Another unit than the type's replaces its power of ten too: the figures are then in the unit named.
  const scaledFactor = (given.unit ?? own.unit) === own.unit ? own.factor : (unit?.factor ?? 1);
  return {
    role: given.role as IntervalRole,
    unit: unit?.unit ?? own.unit,
    factor: scaledFactor * (given.factor ?? 1),
    measure: given.measure ?? unit?.measure ?? own.measure,
    why,
    sure: true,
  };
}

const left = (why: string, sure = true): EspiMeaning => ({
  role: 'ignore',
  unit: '',
  factor: 1,
  measure: 'energy',
  why,
  sure,
});

function ownMeaning(type: EspiEntry | undefined, service: string | undefined): EspiMeaning {
  if (service !== undefined) return left(`The usage point serves ${service}, not electricity`);
  if (!type) return left('No reading type tells the unit', false);
  const field = (name: string): string => type.fields.get(name) ?? '';
  const [code, powerText, commodity] = [field('uom'), field('powerOfTenMultiplier'), field('commodity')];
  const extreme = extremes.get(field('dataQualifier'));
  if (!electricCommodities.has(commodity)) return left(`Commodity ${commodity} is no electricity`);
  if (foreignUnits.has(code)) return left(`Unit code ${code}, ${foreignUnits.get(code)}, is none of energy or power`);
  if (code === powerFactorCode) {
    const scale = 10 ** Number(powerText);
    const why = `Unit code ${code}, a power factor`;
    if (scale <= 1e12 && scale >= 1e-12)
      return { role: 'power-factor', unit: '', factor: scale, measure: 'energy', why, sure: true };
  }
  if (!unitsByCode.has(code)) return left(`Unit code ${code || 'absent'} is none of energy or power`);
  const unit = scaledUnit(code, powerText || undefined);
  if (!unit) return left(`The power of ten ${powerText} of its figures is out of reach`);
  if (extreme)
    return left(`Data qualifier ${field('dataQualifier')}: ${extreme} within the interval, not what it holds`);
  const flow = field('flowDirection');
  const isInstant = unit.measure === 'power' && field('accumulationBehaviour') === instantaneous;
  return {
    role: roleOf(unit.quantity, flow),
    unit: unit.unit,
    factor: unit.factor * unit.scale,
    measure: unit.measure,
    why: `Unit code ${code}${isInstant ? ', read at an instant' : ''}, flow direction ${flow || 'absent'}`,
    sure: flow !== '' && !isInstant,
  };
}

function roleOf(quantity: string, flow: string): IntervalRole {
  if (quantity === 'apparent') return flow === '19' ? 'ignore' : 'apparent';
  if (quantity === 'active') return flow === '19' ? 'export' : 'active';
  return reactiveSenses.get(flow) ?? 'reactive-signed';
}
