import { intakeError } from './errors';
import { guess } from './evidence';
import type { IntakeSource } from './source';
import type { BillPreview, IntakeReport, IntervalPreview, ReadOptions } from './types';
import { readableMembers, unzipMember } from './unzip';

/** Opens the bytes of a file of an archive. */
type Open = (bytes: Uint8Array, options: ReadOptions) => Promise<IntakeSource>;

/**
 * Opens the file of an archive: the only one, else the one the column map names. Where several are there and none is named
 * the largest is shown, marked as unsure, and nothing is read until a person has chosen.
 * @throws {IntakeError} if the archive holds no file, not the one named, or cannot be unpacked.
 */
export async function zipSource(bytes: Uint8Array, options: ReadOptions, open: Open): Promise<IntakeSource> {
  const { fileName } = options;
  const members = readableMembers(bytes, fileName);
  const names = members.map(({ name }) => name);
  const wanted = options.columnMap?.member;
  const member = wanted === undefined ? members[0] : members.find(({ name }) => name === wanted);
  if (!member) {
    throw intakeError(
      `The archive has no file “${wanted ?? ''}”.`,
      `${fileName}, files: ${names.slice(0, 12).join(', ')}`,
      'Choose one of its files in the column map.',
    );
  }
  const inside = await unzipMember(bytes, member, fileName);
  const source = await open(inside, { ...options, fileName: `${fileName}, ${member.name.split('/').at(-1)}` });
  return names.length === 1
    ? source
    : chosenOf(source, { name: member.name, names, isPicked: wanted !== undefined }, options);
}

interface Choice {
  name: string;
  names: string[];
  isPicked: boolean;
}

/** The source with the choice among the archive's files carried in its maps and shown among its guesses. */
function chosenOf(source: IntakeSource, { name, names, isPicked }: Choice, options: ReadOptions): IntakeSource {
  const inReport = <Report extends IntakeReport>(report: Report): Report =>
    report.columnMap ? { ...report, columnMap: { ...report.columnMap, member: name } } : report;
  const inPreview = <Preview extends IntervalPreview | BillPreview>(preview: Preview): Preview => ({
    ...preview,
    dialect: { ...preview.dialect, members: [...names].sort() },
    columnMap: { ...preview.columnMap, member: name },
    guesses: [memberGuess(name, names, isPicked), ...preview.guesses],
    report: preview.report && inReport(preview.report),
  });
  const assertPicked = (): void => {
    if (isPicked) return;
    throw intakeError(
      `The archive holds ${names.length} files: ${names.slice(0, 12).join(', ')}.`,
      options.fileName,
      'Choose one of them in the column map, or bring them in one by one.',
    );
  };
  return {
    shape: source.shape,
    readIntervals: () => {
      assertPicked();
      const { load, report } = source.readIntervals();
      return { load, report: inReport(report) };
    },
    previewIntervals: () => inPreview(source.previewIntervals()),
    readBills: () => {
      assertPicked();
      const { bills, report } = source.readBills();
      return { bills, report: inReport(report) };
    },
    previewBills: () => inPreview(source.previewBills()),
    traceInterval: (ms) => {
      assertPicked();
      return source.traceInterval(ms);
    },
    traceBill: (from) => {
      assertPicked();
      return source.traceBill(from);
    },
  };
}

function memberGuess(name: string, names: readonly string[], isPicked: boolean) {
  const others = names.length - 1;
  const finding = isPicked
    ? `Chosen among ${names.length} files`
    : `The largest of ${names.length} files; ${others === 1 ? 'the other is' : `the other ${others} are`} not read`;
  return guess('member', name, [[isPicked, finding]]);
}
