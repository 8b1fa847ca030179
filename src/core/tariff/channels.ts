import { place, type Evaluate } from './formula/compile';

/** Channels of a cell. Net is lagging less leading; kva is hypot(kw, kvarNet); a power is the cell's energy over its hours. */
export type ChannelName =
  | 'kwh'
  | 'kvarhLagging'
  | 'kvarhLeading'
  | 'kvarhNet'
  | 'kvah'
  | 'kw'
  | 'kvarLagging'
  | 'kvarLeading'
  | 'kvarNet'
  | 'kva';

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

function channel(unit: string, registers: string, evaluate: Evaluate): Channel {
  return {
    unit,
    isPower: !unit.endsWith('h'),
    isActive: registers.includes('P'),
    usesLagging: registers.includes('+'),
    usesLeading: registers.includes('-'),
    evaluate,
  };
}

/** The channels by name. */
export const channels: ReadonlyMap<string, Channel> = new Map<ChannelName, Channel>([
  ['kwh', channel('kWh', 'P', (v) => v[cellKwh]!)],
  ['kvarhLagging', channel('kvarh', '+', (v) => v[cellKvarhLagging]!)],
  ['kvarhLeading', channel('kvarh', '-', (v) => v[cellKvarhLeading]!)],
  ['kvarhNet', channel('kvarh', '+-', net)],
  ['kvah', channel('kVAh', 'P+-', kvah)],
  ['kw', channel('kW', 'P', (v) => v[cellKwh]! / v[cellHours]!)],
  ['kvarLagging', channel('kvar', '+', (v) => v[cellKvarhLagging]! / v[cellHours]!)],
  ['kvarLeading', channel('kvar', '-', (v) => v[cellKvarhLeading]! / v[cellHours]!)],
  ['kvarNet', channel('kvar', '+-', (v) => net(v) / v[cellHours]!)],
  ['kva', channel('kVA', 'P+-', (v) => kvah(v) / v[cellHours]!)],
]);

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
