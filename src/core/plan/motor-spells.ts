import type { FieldControl } from '../machine';
import type { PlacedMotor } from './placed-motor';
import type { Spans } from './types';

/** Hours a motor spends in one span at one load, and where it is answered interval by interval near one reactive power. */
export interface Spell {
  span: number;
  shaftKw: number;
  hours: number;
  /** Mean of the hours; 0 where the motor's own control answers. [kvar] */
  deliveredKvar: number;
  /** A limiter keeps the motor from what it holds. */
  limited: boolean;
}

/** Levels a motor's loads are gathered to where it runs at more. */
const LEVELS = 256;

/** Width of what counts as one reactive power. [share of rated kVA] */
const KVAR_SHARE = 0.01;

/**
 * Gathers a motor's year: loads to the middles of 256 levels, the highest kept, where there are more; reactive power that is
 * answered interval by interval to bands of a hundredth of rated kVA, each with its mean.
 */
export function motorSpells(input: {
  placed: PlacedMotor;
  controls: FieldControl[];
  spans?: Spans;
  deliveredKvar: Float64Array;
  limited: Uint8Array;
  hours: number;
}): Spell[] {
  const { placed, controls, spans, deliveredKvar, limited, hours } = input;
  const { loads, index, ratedKva } = placed;
  const levelOf = levelsOf(loads);
  const held = controls.map(({ holds }) => holds === 'voltage' || holds === 'plant-power-factor');
  const spells = new Map<string, Spell>();
  for (let i = 0; i < index.length; i++) {
    if (index[i] === 0) continue;
    const span = spans?.index[i] ?? 0;
    const shaftKw = levelOf[index[i]! - 1]!;
    const isHeld = held[held.length === 1 ? 0 : span]!;
    const band = isHeld ? Math.round(deliveredKvar[i]! / (KVAR_SHARE * ratedKva)) : 0;
    const isLimited = isHeld && limited[i] === 1;
    const key = `${span} ${shaftKw} ${band} ${isLimited}`;
    const spell = spells.get(key) ?? { span, shaftKw, hours: 0, deliveredKvar: 0, limited: isLimited };
    const share = hours / (spell.hours + hours);
    if (isHeld) spell.deliveredKvar += share * (deliveredKvar[i]! - spell.deliveredKvar);
    spell.hours += hours;
    spells.set(key, spell);
  }
  return [...spells.values()].sort(
    (a, b) => a.span - b.span || a.shaftKw - b.shaftKw || a.deliveredKvar - b.deliveredKvar,
  );
}

/** Level of each distinct load. [kW] */
function levelsOf(loads: Float64Array): Float64Array {
  const highest = loads[loads.length - 1] ?? 0;
  if (loads.length <= LEVELS) return loads;
  return loads.map((kw) =>
    kw === highest ? kw : ((Math.min(LEVELS - 1, Math.floor((kw / highest) * LEVELS)) + 0.5) * highest) / LEVELS,
  );
}
