import { openSource } from './source';
import type { Trace } from './trace-types';
import type { BillPreview, BillReading, IntervalPreview, IntervalReading, ReadOptions } from './types';

export { IntakeError } from './errors';
export type * from './bill-types';
export type * from './column-map';
export type * from './trace-types';
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
  return (await openSource(bytes, options)).readIntervals();
}

/**
 * Reads a table of bills: a row a bill, or a column a bill.
 *
 * @param bytes  The whole file
 * @param options  Name, zone (its custom settles an open order of day and month), and a column map to follow
 * @throws {IntakeError} what is wrong, where, and what to do
 */
export async function readBills(bytes: Uint8Array, options: ReadOptions): Promise<BillReading> {
  return (await openSource(bytes, options)).readBills();
}

/**
 * What the steps Read and Match show of an interval file: first rows, the column map proposed or applied, the evidence for
 * it, and the problems that stand in the way.
 *
 * @throws {IntakeError} only if the file cannot be opened at all
 */
export async function previewIntervals(bytes: Uint8Array, options: ReadOptions): Promise<IntervalPreview> {
  return (await openSource(bytes, options)).previewIntervals();
}

/**
 * What the steps Read and Match show of a table of bills.
 *
 * @throws {IntakeError} only if the file cannot be opened at all
 */
export async function previewBills(bytes: Uint8Array, options: ReadOptions): Promise<BillPreview> {
  return (await openSource(bytes, options)).previewBills();
}

/**
 * Where in the file the interval stands that begins at an instant: sheet, rows and the cells that were read.
 *
 * @param options  As the file was read to be kept: the same map and zone
 * @param ms  Beginning of the interval. [ms since epoch]
 * @throws {IntakeError} if the file holds no such interval
 */
export async function traceInterval(bytes: Uint8Array, options: ReadOptions, ms: number): Promise<Trace> {
  return (await openSource(bytes, options)).traceInterval(ms);
}

/** The same for the bill whose period begins on a local day. */
export async function traceBill(bytes: Uint8Array, options: ReadOptions, from: string): Promise<Trace> {
  return (await openSource(bytes, options)).traceBill(from);
}

/**
 * Signature of the shape of a file: equal for exports of one kind, so that a column map can be remembered and offered.
 *
 * @throws {IntakeError} if the file cannot be opened
 */
export async function shapeSignature(bytes: Uint8Array, fileName: string): Promise<string> {
  return (await openSource(bytes, { fileName, timeZone: 'UTC' })).shape();
}
