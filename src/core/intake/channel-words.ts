import { codedChannel } from './channel-codes';
import type { IntervalRole, Measure } from './column-map';
import { isForeignUnit, unitOfHeader, type UnitMeaning } from './units';
import { mentions, namesPowerFactor } from './words';

/** What the name of a column (or of a channel in a row) says its figures are. */
export interface ChannelMeaning {
  role: IntervalRole;
  unit: UnitMeaning | null;
  measure: Measure;
  /** Why, in words that quote the name. */
  why: string;
  /** The name settles it without doubt. */
  isPlain: boolean;
}

const ignored = (why: string): ChannelMeaning => ({
  role: 'ignore',
  unit: null,
  measure: 'energy',
  why,
  isPlain: true,
});

/** Active, reactive, apparent energy or power and its direction from a name such as `kVARh Del` or `Lagging (kvarh)`. */
export function channelMeaning(name: string, unitGiven: UnitMeaning | null = null): ChannelMeaning {
  const unit = unitOfHeader(name) ?? unitGiven;
  if (namesPowerFactor(name))
    return { role: 'power-factor', unit: null, measure: 'energy', why: 'Named a power factor', isPlain: true };
  if (!unit && isForeignUnit(name)) return ignored('Its unit is none of power or energy');
  const measure = unit?.measure ?? usualMeasure(name);
  const coded = codedChannel(name);
  if (coded && fitsUnit(coded.role, unit)) return { ...coded, unit, measure, isPlain: true };
  const isReactive = unit
    ? unit.quantity === 'reactive'
    : mentions(name, 'reactive') || mentions(name, 'lagging') || mentions(name, 'leading');
  if (isReactive) return { unit, measure, ...reactiveDirection(name) };
  if (unit?.quantity === 'apparent' || (!unit && mentions(name, 'apparent'))) {
    return { role: 'apparent', unit, measure, why: 'Named apparent', isPlain: unit !== null };
  }
  if (!unit && (mentions(name, 'ignorable') || !(mentions(name, 'active') || mentions(name, 'export')))) {
    return { ...ignored('Its name speaks of no power or energy'), isPlain: false };
  }
  const isExport = mentions(name, 'export') && !mentions(name, 'lagging');
  const named = unit ? `Named in ${unit.unit}` : `Named as ${measure}, without a unit`;
  return isExport
    ? { role: 'export', unit, measure, why: `${named}, delivered to the grid`, isPlain: true }
    : isContradictory(name, unit)
      ? {
          role: 'active',
          unit,
          measure,
          why: `${named}, a unit of power, though its name speaks of energy`,
          isPlain: false,
        }
      : { role: 'active', unit, measure, why: named, isPlain: unit !== null };
}

/** A name of energy over a unit of power. */
export const isContradictory = (name: string, unit: UnitMeaning | null): boolean =>
  unit?.measure === 'power' && mentions(name, 'energy');

/** Names of power that say nothing of energy or consumption are average power; all else without a unit is energy. */
const usualMeasure = (name: string): Measure =>
  mentions(name, 'power') && !mentions(name, 'energy') ? 'power' : 'energy';

/** A code counts only where the unit, if there is one, is of its quantity. */
function fitsUnit(role: IntervalRole, unit: UnitMeaning | null): boolean {
  if (!unit || role === 'ignore') return true;
  return unit.quantity === (role.startsWith('reactive') ? 'reactive' : 'active');
}

/** Meter makers' words for the sense of reactive energy: lag and lead are plain, delivered and received depend on the viewer. */
function reactiveDirection(name: string): Pick<ChannelMeaning, 'role' | 'why' | 'isPlain'> {
  if (mentions(name, 'lagging')) return { role: 'reactive-lagging', why: 'Named lagging', isPlain: true };
  if (mentions(name, 'leading')) return { role: 'reactive-leading', why: 'Named leading', isPlain: true };
  if (mentions(name, 'export') || /\b(out|lieferung|abgabe|negative|neg)\b/i.test(name)) {
    return {
      role: 'reactive-leading',
      why: 'Named received or exported: leading as most meters count; makers differ',
      isPlain: false,
    };
  }
  if (/\b(del|delivered|import|imp|bezug|positive|pos)\b/i.test(name.replaceAll('_', ' '))) {
    return {
      role: 'reactive-lagging',
      why: 'Named delivered or imported: lagging as most meters count; makers differ',
      isPlain: false,
    };
  }
  return { role: 'reactive-signed', why: 'Named reactive without a sense', isPlain: false };
}
