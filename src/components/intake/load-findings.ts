import type { LoadFault, LoadFinding } from '../../core/load';
import type { CarpetMark } from '../charts/carpet';
import { formatCount, formatDateTime, formatNumber, formatQuantity } from '../ui/format';
import { gapInWords, gapMarks, longestGaps, markOf } from './carpet-marks';
import type { ReadingGap } from '../../schemas/intervals';

/** Findings with a slip of their own; the rest is counted. */
const shownFindings = 8;

/** One finding in words: title, what and why, what to do. */
export interface FindingWords {
  title: string;
  text: string;
}

const kw = (value: number | null) => formatQuantity(value ?? 0, 'kW', { upTo: 1 });
const kwh = (value: number | null) => formatQuantity(value ?? 0, 'kWh');

const titles: Record<LoadFault, string> = {
  negative: 'Below nought',
  impossible: 'Cannot be',
  'over-capacity': 'Above the service',
  spike: 'Spike',
  flat: 'The same figure for hours',
  zeros: 'Nought while at work',
  'poor-factor': 'Power factor hardly possible',
  'reactive-alone': 'kvar without kW',
  'clock-shift': 'Clock shifted',
  'energy-differs': 'Other than the bill',
};

/** What was found and against what, and what to do. */
function reasons(finding: LoadFinding): string {
  const { fault, found, against, name, intervals } = finding;
  switch (fault) {
    case 'negative':
      return `${kw(found)}: drawn energy is never below nought. Look whether the column is net of export.`;
    case 'impossible':
      return `${kw(found)}; the usual highest of a day is ${kw(against)}. A slipped multiplier or a register fault: ask for the reading again.`;
    case 'over-capacity':
      return `${kw(found)}, and the service carries ${kw(against)}. Look at the unit and the multiplier.`;
    case 'spike':
      return `${kw(found)}; at that time of the days around it is ${kw(against)}, and nothing else within a week comes near. Ask what ran then; it may set a demand.`;
    case 'flat':
      return `${kw(found)} to the last digit, ${formatCount(intervals, 'reading')}. The meter may have stood still or been filled in: ask how it was read.`;
    case 'zeros':
      return `0 kW, right after ${kw(against)}. A lost reading is often written as nought: ask, or bring in a file that has it.`;
    case 'poor-factor':
      return `${formatCount(intervals, 'reading')} below ${formatNumber(against ?? 0, { decimals: 1 })}, in the middle ${formatNumber(found, { decimals: 2 })}. Look at unit and multiplier of the kvarh.`;
    case 'reactive-alone':
      return `Up to ${formatQuantity(found, 'kvar', { upTo: 1 })} lagging while 0 kW are drawn. The active channel may have failed.`;
    case 'clock-shift':
      return `From here the working day runs ${formatQuantity(Math.abs(found), 'min')} ${found > 0 ? 'later' : 'earlier'} than in the weeks before. Look whether the clock of the file follows the change, or the plant changed its hours.`;
    case 'energy-differs': {
      const ratio = (against ?? 0) === 0 ? null : found / (against ?? 1);
      const hint = ratio && Math.abs(ratio - 1) > 0.1 ? `, ${formatNumber(ratio, { decimals: 3 })} times as much` : '';
      return `The bill of ${name ?? 'this time'} says ${kwh(against)}, the readings add up to ${kwh(found)}${hint}. Look at the multiplier and the days of the period.`;
    }
  }
}

/** A finding in words of the site's time. */
export function wordFinding(finding: LoadFinding, timeZone: string): FindingWords {
  const when =
    finding.fault === 'clock-shift' ? formatDateTime(finding.fromMs, timeZone) : gapInWords(finding, timeZone);
  return { title: titles[finding.fault], text: `${when}. ${reasons(finding)}` };
}

/** The findings that get a slip, with the number each carries on the picture, behind the gaps. */
export function numberedFindings(findings: LoadFinding[], gaps: ReadingGap[]) {
  const before = longestGaps(gaps).length;
  return findings.slice(0, shownFindings).map((finding, index) => ({ finding, label: String(before + index + 1) }));
}

/** Gaps and findings as numbered marks; what spans more than a day is marked where it begins. */
export function loadMarks(gaps: ReadingGap[], findings: LoadFinding[], timeZone: string): CarpetMark[] {
  const odd = numberedFindings(findings, gaps).filter(({ finding }) => finding.fault !== 'energy-differs');
  return [
    ...gapMarks(gaps, timeZone),
    ...odd.map(({ finding, label }) => ({ ...markOf(finding, timeZone), label, kind: 'oddity' as const })),
  ];
}
