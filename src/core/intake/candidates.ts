import type { TableBlock } from './block';
import type { ColumnProfile } from './cells';
import type { ChannelMeaning } from './channel-words';
import type { RoleFinding, Test } from './evidence';
import type { Grid } from './grid';

/** What is known of a long table before its columns of figures are looked at. */
export interface ValueInput {
  grid: Grid;
  block: TableBlock;
  profiles: readonly ColumnProfile[];
  rows: readonly number[];
  decimalMark: '.' | ',';
  findings: Map<number, RoleFinding>;
}

/** A column of figures that may be a channel. */
export interface Candidate {
  profile: ColumnProfile;
  meaning: ChannelMeaning;
  figures: Float64Array;
}

function usualUnit(role: string, measure: ChannelMeaning['measure']): string {
  const isPower = measure === 'power';
  if (role.startsWith('reactive')) return isPower ? 'kvar' : 'kvarh';
  if (role === 'apparent') return isPower ? 'kVA' : 'kVAh';
  return isPower ? 'kW' : 'kWh';
}

/** Settles what a column is taken for. */
export function set(input: ValueInput, candidate: Candidate, role: RoleFinding['role'], tests: Test[]): void {
  const { unit, measure } = candidate.meaning;
  const isUsed = role !== 'ignore' && role !== 'power-factor';
  const own = unit ? { unit: unit.unit, measure } : { unit: usualUnit(role, measure), measure, isUnitAssumed: true };
  input.findings.set(candidate.profile.index, { role, tests, ...(isUsed ? own : {}) });
}
