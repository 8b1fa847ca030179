import { containerOf } from './format';
import { planIntervals, readPlanned } from './intervals';
import { openTable } from './open';
import { intakeError } from './errors';
import type { IntervalReading, ReadOptions } from './types';

export { IntakeError } from './errors';
export type * from './types';

/**
 * Reads interval data of one meter into a regular load.
 *
 * Offsets written in the file overrule `timeZone`; without them stamps are the wall clock of the zone, clock changes
 * resolved from the file itself. Blank is missing, never nought.
 *
 * @param bytes  The whole file
 * @param options  Name, IANA zone of local stamps, and a column map to follow
 * @throws {IntakeError} what is wrong, where, and what to do
 */
export async function readIntervals(bytes: Uint8Array, options: ReadOptions): Promise<IntervalReading> {
  const container = containerOf(bytes, options.fileName);
  if (container === 'xml' || container === 'nem12' || container === 'zip') {
    throw intakeError('not read', options.fileName, '');
  }
  const opened = openTable(bytes, container, options.fileName, options.columnMap ?? {});
  const { load, report } = readPlanned(planIntervals(opened, options), options);
  return { load, report };
}
