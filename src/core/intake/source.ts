import { planBills } from './bill-plan';
import { readPlannedBills } from './bills';
import { intakeError } from './errors';
import { evidenceOfEspi, metersOfEspi, readEspi } from './espi';
import { channelsOfFeed } from './espi-channels';
import { parseEspi } from './espi-feed';
import { containerOf } from './format';
import { planIntervals, readPlanned } from './intervals';
import { evidenceOfNem, metersOfNem, parseNem12, readNem12 } from './nem12';
import { openTable } from './open';
import { previewOfBills, previewOfChannels, previewOfIntervals } from './preview';
import { shapeOf, shapeOfNames } from './shape';
import { decodeText } from './text';
import type { BillPreview, BillReading, IntervalPreview, IntervalReading, ReadOptions } from './types';
import { unzipOnly } from './unzip';

/** A file opened in its format, ready to be shown or read. */
interface IntakeSource {
  shape: () => string;
  previewIntervals: () => IntervalPreview;
  readIntervals: () => IntervalReading;
  previewBills: () => BillPreview;
  readBills: () => BillReading;
}

/**
 * Opens a file in whatever format its bytes are; an archive gives way to the one file in it.
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
    const inside = await unzipOnly(bytes, options.fileName);
    return openSource(inside.bytes, { ...options, fileName: `${options.fileName}, ${inside.name}` }, true);
  }
  if (container === 'xml') return espiSource(decodeText(bytes, options.fileName).text, options);
  if (container === 'nem12') return nemSource(decodeText(bytes, options.fileName).text, options);
  const opened = openTable(bytes, container, options.fileName, options.columnMap ?? {});
  return {
    shape: () => shapeOf(opened.grid, opened.vote?.delimiter),
    previewIntervals: () => previewOfIntervals(opened, options),
    readIntervals: () => {
      const { load, report } = readPlanned(planIntervals(opened, options), options);
      return { load, report };
    },
    previewBills: () => previewOfBills(opened, options),
    readBills: () => readPlannedBills(planBills(opened, options), options),
  };
}

function espiSource(text: string, options: ReadOptions): IntakeSource {
  const channels = channelsOfFeed(parseEspi(text, options.fileName), options.columnMap ?? {});
  const columns = evidenceOfEspi(channels);
  const shape = shapeOfNames(
    'espi',
    columns.map((column) => column.name),
  );
  const read = () => readEspi(channels, options);
  return {
    shape: () => shape,
    readIntervals: read,
    previewIntervals: () =>
      previewOfChannels({ format: 'espi', text, columns, meters: metersOfEspi(channels), shape }, options, read),
    ...noBills('an ESPI feed', options),
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
    previewIntervals: () =>
      previewOfChannels({ format: 'nem12', text, columns, meters: metersOfNem(file), shape }, options, read),
    ...noBills('NEM12', options),
  };
}

/** Formats of intervals hold no table of bills. */
function noBills(format: string, options: ReadOptions): Pick<IntakeSource, 'previewBills' | 'readBills'> {
  const refuse = (): never => {
    throw intakeError(
      `The file is ${format}: intervals, not bills.`,
      options.fileName,
      'Bring it in as intervals, and the bills as a table.',
    );
  };
  return { previewBills: refuse, readBills: refuse };
}
