import { useId, useRef, useState, type KeyboardEvent } from 'react';
import type { CarpetChannel, CarpetData } from './carpet';
import { CarpetFigure } from './CarpetChart';
import type { FigureText } from './ChartFigure';

const names: Record<CarpetChannel, string> = { kw: 'kW', kvar: 'kvar', pf: 'Power factor' };
const readings: Record<CarpetChannel, string> = {
  kw: 'Mean kW of each interval. The stronger the ink, the higher.',
  kvar: 'Mean kvar of each interval: lagging in copper, leading in verdigris and hatched. The stronger, the more.',
  pf: 'Power factor of each interval: lagging in copper, leading in verdigris and hatched. The stronger, the poorer. In the table leading stands below nought.',
};

export interface CarpetTabsProps extends Omit<FigureText, 'reading'> {
  /** One to three pictures of the same days. */
  carpets: CarpetData[];
  /** Added to how the picture is read. */
  more?: string;
}

/** The carpet as kW, kvar or power factor: arrows go from one to the next. */
export function CarpetTabs({ carpets, finding, fileName, more = '' }: CarpetTabsProps) {
  const [at, setAt] = useState(0);
  const tabs = useRef<HTMLDivElement>(null);
  const id = useId();
  const carpet = carpets[at] ?? carpets[0];
  if (!carpet) return null;
  const channel = carpet.channel ?? 'kw';
  const handleKey = (event: KeyboardEvent) => {
    const by = { ArrowRight: 1, ArrowLeft: -1 }[event.key];
    const to = event.key === 'Home' ? 0 : event.key === 'End' ? carpets.length - 1 : by && at + by;
    if (to === undefined) return;
    event.preventDefault();
    const next = (to + carpets.length) % carpets.length;
    setAt(next);
    tabs.current?.querySelectorAll<HTMLElement>('[role=tab]')[next]?.focus();
  };
  return (
    <div>
      {carpets.length > 1 && (
        <div
          className="carpet-tabs"
          role="tablist"
          aria-label="What the picture shows"
          ref={tabs}
          onKeyDown={handleKey}
        >
          {carpets.map((one, index) => (
            <button
              key={one.unit}
              type="button"
              role="tab"
              id={`${id}-${index}`}
              aria-selected={index === at}
              aria-controls={`${id}-panel`}
              tabIndex={index === at ? 0 : -1}
              onClick={() => setAt(index)}
            >
              {names[one.channel ?? 'kw']}
            </button>
          ))}
        </div>
      )}
      <div id={`${id}-panel`} role={carpets.length > 1 ? 'tabpanel' : undefined} aria-labelledby={`${id}-${at}`}>
        <CarpetFigure
          key={channel}
          {...carpet}
          finding={finding}
          reading={`${readings[channel]}${more}`}
          fileName={channel === 'kw' ? fileName : `${fileName}-${channel}`}
        />
      </div>
    </div>
  );
}
