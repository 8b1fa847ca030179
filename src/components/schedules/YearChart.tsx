import type { WindowSpan, YearPicture } from '../../schemas/schedule-sheet';
import { chartFont, narrowBelow } from '../charts/kit';
import { pagePalette as palette } from '../charts/palette';

const months = 'Jan Feb Mar Apr May Jun Jul Aug Sep Oct Nov Dec'.split(' ');
export const clock = (minute: number) =>
  `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;

export type Fill = 'solid' | 'hatch' | 'dots' | 'blank';

/** Fill of a window in a season: the named windows differ by fill; a single one differs by season; the rest stays blank. */
export function fillOf(picture: YearPicture, window: number, season: number | null): Fill {
  const named = picture.windows.flatMap((one, index) => (one.isRest ? [] : [index]));
  const place = named.indexOf(window);
  if (place < 0 || (place === named.length - 1 && named.length === picture.windows.length && named.length > 2))
    return 'blank';
  if (named.length === 1 && picture.windows[window]?.bySeason)
    return season === 0 || season === null ? 'solid' : 'hatch';
  return (['solid', 'hatch', 'dots'] as const)[place] ?? 'dots';
}

function FillDefs() {
  return (
    <defs>
      <pattern id="year-hatch" width="4" height="4" patternUnits="userSpaceOnUse" patternTransform="rotate(45)">
        <path d="M0 0V4" stroke={palette.ink} strokeWidth="1.3" />
      </pattern>
      <pattern id="year-dots" width="4" height="4" patternUnits="userSpaceOnUse">
        <rect x="1" y="1" width="1.4" height="1.4" fill={palette.ink} />
      </pattern>
    </defs>
  );
}

const fills: Record<Fill, string> = {
  solid: palette.ink,
  hatch: 'url(#year-hatch)',
  dots: 'url(#year-dots)',
  blank: 'none',
};

function Text(props: {
  x: number;
  y: number;
  children: string;
  bold?: boolean;
  anchor?: 'start' | 'middle' | 'end';
  quiet?: boolean;
}) {
  const { x, y, children, bold, anchor = 'start', quiet } = props;
  return (
    <text
      x={x}
      y={y}
      fill={quiet ? palette.ink2 : palette.ink}
      fontFamily={chartFont}
      fontSize={12}
      fontWeight={bold ? 700 : 400}
      textAnchor={anchor}
    >
      {children}
    </text>
  );
}

/** Days of one pattern and season beside each other are one block. */
function blocksOf(picture: YearPicture): { from: number; to: number; season: number | null; spans: WindowSpan[] }[] {
  const blocks: { from: number; to: number; season: number | null; pattern: number; spans: WindowSpan[] }[] = [];
  picture.patternOfDay.forEach((pattern, day) => {
    const season = picture.seasons.find(({ from, to }) => day >= from && day < to)?.season ?? null;
    const last = blocks.at(-1);
    if (last?.pattern === pattern && last.season === season) last.to = day + 1;
    else blocks.push({ from: day, to: day + 1, season, pattern, spans: picture.patterns[pattern] ?? [] });
  });
  return blocks;
}

const monthStarts = (year: number) =>
  months.map((_, month) => (Date.UTC(year, month, 1) - Date.UTC(year, 0, 1)) / 86_400_000);

interface Frame {
  left: number;
  right: number;
  top: number;
  bottom: number;
  x: (day: number) => number;
  y: (minute: number) => number;
}

function Axes({ picture, frame, narrow }: { picture: YearPicture; frame: Frame; narrow: boolean }) {
  const { left, right, top, bottom, x, y } = frame;
  const starts = monthStarts(picture.year);
  const hours = [0, 360, 720, 1080, 1440];
  const ticks = hours.map((minute) => `M${left} ${y(minute)}h5M${right} ${y(minute)}h-5`).join('');
  const monthTicks = starts.map((day) => `M${x(day)} ${bottom}v6`).join('');
  return (
    <>
      <path d={`M${left} ${top}H${right}V${bottom}H${left}Z${ticks}${monthTicks}`} fill="none" stroke={palette.ink} />
      {hours.map((minute) => (
        <Text key={minute} x={left - 7} y={y(minute) + 4} anchor="end" quiet>
          {clock(minute)}
        </Text>
      ))}
      {starts.map((day, month) =>
        narrow && month % 2 === 1 ? null : (
          <Text
            key={day}
            x={x((day + (starts[month + 1] ?? picture.patternOfDay.length)) / 2)}
            y={bottom + 18}
            anchor="middle"
            quiet
          >
            {months[month] ?? ''}
          </Text>
        ),
      )}
    </>
  );
}

function Seasons({ picture, frame, narrow }: { picture: YearPicture; frame: Frame; narrow: boolean }) {
  const { top, bottom, x } = frame;
  return picture.seasons.map(({ name, from, to }) => (
    <g key={from}>
      {from > 0 && <path d={`M${x(from)} ${top - 22}V${bottom + 6}`} stroke={palette.ink} strokeWidth="2" />}
      {x(to) - x(from) > (narrow ? 34 : 44) && (
        <Text x={(x(from) + x(to)) / 2} y={top - 8} anchor="middle" bold>
          {name}
        </Text>
      )}
    </g>
  ));
}

function Marks({ picture, frame }: { picture: YearPicture; frame: Frame }) {
  const { bottom, x } = frame;
  return (
    <>
      {picture.holidays.map((day) => (
        <path key={day} d={`M${x(day + 0.5) - 4} ${bottom + 31}l4 -6l4 6z`} fill={palette.ink} />
      ))}
      {picture.oddDays.map(({ day, hours }) => (
        <Text key={day} x={x(day + 0.5)} y={bottom + 45} anchor="middle" quiet>
          {`${hours} h`}
        </Text>
      ))}
    </>
  );
}

/** One strip per kind of day, with the clock at its borders. */
function Strips({ picture, width, top }: { picture: YearPicture; width: number; top: number }) {
  const narrow = width < narrowBelow;
  const left = narrow ? 0 : 170;
  const long = width - left - (narrow ? 8 : 60);
  const height = narrow ? 54 : 38;
  const x = (minute: number) => left + 4 + (minute / 1440) * long;
  const seasonOf = (pattern: number) => {
    const day = picture.patternOfDay.indexOf(pattern);
    return picture.seasons.find(({ from, to }) => day >= from && day < to)?.season ?? null;
  };
  return picture.strips.map(({ label, pattern }, index) => {
    const y = top + index * height;
    const bar = narrow ? y + 18 : y;
    const spans = (picture.patterns[pattern] ?? []).filter(({ window }) => fillOf(picture, window, 0) !== 'blank');
    const borders = [...new Set([0, 1440, ...spans.flatMap(({ from, to }) => [from, to])])].sort((a, b) => a - b);
    return (
      <g key={label}>
        <Text x={0} y={narrow ? y + 12 : y + 13} bold>
          {label}
        </Text>
        {spans.map(({ window, from, to }) => (
          <rect
            key={`${window}-${from}`}
            x={x(from)}
            y={bar}
            width={x(to) - x(from)}
            height={16}
            fill={fills[fillOf(picture, window, seasonOf(pattern))]}
          />
        ))}
        <rect x={x(0)} y={bar} width={long} height={16} fill="none" stroke={palette.ink} />
        {borders.map((minute) => (
          <Text
            key={minute}
            x={x(minute)}
            y={bar + 29}
            anchor={minute === 0 ? 'start' : minute === 1440 ? 'end' : 'middle'}
            quiet
          >
            {minute % 60 === 0 ? String(minute / 60).padStart(2, '0') : clock(minute)}
          </Text>
        ))}
      </g>
    );
  });
}

/** The year by day and hour, and a strip per kind of day beneath. */
export function YearChart({ picture, width, height }: { picture: YearPicture; width: number; height: number }) {
  const narrow = width < narrowBelow;
  const frame: Frame = {
    left: 44,
    right: width - 8,
    top: 30,
    bottom: narrow ? 170 : 200,
    x: (day) => 44 + (day / picture.patternOfDay.length) * (width - 52),
    y: (minute) => (narrow ? 170 : 200) - (minute / 1440) * (narrow ? 140 : 170),
  };
  return (
    <svg
      width={width}
      height={height}
      viewBox={`0 0 ${width} ${height}`}
      role="img"
      aria-label={`The year ${picture.year} by day and hour`}
    >
      <FillDefs />
      {blocksOf(picture).flatMap(({ from, to, season, spans }) =>
        spans.map((span) => (
          <rect
            key={`${from}-${span.window}-${span.from}`}
            x={frame.x(from)}
            y={frame.y(span.to)}
            width={frame.x(to) - frame.x(from)}
            height={frame.y(span.from) - frame.y(span.to)}
            fill={fills[fillOf(picture, span.window, season)]}
          />
        )),
      )}
      <Axes picture={picture} frame={frame} narrow={narrow} />
      <Seasons picture={picture} frame={frame} narrow={narrow} />
      <Marks picture={picture} frame={frame} />
      <Strips picture={picture} width={width} top={frame.bottom + 66} />
    </svg>
  );
}

/** Height of the picture for a width. */
export const yearHeight = (picture: YearPicture) => (width: number) =>
  (width < narrowBelow ? 170 : 200) + 66 + picture.strips.length * (width < narrowBelow ? 54 : 38);
