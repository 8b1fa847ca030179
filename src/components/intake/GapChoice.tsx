import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { fetchGapPreviews, fillGap } from '../../client/gap-fills';
import { isStretch, type GapPreview, type GapPreviews } from '../../schemas/gap-fill';
import type { ReadingGap } from '../../schemas/intervals';
import { Button } from '../ui/Button';
import { formatCount, formatQuantity } from '../ui/format';
import { Notice } from '../ui/Notice';
import { gapMethodNames } from './gap-words';

export interface GapChoiceProps {
  code: string;
  meterId: number;
  gap: ReadingGap;
}

/** A gap is left missing unless somebody chooses to have it estimated; what each way would add is shown first. */
export function GapChoice({ code, meterId, gap }: GapChoiceProps) {
  const [opened, setOpened] = useState(false);
  if (!isStretch(gap)) return null;
  return (
    <div className="mb-3">
      <Button kind="quiet" aria-expanded={opened} onClick={() => setOpened(!opened)}>
        {opened ? 'Leave it missing' : 'Estimate it'}
      </Button>
      {opened && <Ways code={code} meterId={meterId} gap={gap} />}
    </div>
  );
}

function Ways({ code, meterId, gap }: GapChoiceProps) {
  const { data, error } = useQuery({
    queryKey: ['gap', code, meterId, gap.fromMs, gap.toMs],
    queryFn: () => fetchGapPreviews(code, { meterId, fromMs: gap.fromMs, toMs: gap.toMs }),
  });
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  if (error) return <Notice kind="fault" title={error.message} />;
  if (!data) return <p role="status">Looking at the readings around it.</p>;
  const choose = async (way: GapPreview) => {
    setBusy(true);
    setFault(null);
    try {
      await fillGap(code, { meterId, fromMs: gap.fromMs, toMs: gap.toMs, method: way.method });
      window.location.reload();
    } catch (refusal) {
      setBusy(false);
      setFault(refusal instanceof Error ? refusal.message : 'This failed in the browser. Load the page again.');
    }
  };
  return (
    <div className="gap-ways">
      {data.ways.map((way) => (
        <div key={way.method}>
          <b>{gapMethodNames[way.method]}</b>
          <p>{wayInWords(way)}</p>
          {way.intervals > 0 && (
            <>
              <DayPicture previews={data} way={way} />
              <Button kind="secondary" size="small" busy={busy} onClick={() => void choose(way)}>
                Estimate so
              </Button>
            </>
          )}
        </div>
      ))}
      <p className="quiet">Estimated readings stay marked wherever they go, and can be taken back.</p>
      {fault && <Notice kind="fault" title={fault} />}
    </div>
  );
}

function wayInWords({ method, intervals, left, kwh, highestKw }: GapPreview): string {
  if (intervals === 0) {
    return method === 'linear'
      ? 'Not possible: it is drawn over at most two hours, between measured readings.'
      : 'Not possible: too few measured readings of that weekday within four weeks.';
  }
  const adds = kwh === null ? '' : ` Adds ${formatQuantity(kwh, 'kWh', { upTo: 1 })}.`;
  const highest = highestKw === null ? '' : ` Highest ${formatQuantity(highestKw, 'kW', { upTo: 1 })}.`;
  return `${formatCount(intervals, 'reading')}.${adds}${highest}${left > 0 ? ` ${formatCount(left, 'reading')} stay missing.` : ''}`;
}

/** The days of the gap: measured in ink, estimated dashed in ochre. */
function DayPicture({ previews, way }: { previews: GapPreviews; way: GapPreview }) {
  const { measuredKw } = previews;
  const count = measuredKw.length;
  const top = Math.max(1, ...measuredKw.map((one) => one ?? 0), ...way.kw.map((one) => one ?? 0));
  const line = (values: (number | null)[]) =>
    values
      .map((value, at) =>
        value === null ? '' : `${values[at - 1] == null ? 'M' : 'L'}${at} ${(60 - (56 * value) / top).toFixed(1)}h1`,
      )
      .join('');
  return (
    <svg
      className="gap-picture"
      viewBox={`0 0 ${count} 62`}
      preserveAspectRatio="none"
      role="img"
      aria-label={`Mean kW of the day: measured, and ${formatCount(way.intervals, 'reading')} estimated up to ${formatQuantity(way.highestKw ?? 0, 'kW', { upTo: 1 })}`}
    >
      <path
        d={line(measuredKw)}
        fill="none"
        stroke="var(--color-ink)"
        strokeWidth="1.25"
        vectorEffect="non-scaling-stroke"
      />
      <path
        d={line(way.kw)}
        fill="none"
        stroke="var(--color-ochre)"
        strokeWidth="2"
        strokeDasharray="3 2"
        vectorEffect="non-scaling-stroke"
      />
    </svg>
  );
}
