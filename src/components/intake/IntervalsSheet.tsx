import { Fragment } from 'react';
import type { CarpetData } from '../charts/carpet';
import { Queries } from '../../client/queries';
import { CarpetTabs } from '../charts/CarpetTabs';
import { DayFigure } from '../charts/DayChart';
import type { IntervalsStation, KeptYear, MetersOfYear } from '../../schemas/intervals';
import { FindingSlip } from '../ui/FindingSlip';
import {
  formatCount,
  formatDateTime,
  formatLongDate,
  formatNumber,
  formatPeriod,
  formatQuantity,
  formatTime,
} from '../ui/format';
import { ResultSums } from '../ui/ResultSums';
import { BringIn } from './BringIn';
import { gapInWords, longestGaps } from './carpet-marks';
import { FileList } from './FileList';
import { FillsPart } from './FillsPart';
import { FindingSlips } from './FindingSlips';
import { GapChoice } from './GapChoice';
import { intervalName, presentInWords, readingsOf } from './interval-words';
import { MetersPart } from './MetersPart';
import { MonthsPart } from './MonthsPart';
import { ColumnNames, SheetHeading, SheetPart } from './Sheet';
import { TraceOf } from './TraceOf';

export interface IntervalsSheetProps {
  code: string;
  meters: MetersOfYear;
  yearDates: { from: string; to: string };
  station: Omit<IntervalsStation, 'picture'>;
  /** kW, kvar and power factor of the year; empty where nothing is kept. */
  carpets: CarpetData[];
}

/** Station Intervals: what is kept of the year, its picture, the day of the peak, gaps, months, files. */
export function IntervalsSheet({ code, meters, yearDates, station, carpets }: IntervalsSheetProps) {
  const { year, files, kept, timeZone } = station;
  const { id: meterId, label: meter } = station.meter;
  const period = formatPeriod(yearDates.from, yearDates.to, { year: true });
  const goes = Object.fromEntries(
    kept.map((file) => [
      file.intakeId,
      `${formatCount(file.intervals - file.missing, 'reading')} of ${formatDateTime(file.fromMs, timeZone)} to ${formatDateTime(file.toMs, timeZone)}`,
    ]),
  );
  /** Number of a part behind the picture; the day of the peak may be wanting. */
  const part = (position: number) => `2.${position + (year?.peak ? 1 : 0)}`;
  const numberOf = (behind: number) => (year ? part((year.fills.length > 0 ? 4 : 3) + behind) : `2.${1 + behind}`);
  return (
    <Queries>
      <SheetHeading {...heading(year, station, meter, period)} />
      <ColumnNames />
      {year && carpets.length > 0 && (
        <>
          <YearPart year={year} carpets={carpets} timeZone={timeZone} code={code} meterId={meterId} />
          {year.peak && <PeakPart year={year} peak={year.peak} timeZone={timeZone} code={code} />}
          <MonthsPart year={year} timeZone={timeZone} />
          {year.fills.length > 0 && <FillsPart code={code} number={part(3)} fills={year.fills} timeZone={timeZone} />}
        </>
      )}
      <SheetPart
        id="files"
        number={numberOf(0)}
        title={files.length > 0 ? 'Files' : 'Bring in the meter’s readings'}
        lead={
          files.length > 0
            ? 'Each file is kept byte for byte as it came, with its check sum.'
            : `Ask the client or the utility for the interval readings of ${meter}, ${period}: active energy, and reactive energy lagging and leading if the meter has them. Nothing is stored until you have seen it and keep it; keeping can be undone.`
        }
        reference={
          kept.length > 0 && (
            <p className="wrap-anywhere">Times are those of {timeZone.replaceAll('_', ' ').replace('/', '/\u200b')}.</p>
          )
        }
      >
        <div className="stacked">
          <BringIn code={code} kind="intervals" meterId={meterId} primary={files.length === 0} />
          {files.length > 0 && <FileList code={code} files={files} timeZone={timeZone} goes={goes} />}
        </div>
      </SheetPart>
      <MetersPart {...meters} code={code} number={numberOf(1)} shown={meterId} />
    </Queries>
  );
}

function heading(year: KeptYear | null, station: IntervalsSheetProps['station'], meter: string, period: string) {
  if (!year) {
    return {
      title: 'No readings of this year are kept yet.',
      lead: `The year is ${period} at ${meter}. Bills can be priced from what they print; plans need the readings.`,
    };
  }
  const files = station.kept.map((file) => file.fileName);
  const from =
    files.length === 0
      ? 'They came with another engagement of this meter.'
      : files.length === 1
        ? `They come from ${files[0]}.`
        : `They come from ${formatNumber(files.length)} files.`;
  const peak = year.peak
    ? ` The highest is ${formatQuantity(year.peak.kw, 'kW')} on ${formatDateTime(year.peak.ms, station.timeZone)}.`
    : '';
  return {
    title: `One year of ${readingsOf(year.stepMinutes)}, ${presentInWords(year.present, year.intervals)}.`,
    lead: `${period} at ${meter}.${peak} ${from}`,
  };
}

interface PartProps {
  year: KeptYear;
  timeZone: string;
  code: string;
}

function YearPart({ year, carpets, timeZone, code, meterId }: PartProps & { carpets: CarpetData[]; meterId: number }) {
  const missing = year.intervals - year.present;
  const finding =
    missing === 0
      ? 'Every interval of the year has its reading.'
      : `${formatCount(missing, 'reading')} of the year ${missing === 1 ? 'is' : 'are'} missing, in ${formatCount(year.gapCount, 'gap')}.`;
  const gaps = longestGaps(year.gaps);
  return (
    <SheetPart
      id="picture"
      number="2.1"
      title="The year at a glance"
      reference={
        <>
          <p>Each column of the picture is a day, midnight at the foot, local time.</p>
          <p>Numbered: the longest gaps. A peak that lies in one cannot be proven.</p>
        </>
      }
      result={
        <>
          <ResultSums
            rows={[
              { label: `${intervalName(year.stepMinutes)} of the year`, value: formatNumber(year.intervals) },
              { label: 'Missing', value: missing === 0 ? '0' : `\u2212 ${formatNumber(missing)}` },
              { label: 'Present', value: formatNumber(year.present), kind: 'total' },
              { label: 'of which estimated', value: formatNumber(year.estimated) },
            ]}
          />
          <div className="mt-3">
            {gaps.map((gap, index) => (
              <Fragment key={gap.fromMs}>
                <FindingSlip letter={String(index + 1)} title={`Gap, ${formatCount(gap.intervals, 'reading')}`}>
                  {gapInWords(gap, timeZone)}. Left missing.
                </FindingSlip>
                <GapChoice code={code} meterId={meterId} gap={gap} />
              </Fragment>
            ))}
            <FindingSlips findings={year.findings} gaps={year.gaps} timeZone={timeZone} />
          </div>
          {year.gapCount > gaps.length && (
            <p>{formatCount(year.gapCount - gaps.length, 'shorter gap')} more, in the table of months.</p>
          )}
        </>
      }
    >
      <CarpetTabs carpets={carpets} finding={finding} fileName={`${code}-load-of-the-year`} />
    </SheetPart>
  );
}

function PeakPart({ year, peak, timeZone, code }: PartProps & { peak: NonNullable<KeptYear['peak']> }) {
  const { kw, kvarLagging } = peak;
  const powerFactor = kvarLagging === null ? undefined : kw / Math.hypot(kw, kvarLagging);
  const name = formatLongDate(peak.date);
  return (
    <SheetPart
      id="peak"
      number="2.2"
      title="The day of the highest reading"
      reference={<p>Mean power of an interval: its energy over its length.</p>}
      result={
        <ResultSums
          rows={[
            { label: 'Highest, kW', value: formatNumber(kw, { decimals: 1 }), kind: 'strong' },
            {
              label: 'Interval',
              value: `${formatTime(peak.ms, timeZone)} to ${formatTime(peak.ms + year.stepMinutes * 60_000, timeZone)}`,
            },
            ...(kvarLagging === null
              ? []
              : [
                  {
                    label: 'Lagging then, kvar',
                    value: formatNumber(kvarLagging, { decimals: 1 }),
                    tone: 'lagging' as const,
                  },
                  { label: 'Power factor then', value: formatNumber(powerFactor ?? 1, { decimals: 3 }) },
                ]),
          ]}
        />
      }
    >
      <DayFigure
        dayName={name}
        stepMinutes={year.stepMinutes}
        points={peak.day}
        peak={{ minute: peak.minute, kw, kvarLagging: kvarLagging ?? undefined, powerFactor }}
        finding={`${name} set the year’s highest demand, ${formatQuantity(kw, 'kW')} at ${formatTime(peak.ms, timeZone)}.`}
        reading="Mean power of each interval of the day."
        fileName={`${code}-day-of-peak`}
      />
      {peak.intakeId !== null && <TraceOf intakeId={peak.intakeId} ms={peak.ms} />}
    </SheetPart>
  );
}
