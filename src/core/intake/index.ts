import { planBills } from './bill-plan';
import { readPlannedBills } from './bills';
import { intakeError } from './errors';
import { containerOf } from './format';
import { planIntervals, readPlanned } from './intervals';
import { openTable, type OpenedTable } from './open';
import { previewOfBills, previewOfIntervals } from './preview';
import { shapeOf } from './shape';
import type { BillPreview, BillReading, IntervalPreview, IntervalReading, ReadOptions } from './types';

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
  const opened = open(bytes, options);
  const { load, report } = readPlanned(planIntervals(opened, options), options);
  return { load, report };
}

/**
 * Reads a table of bills: a row a bill, or a column a bill.
 *
 * @param bytes  The whole file
 * @param options  Name, zone (its custom settles an open order of day and month), and a column map to follow
 * @throws {IntakeError} what is wrong, where, and what to do
 */
export async function readBills(bytes: Uint8Array, options: ReadOptions): Promise<BillReading> {
  const opened = open(bytes, options);
  const { bills, report } = readPlannedBills(planBills(opened, options), options);
  return { bills, report };
}

/**
 * What the steps Read and Match show of an interval file: first rows, the column map proposed or applied, the evidence for
 * it, and the problems that stand in the way.
 *
 * @throws {IntakeError} only if the file cannot be opened at all
 */
export async function previewIntervals(bytes: Uint8Array, options: ReadOptions): Promise<IntervalPreview> {
  return previewOfIntervals(open(bytes, options), options);
}

/**
 * What the steps Read and Match show of a table of bills.
 *
 * @throws {IntakeError} only if the file cannot be opened at all
 */
export async function previewBills(bytes: Uint8Array, options: ReadOptions): Promise<BillPreview> {
  return previewOfBills(open(bytes, options), options);
}

/**
 * Signature of the shape of a file: equal for exports of one kind, so that a column map can be remembered and offered.
 *
 * @throws {IntakeError} if the file cannot be opened
 */
export function shapeSignature(bytes: Uint8Array, fileName: string): string {
  const opened = open(bytes, { fileName, timeZone: 'UTC' });
  return shapeOf(opened.grid, opened.vote?.delimiter);
}

function open(bytes: Uint8Array, options: ReadOptions): OpenedTable {
  const container = containerOf(bytes, options.fileName);
  if (container === 'xml' || container === 'nem12' || container === 'zip') {
    const names = { xml: 'ESPI XML', nem12: 'NEM12', zip: 'a ZIP archive' };
    throw intakeError(
      `The file is ${names[container]}, which is not read yet.`,
      options.fileName,
      'Bring in the readings as delimited text or a spreadsheet.',
    );
  }
  return openTable(bytes, container, options.fileName, options.columnMap ?? {});
}
