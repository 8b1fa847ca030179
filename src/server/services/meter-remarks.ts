import { formatCount, formatDay, formatNumber, formatPercent, formatQuantity } from '../../components/ui/format';
import { addDays, energiesDiffer, meteredOver, type Metered } from '../../core/load';
import { billQuantity, type MeterFigure } from '../../schemas/bill';
import { firstPeak, isDemand, isFactor, meteredFigures } from './meter-figures';

/** The days of a bill's period with the day before and the day after it. */
export interface PeriodWithNeighbours {
  from: string;
  to: string;
  before: Metered;
  days: Metered[];
  after: Metered;
}

const inWords = (value: number, name: string) => {
  const { unit, decimals } = billQuantity(name);
  return formatQuantity(value, unit, { decimals: name === 'powerFactor' ? 3 : decimals });
};

/** Periods a day off, and what they are called. */
function shiftsOf({ before, days, after }: PeriodWithNeighbours): [words: string, days: Metered[]][] {
  return [
    ['ends a day earlier', days.slice(0, -1)],
    ['ends a day later', [...days, after]],
    ['begins a day later', days.slice(1)],
    ['begins a day earlier', [before, ...days]],
    ['lies a day earlier', [before, ...days.slice(0, -1)]],
    ['lies a day later', [...days.slice(1), after]],
  ];
}

/** The shift of the period by a day that makes a printed sum agree best; null where none does. */
function agreeingShift(printed: number, period: PeriodWithNeighbours, sumOf: (metered: Metered) => number | null) {
  const fitting = shiftsOf(period).flatMap(([words, days]) => {
    const whole = meteredOver(days);
    const sum = whole.missing > 0 ? null : sumOf(whole);
    return sum === null || energiesDiffer(printed, sum) ? [] : [{ words, off: Math.abs(printed - sum) }];
  });
  return fitting.sort((a, b) => a.off - b.off)[0]?.words ?? null;
}

/** A whole number by which a printed sum is too great or too small: a meter's multiplier used twice or not at all. */
function multiplierOf(printed: number, metered: number): string | null {
  const ratio = Math.max(printed, metered) / Math.min(printed, metered);
  const whole = Math.round(ratio);
  if (!Number.isFinite(ratio) || whole < 2 || Math.abs(ratio / whole - 1) > 0.002) return null;
  const words = printed > metered ? `${whole} times` : `1/${whole} of`;
  return `That is ${words} the metered: look at the multiplier of the meter`;
}

function sumRemark({ name, printed, metered }: MeterFigure, period: PeriodWithNeighbours): string {
  const value = metered ?? 0;
  const off = printed - value;
  const { label, unit, decimals } = billQuantity(name);
  const share = value > 0 ? `, ${formatPercent(Math.abs(off / value), 2)} ${off > 0 ? 'more' : 'less'}` : '';
  const by = `${formatQuantity(off, unit, { decimals, signed: true })}${share}`;
  const why = sumCause(name, printed, value, period);
  return `${label}: ${inWords(printed, name)} printed, ${inWords(value, name)} metered (${by}).${why ? ` ${why}.` : ''}`;
}

/** What would make a printed sum agree; null where nothing tried does. */
function sumCause(name: string, printed: number, value: number, period: PeriodWithNeighbours): string | null {
  const key = name === 'kwh' ? 'kwh' : name === 'kvarh' ? 'kvarhLagging' : 'kvarhLeading';
  const shift = agreeingShift(printed, period, (whole) => whole[key]);
  if (shift) return `It agrees if the period ${shift}`;
  const net = name === 'kvarh' ? netOf(meteredOver(period.days)) : null;
  if (net !== null && !energiesDiffer(printed, net)) return 'It is the lagging less the leading energy';
  return multiplierOf(printed, value);
}

const netOf = ({ kvarhLagging, kvarhLeading }: Metered) =>
  kvarhLagging === null || kvarhLeading === null ? null : kvarhLagging - kvarhLeading;

function demandRemark({ name, printed, metered }: MeterFigure, period: PeriodWithNeighbours): string {
  const of = name === 'maxKva' ? 'kva' : 'kw';
  const { before, after, from, to } = period;
  const outside: [Metered, string][] = [
    [before, `${formatDay(addDays(from, -1))}, the day before the period`],
    [after, `${formatDay(to)}, the day after the period`],
  ];
  const day = outside.find(([metered]) => metered.peaks.some((peak) => isDemand(printed, peak[of])))?.[1];
  const why = day ? ` It is the peak of ${day}.` : '';
  return `${billQuantity(name).label}: ${inWords(printed, name)} printed, ${inWords(metered ?? 0, name)} metered.${why}`;
}

/** Which window a printed peak is of, where it is not the shortest. */
function windowRemark({ name, printed }: MeterFigure, whole: Metered): string | null {
  const of = name === 'maxKva' ? 'kva' : 'kw';
  if (isDemand(printed, firstPeak(whole)?.[of])) return null;
  const window = whole.peaks.find((peak) => isDemand(printed, peak[of]));
  return window ? `${billQuantity(name).label}: it is the highest mean of ${window.windowMinutes} minutes.` : null;
}

function factorRemark(printed: number, whole: Metered): string | null {
  const { powerFactorAtPeak, powerFactorOfPeriod } = meteredFigures(whole);
  if (isFactor(printed, powerFactorAtPeak)) return null;
  if (isFactor(printed, powerFactorOfPeriod)) return 'Power factor: it is that of the whole period, not of the peak.';
  if (powerFactorAtPeak === null || powerFactorOfPeriod === null) return null;
  return `Power factor: ${printed} printed, ${formatNumber(powerFactorAtPeak, { decimals: 3 })} at the peak and ${formatNumber(powerFactorOfPeriod, { decimals: 3 })} over the period metered.`;
}

function missingRemark(whole: Metered, figures: MeterFigure[]): string[] {
  if (whole.missing === 0) return [];
  const count = `${formatNumber(whole.missing)} of ${formatCount(whole.expected, 'reading')} are missing`;
  if (whole.missing === whole.expected) return [`All ${formatCount(whole.expected, 'reading')} are missing.`];
  const peak = firstPeak(whole);
  const least = `energy is at least ${inWords(whole.kwh, 'kwh')}${peak ? ` and the peak at least ${inWords(peak.kw, 'maxKw')}` : ''}`;
  const below = figures.filter(({ agrees }) => agrees === false).map(({ name }) => billQuantity(name).label);
  return [`${count}: ${least}.`, ...below.map((label) => `${label}: the bill prints less than the readings at hand.`)];
}

/** What differs between a bill and its readings, what would make it agree, and what cannot be said; a sentence each. */
export function remarksOf(figures: MeterFigure[], period: PeriodWithNeighbours): string[] {
  const whole = meteredOver(period.days);
  if (whole.missing > 0) return missingRemark(whole, figures);
  const remarks = figures.flatMap((figure) => {
    if (figure.metered === null) return [];
    if (figure.name === 'powerFactor') return factorRemark(figure.printed, whole) ?? [];
    const isPeak = figure.name === 'maxKw' || figure.name === 'maxKva';
    if (figure.agrees !== false) return isPeak ? (windowRemark(figure, whole) ?? []) : [];
    return isPeak ? demandRemark(figure, period) : sumRemark(figure, period);
  });
  if (whole.estimated === 0) return remarks;
  const part = `${formatNumber(whole.estimated)} of ${formatCount(whole.expected, 'reading')} are estimated.`;
  return [...remarks, part];
}
