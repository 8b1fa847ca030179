import { place, type Evaluate } from './formula/compile';
import { channelTable, type ChannelName } from './grammar/formulas';

export type { ChannelName } from './grammar/formulas';

interface Channel {
  unit: string;
  isPower: boolean;
  /** Which registers it is made of. */
  isActive: boolean;
  usesLagging: boolean;
  usesLeading: boolean;
  evaluate: Evaluate;
}

const { cellKwh, cellKvarhLagging, cellKvarhLeading, cellHours } = place;
const net: Evaluate = (v) => v[cellKvarhLagging]! - v[cellKvarhLeading]!;
const kvah: Evaluate = (v) => {
  const active = v[cellKwh]!;
  const reactive = v[cellKvarhLagging]! - v[cellKvarhLeading]!;
  return Math.sqrt(active * active + reactive * reactive);
};

/** Registers each channel is made of, P active, + lagging, - leading, and its value in a cell. */
const made: Record<ChannelName, readonly [registers: string, evaluate: Evaluate]> = {
  kwh: ['P', (v) => v[cellKwh]!],
  kvarhLagging: ['+', (v) => v[cellKvarhLagging]!],
  kvarhLeading: ['-', (v) => v[cellKvarhLeading]!],
  kvarhNet: ['+-', net],
  kvah: ['P+-', kvah],
  kw: ['P', (v) => v[cellKwh]! / v[cellHours]!],
  kvarLagging: ['+', (v) => v[cellKvarhLagging]! / v[cellHours]!],
  kvarLeading: ['-', (v) => v[cellKvarhLeading]! / v[cellHours]!],
  kvarNet: ['+-', (v) => net(v) / v[cellHours]!],
  kva: ['P+-', (v) => kvah(v) / v[cellHours]!],
};

/** The channels by name. */
export const channels: ReadonlyMap<string, Channel> = new Map(
  channelTable.map(({ name, unit }) => {
    const [registers, evaluate] = made[name];
    return [
      name,
      {
        unit,
        isPower: !unit.endsWith('h'),
        isActive: registers.includes('P'),
        usesLagging: registers.includes('+'),
        usesLeading: registers.includes('-'),
        evaluate,
      },
    ];
  }),
);

/** A channel that is known to exist. */
export function channelOf(name: ChannelName): Channel {
  const found = channels.get(name);
  if (!found) throw new RangeError(`channel must be one of ${[...channels.keys()].join(', ')}, got ${name}`);
  return found;
}

/** Whether a word names a channel. */
export function isChannelName(name: string): name is ChannelName {
  return channels.has(name);
}
