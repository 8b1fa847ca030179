import { useId } from 'react';
import type { Palette } from './palette';

export type Hatch = 'saving' | 'limit' | 'pullOut' | 'neutral';

/** Ids of the hatchings of one chart; unique on the page, so that two charts do not share a vanished one. */
export function useHatch(): Record<Hatch, string> {
  const id = useId().replace(/[^a-zA-Z0-9]/g, '');
  return { saving: `hatch-s-${id}`, limit: `hatch-l-${id}`, pullOut: `hatch-p-${id}`, neutral: `hatch-n-${id}` };
}

/** Hatchings: a saving in verdigris, ground beyond a limit in madder, beyond pull-out in ochre, neutral in rule-2. */
export function HatchDefs({ ids, palette }: { ids: Record<Hatch, string>; palette: Palette }) {
  const hatches: { kind: Hatch; stroke: string; width: number; opacity: number; turn: number; size: number }[] = [
    { kind: 'saving', stroke: palette.verdigris, width: 1.6, opacity: 1, turn: 45, size: 5 },
    { kind: 'limit', stroke: palette.madder, width: 1, opacity: 0.55, turn: 45, size: 7 },
    { kind: 'pullOut', stroke: palette.ochre, width: 1, opacity: 0.8, turn: -45, size: 7 },
    { kind: 'neutral', stroke: palette.rule2, width: 1.2, opacity: 1, turn: 45, size: 5 },
  ];
  return (
    <defs>
      {hatches.map((hatch) => (
        <pattern
          key={hatch.kind}
          id={ids[hatch.kind]}
          width={hatch.size}
          height={hatch.size}
          patternUnits="userSpaceOnUse"
          patternTransform={`rotate(${hatch.turn})`}
        >
          <path
            d={`M0 0V${hatch.size}`}
            stroke={hatch.stroke}
            strokeWidth={hatch.width}
            strokeOpacity={hatch.opacity}
            fill="none"
          />
        </pattern>
      ))}
    </defs>
  );
}
