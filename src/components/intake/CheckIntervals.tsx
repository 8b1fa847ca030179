import { useQuery } from '@tanstack/react-query';
import { fetchIntakePicture } from '../../client/intake';
import type { IntakeReport, IntervalPreview } from '../../core/intake';
import { localDateStartMs } from '../../core/load';
import type { IntakeView } from '../../schemas/intake';
import type { IntakePicture } from '../../schemas/intervals';
import { packCarpets } from '../charts/carpet';
import { CarpetTabs } from '../charts/CarpetTabs';
import { FindingSlip } from '../ui/FindingSlip';
import { formatCount, formatDateTime, formatNumber, formatPeriod, formatQuantity, formatTime } from '../ui/format';
import { Notice } from '../ui/Notice';
import { ResultSums, type SumRow } from '../ui/ResultSums';
import { gapInWords, longestGaps } from './carpet-marks';
import { FindingSlips } from './FindingSlips';
import { isKnown } from './interval-words';
import { loadMarks } from './load-findings';
import { Notes } from './Notes';
import { SheetPart } from './Sheet';

export interface CheckIntervalsProps {
  intake: IntakeView;
  preview: IntervalPreview;
}

/** The readings as they would be kept: picture, gaps, sums, peak, notes. */
export function CheckIntervals({ intake, preview }: CheckIntervalsProps) {
  const { report } = preview;
  const picture = useQuery({
    queryKey: ['intake-picture', intake.id, intake.version],
    queryFn: () => fetchIntakePicture(intake.id),
    enabled: report !== null && preview.problems.length === 0,
  });
  return (
    <SheetPart
      id="check"
      number="3"
      title="Check"
      lead={report ? undefined : 'The picture follows when the file can be read.'}
      reference={
        <>
          <p>Each column of the picture is a day, midnight at the foot, local time.</p>
          <p>Missing stays missing: nothing is filled in.</p>
        </>
      }
      result={report && <Results intake={intake} report={report} picture={picture.data} />}
    >
      {report && (
        <div className="stacked">
          <Picture intake={intake} report={report} picture={picture.data} error={picture.error} />
          <Notes report={report} />
        </div>
      )}
    </SheetPart>
  );
}

interface PartProps {
  intake: IntakeView;
  report: IntakeReport;
  picture: IntakePicture | undefined;
}

function Picture({ intake, report, picture, error }: PartProps & { error: Error | null }) {
  const { timeZone } = intake;
  if (error) return <Notice kind="fault" title={error.message} />;
  if (!picture) {
    return (
      <p className="hint carpet-waiting" role="status">
        The picture is being drawn from {formatNumber(report.intervals)} readings.
      </p>
    );
  }
  const finding =
    report.missing === 0
      ? 'Every interval of the span has its reading.'
      : `${formatCount(report.missing, 'reading')} ${report.missing === 1 ? 'is' : 'are'} missing, in ${formatCount(report.gaps?.length ?? 1, 'gap')}.`;
  const edge =
    formatTime(report.firstMs, timeZone) === '00:00' ? '' : ' Hatched on the first day: before the file begins.';
  return (
    <CarpetTabs
      carpets={packCarpets({ ...picture, marks: loadMarks(report.gaps ?? [], picture.findings, timeZone) })}
      finding={finding}
      more={edge}
      fileName={`${intake.engagement.code}-${intake.fileName.replace(/\W+/g, '-')}`}
    />
  );
}

function Results({ intake, report, picture }: PartProps) {
  const timeZone = intake.engagement.siteTimeZone;
  const gaps = longestGaps(report.gaps ?? []);
  const energy = (label: string, value: number, tone?: SumRow['tone']): SumRow => ({
    label,
    value: isKnown(value) ? formatNumber(value) : 'not in the file',
    tone,
  });
  return (
    <>
      <ResultSums
        rows={[
          { label: 'Intervals', value: formatNumber(report.intervals) },
          { label: 'Missing', value: formatNumber(report.missing) },
          { label: 'Estimated', value: formatNumber(report.estimated) },
          { label: 'Repeated, dropped', value: formatNumber(report.duplicates) },
          ...(report.negative
            ? [{ label: 'Below nought', value: formatNumber(report.negative), tone: 'fault' as const }]
            : []),
        ]}
      />
      <ResultSums
        rows={[
          energy('Energy, kWh', report.totalKwh),
          energy('Lagging, kvarh', report.totalKvarhLagging, 'lagging'),
          energy('Leading, kvarh', report.totalKvarhLeading, 'leading'),
        ]}
      />
      {isKnown(report.maxKw) && (
        <>
          <h3>Highest reading</h3>
          <p>
            {formatQuantity(report.maxKw, 'kW', { upTo: 2 })}
            {report.peak && ` on ${formatDateTime(report.peak.ms, timeZone)}`}
          </p>
        </>
      )}
      <YearShare intake={intake} report={report} />
      <div className="mt-3">
        {gaps.map((gap, index) => (
          <FindingSlip
            key={gap.fromMs}
            letter={String(index + 1)}
            title={`Gap, ${formatCount(gap.intervals, 'reading')}`}
          >
            {gapInWords(gap, timeZone)}. Left missing; no peak can be proven then.
          </FindingSlip>
        ))}
        {picture && <FindingSlips findings={picture.findings} gaps={report.gaps ?? []} timeZone={timeZone} />}
      </div>
      {(report.gaps?.length ?? 0) > gaps.length && (
        <p>{formatCount((report.gaps?.length ?? 0) - gaps.length, 'shorter gap')} more.</p>
      )}
    </>
  );
}

/** How much of the engagement's year lies in the file. */
function YearShare({ intake, report }: { intake: IntakeView; report: IntakeReport }) {
  const { yearFrom, yearTo, siteTimeZone } = intake.engagement;
  const [begins, ends] = [localDateStartMs(yearFrom, siteTimeZone), localDateStartMs(yearTo, siteTimeZone)];
  const end = report.lastMs + (report.stepMinutes ?? 15) * 60_000;
  const share = Math.max(0, Math.min(end, ends) - Math.max(report.firstMs, begins)) / (ends - begins);
  const year = formatPeriod(yearFrom, yearTo, { year: true });
  if (share === 0) {
    return (
      <div className="mt-3">
        <Notice title="Outside the year">
          <span>{`Nothing of this file lies in the engagement’s year, ${year}.`}</span>
        </Notice>
      </div>
    );
  }
  return (
    <>
      <h3>Of the engagement’s year</h3>
      <p>{`${formatQuantity(Math.floor(share * 1000) / 10, '%', { upTo: 1 })} of ${year}.`}</p>
    </>
  );
}
