import { planBills } from './bill-plan';
import { readPlannedBills } from './bills';
import { intakeError } from './errors';
import { espiSource } from './espi-source';
import { containerOf } from './format';
import { planIntervals, readPlanned } from './intervals';
import { evidenceOfNem, metersOfNem, parseNem12, placeNem12, readNem12 } from './nem12';
import { openTable } from './open';
import { previewOfBills, previewOfChannels, previewOfIntervals } from './preview';
import { shapeOf, shapeOfNames } from './shape';
import { decodeText } from './text';
import { traceNem, traceTable, traceTableBill } from './trace';
import type { Trace } from './trace-types';
import type { BillPreview, BillReading, IntervalPreview, IntervalReading, ReadOptions } from './types';
import { unpackedWorkbook } from './workbook-zip';
import { zipSource } from './zip-source';

/** Characters of which the first rows are shown. */
const headCharacters = 64 * 1024;

// A table is opened as cells, then read: within a stage nothing can be counted from outside.
const tableStages = 2;

function tellStage({ onProgress }: ReadOptions, done: number): void {
  onProgress?.({ unit: 'stages', done, planned: tableStages });
}

/** A file opened in its format, ready to be shown or read. */
export interface IntakeSource {
  shape: () => string;
  previewIntervals: () => IntervalPreview;
  readIntervals: () => IntervalReading;
  previewBills: () => BillPreview;
  readBills: () => BillReading;
  /** Where in the file the interval stands that begins at an instant. */
  traceInterval: (ms: number) => Trace;
  /** Where in the file the bill stands whose period begins on a day. */
  traceBill: (from: string) => Trace;
}

/**
 * Opens a file in whatever format its bytes are; an archive gives way to a file in it.
 * @throws {IntakeError} if it cannot be opened.
 */
export async function openSource(bytes: Uint8Array, options: ReadOptions, isInArchive = false): Promise<IntakeSource> {
  const container = containerOf(bytes, options.fileName);
  if (container === 'zip') {
    if (isInArchive)
      throw intakeError(
        'The archive holds another archive.',
        options.fileName,
        'Bring in the file of readings itself.',
      );
    return zipSource(bytes, options, (inside, within) => openSource(inside, within, true));
  }
  if (container === 'xml') return espiSource(bytes, options);
  if (container === 'nem12') return nemSource(decodeText(bytes, options.fileName).text, options);
  tellStage(options, 0);
  const unpacked = container === 'workbook-zip' ? await unpackedWorkbook(bytes, options.fileName) : bytes;
  const opened = openTable(unpacked, container, options.fileName, options.columnMap ?? {});
  tellStage(options, 1);
  return {
    shape: () => shapeOf(opened.grid, opened.vote?.delimiter),
    previewIntervals: () => previewOfIntervals(opened, options),
    readIntervals: () => {
      const { load, report } = readPlanned(planIntervals(opened, options), options);
      return { load, report };
    },
    previewBills: () => previewOfBills(opened, options),
    readBills: () => readPlannedBills(planBills(opened, options), options),
    traceInterval: (ms) => traceTable(planIntervals(opened, options), options, ms),
    traceBill: (from) => traceTableBill(planBills(opened, options), options, from),
  };
}

function nemSource(text: string, options: ReadOptions): IntakeSource {
  const file = parseNem12(text, options.fileName);
  const columns = evidenceOfNem(file);
  const shape = shapeOfNames(
    'nem12',
    columns.map((column) => column.name),
  );
  const read = () => readNem12(file, options);
  return {
    shape: () => shape,
    readIntervals: read,
    traceInterval: (ms) => traceNem(file, placeNem12(file, options), options, ms),
    previewIntervals: () =>
      previewOfChannels(
        {
          format: 'nem12',
          head: text.slice(0, headCharacters),
          rowsInFile: file.grid.rows,
          columns,
          meters: metersOfNem(file),
          shape,
          columnMap: options.columnMap ?? { kind: 'intervals' },
        },
        options,
        read,
      ),
    ...noBills('NEM12', options),
  };
}

/** Formats of intervals hold no table of bills. */
function noBills(format: string, options: ReadOptions): Pick<IntakeSource, 'previewBills' | 'readBills' | 'traceBill'> {
  const refuse = (): never => {
    throw intakeError(
      `The file is ${format}: intervals, not bills.`,
      options.fileName,
      'Bring it in as intervals, and the bills as a table.',
    );
  };
  return { previewBills: refuse, readBills: refuse, traceBill: refuse };
}
