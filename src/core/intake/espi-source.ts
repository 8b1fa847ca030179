import { evidenceOfEspi, mapOfEspi, metersOfEspi, placeEspi, readEspi } from './espi';
import { hasSummaries, previewEspiBills, readEspiBills, summaryOfBill } from './espi-bills';
import { channelsOfFeed } from './espi-channels';
import { parseEspi } from './espi-feed';
import { previewOfChannels } from './preview';
import { shapeOfNames } from './shape';
import type { IntakeSource } from './source';
import { decodeHead } from './text';
import { traceFeed, traceSummary } from './trace';
import type { ReadOptions } from './types';

/**
 * Opens an ESPI feed.
 * @throws {IntakeError} if the XML is no feed, is broken or holds a document type.
 */
export function espiSource(bytes: Uint8Array, options: ReadOptions): IntakeSource {
  const feed = parseEspi(bytes, options.fileName, (done) =>
    options.onProgress?.({ unit: 'bytes', done, planned: bytes.length }),
  );
  const channels = channelsOfFeed(feed, options.columnMap ?? {});
  const columns = evidenceOfEspi(channels);
  const shape = shapeOfNames(
    'espi',
    columns.map((column) => column.name),
  );
  const head = decodeHead(bytes, options.fileName);
  const read = () => {
    const { load, report } = readEspi(feed, channels, options);
    const notes = hasSummaries(feed) ? [...report.notes, summariesNote] : report.notes;
    return { load, report: { ...report, notes } };
  };
  const shown = { format: 'espi' as const, head, rowsInFile: feed.readings.length, columns, shape };
  return {
    shape: () => shape,
    readIntervals: read,
    previewIntervals: () =>
      previewOfChannels(
        {
          ...shown,
          meters: metersOfEspi(channels),
          columnMap: mapOfEspi(channels, options.columnMap?.meter),
        },
        options,
        read,
      ),
    traceInterval: (ms) => traceFeed(feed, placeEspi(channels, options).placed, options, ms),
    traceBill: (from) => traceSummary(summaryOfBill(feed, options, from), options),
    readBills: () => readEspiBills(feed, options),
    previewBills: () => previewEspiBills(feed, { head, shape }, options),
  };
}

const summariesNote = {
  code: 'bills-in-feed',
  message: 'The feed also holds summaries of bills. Bring the same file in at the station Bills to take them.',
};
