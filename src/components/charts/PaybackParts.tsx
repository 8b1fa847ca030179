import { formatMajor, formatNumber, formatPayback } from '../ui/format';
import { PointMark, Words, type Plot } from './kit';
import type { Palette } from './palette';
import { byYear, type PaybackData } from './payback';
import { spreadLabels, valueAt } from './scale';

/** What every part of the picture is drawn from. */
export interface PaybackParts {
  data: PaybackData;
  divisor: number;
  plot: Plot;
  palette: Palette;
  narrow: boolean;
}

/** Names of the lines beside their ends. */
export function EndWords({ data, divisor, plot, palette }: PaybackParts) {
  const end = data.points.at(-1);
  if (!end) return null;
  const labels = [
    end.p90 !== undefined && { at: end.p90, words: '1 in 10 above' },
    { at: end.cumulative, words: data.editionName, tone: 'verdigris' as const, bold: true },
    end.yours !== undefined && { at: end.yours, words: data.yoursName ?? 'your figures', bold: true },
    end.p10 !== undefined && { at: end.p10, words: '1 in 10 below' },
  ].filter((label) => label !== false);
  const places = spreadLabels(
    labels.map((label) => plot.y(label.at / divisor) + 4),
    15,
    plot.top + 6,
    plot.bottom,
  );
  return labels.map((label, index) => (
    <Words key={label.words} x={plot.right + 7} y={places[index]!} palette={palette} {...label}>
      {label.words}
    </Words>
  ));
}

/** The spread of the payback in the longest words the room holds; null where none fits. */
function spreadWords({ fromYears, toYears }: { fromYears: number; toYears: number }, narrow: boolean, room: number) {
  const months = (years: number) => formatNumber(Math.round(years * 12));
  const span = `${months(fromYears)} to ${months(toYears)}`;
  const wordings = [`8 in 10: ${span}`];
  if (!narrow) wordings.unshift(`8 in 10 samples: ${span} months`, `8 in 10: ${span} months`);
  return wordings.find((words) => words.length * 5.9 <= room) ?? null;
}

/** Where the work is paid back, with the spread of the samples. */
export function PaybackMark({ data, plot, palette, narrow }: PaybackParts) {
  if (data.paybackYears === null) return null;
  const x = plot.x(data.paybackYears);
  const y = plot.y(0);
  const below = plot.bottom - y > 62;
  const textY = below ? y + 44 : y + 19;
  const flip = x > (plot.left + plot.right) / 2 + 40;
  const range = data.paybackRange;
  const whiskers = range
    ? [range.fromYears, range.toYears].map((years) => `M${plot.x(years)} ${y - 4}v8`).join('')
    : '';
  const aside = below ? 4 : 12;
  const place = {
    x: flip ? x - aside : x + aside,
    palette,
    anchor: flip ? ('end' as const) : ('start' as const),
    halo: true,
  };
  const spreadX = below ? place.x : place.x + (narrow ? 74 : 172);
  const spread =
    range && (below || !flip) ? spreadWords(range, narrow, flip ? Infinity : plot.right - spreadX - 4) : null;
  return (
    <>
      <path d={`${whiskers}M${x} ${y}V${below ? y + 34 : y}`} stroke={palette.ink} fill="none" />
      <PointMark x={x} y={y} shape="circle" palette={palette} />
      <Words {...place} y={textY} bold size={narrow ? 12 : 13.5}>
        {narrow || data.paybackYears === 0
          ? formatPayback(data.paybackYears)
          : `paid back after ${formatPayback(data.paybackYears)}`}
      </Words>
      {spread && (
        <Words {...place} x={spreadX} y={below ? textY + 15 : textY}>
          {spread}
        </Words>
      )}
    </>
  );
}

/** Where the reader's own line is paid back, named above the line of nought. */
export function YoursMark({ data, plot, palette }: PaybackParts) {
  const years = data.yoursPaybackYears ?? null;
  const end = data.points.at(-1);
  if (years === null || !end || end.yours === undefined || years > end.year) return null;
  const x = plot.x(years);
  const y = plot.y(0);
  const flip = x > (plot.left + plot.right) / 2 + 40;
  return (
    <>
      <path d={`M${x} ${y - 22}V${y + 4}`} stroke={palette.ink} strokeDasharray="4 2" fill="none" />
      <Words x={flip ? x - 5 : x + 5} y={y - 26} palette={palette} anchor={flip ? 'end' : 'start'} bold halo>
        {`yours: ${formatPayback(years)}`}
      </Words>
    </>
  );
}

/** The work as the drop the line begins with. */
export function WorkDrop({ data, divisor, plot, palette }: PaybackParts) {
  const start = data.points[0]?.cumulative ?? 0;
  if (start >= 0) return null;
  return <path d={`M${plot.left} ${plot.y(0)}V${plot.y(start / divisor)}`} stroke={palette.ink} strokeWidth={5} />;
}

/** Height of the words on the work: under the line's beginning, or at the foot where the payback is named beside it. */
function paidOnceY({ data, plot, low }: Pick<PaybackParts, 'data' | 'plot'> & { low: number }): number {
  const foot = plot.bottom - 7;
  const wanted = Math.min(low + 18, foot);
  if (data.paybackYears === null) return wanted;
  const mark = plot.y(0);
  const beside = plot.x(data.paybackYears) < plot.left + 8 + paidOnceWords(data, false).length * 6.8;
  return beside && wanted > mark + 28 && wanted < mark + 74 ? Math.max(wanted, Math.min(foot, mark + 76)) : wanted;
}

/** "114,400 USD paid once, 10,000 of it a grant". */
function paidOnceWords({ capitalCost, incentive = 0, currency }: PaybackData, narrow: boolean): string {
  const paid = `${formatMajor(capitalCost, currency, { whole: true })} paid once`;
  return incentive > 0 && !narrow ? `${paid}, ${formatNumber(incentive)} of it a grant` : paid;
}

/** What the parts of the picture mean. */
export function PaybackNotes({ data, divisor, plot, palette, narrow }: PaybackParts) {
  const low = plot.y((data.points[0]?.cumulative ?? 0) / divisor);
  const last = data.points.at(-1);
  const aheadYear = last && data.paybackYears !== null ? (data.paybackYears + last.year) / 2 : null;
  const aheadAt = aheadYear === null ? null : valueAt(data.points, aheadYear, byYear, (p) => p.p90 ?? p.cumulative);
  return (
    <>
      <Words
        x={plot.left + 8}
        y={narrow ? plot.bottom - 7 : paidOnceY({ data, plot, low })}
        palette={palette}
        bold
        halo
      >
        {paidOnceWords(data, narrow)}
      </Words>
      {aheadYear !== null && aheadAt !== null && (
        <Words
          x={plot.x(aheadYear) - 14}
          y={plot.y(aheadAt / divisor) - 12}
          palette={palette}
          tone="verdigris"
          bold
          anchor="end"
          halo
        >
          ahead
        </Words>
      )}
      {!narrow && data.paybackYears !== null && plot.x(data.paybackYears * 0.66) - plot.left > 110 && (
        <Words x={plot.x(data.paybackYears * 0.66)} y={plot.y(0) - 10} palette={palette} tone="ink2" anchor="end" halo>
          still paying back
        </Words>
      )}
    </>
  );
}
