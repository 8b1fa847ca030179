import type { YearPicture } from '../../schemas/schedule-sheet';
import { ChartFigure } from '../charts/ChartFigure';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { clock, fillOf, YearChart, yearHeight, type Fill } from './YearChart';

function yearTable(picture: YearPicture): LedgerData {
  return {
    columns: [
      { key: 'day', head: 'Kind of day' },
      { key: 'days', head: 'Days', kind: 'number' },
      { key: 'window', head: 'Window' },
      { key: 'from', head: 'From', align: 'right' },
      { key: 'to', head: 'To', align: 'right' },
    ],
    rows: picture.strips.flatMap(({ label, pattern }) =>
      (picture.patterns[pattern] ?? []).map((span) => ({
        id: `${pattern}-${span.window}-${span.from}`,
        cells: {
          day: label,
          days: picture.patternOfDay.filter((one) => one === pattern).length,
          window: picture.windows[span.window]?.label ?? '',
          from: clock(span.from),
          to: clock(span.to),
        },
      })),
    ),
  };
}

/** How the fills read: "Solid: summer peak. Hatched: winter peak. Blank: off-peak." */
function fillWords(picture: YearPicture): string {
  const words: Record<Fill, string> = { solid: 'Solid', hatch: 'Hatched', dots: 'Dotted', blank: 'Blank' };
  const seen = new Map<Fill, Set<string>>();
  picture.windows.forEach((window, index) => {
    const bySeason = window.bySeason && fillOf(picture, index, 0) !== fillOf(picture, index, 1);
    const entries: [Fill, string][] = bySeason
      ? picture.seasonNames.map((season, at) => [fillOf(picture, index, at), `${season} ${window.label.toLowerCase()}`])
      : [[fillOf(picture, index, 0), window.label.toLowerCase()]];
    for (const [fill, label] of entries) seen.set(fill, (seen.get(fill) ?? new Set()).add(label));
  });
  return [...seen].map(([fill, labels]) => `${words[fill]}: ${[...labels].join(', ')}.`).join(' ');
}

/** Island: the schedule's year in its frame. */
export function YearFigure({ picture, fileName }: { picture: YearPicture; fileName: string }) {
  const [first] = picture.windows;
  if (!first) return null;
  return (
    <ChartFigure
      finding={`${first.label} is ${formatNumber(first.hours)} of the ${formatNumber(picture.totalHours)} hours of ${picture.year}.`}
      reading={`A day a column, midnight at the foot. ${fillWords(picture)}${picture.holidays.length > 0 ? ' Triangle: holiday.' : ''}`}
      fileName={fileName}
      table={yearTable(picture)}
      heightOf={yearHeight(picture)}
    >
      {(size) => <YearChart picture={picture} {...size} />}
    </ChartFigure>
  );
}
