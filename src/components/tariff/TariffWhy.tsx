import { useQuery } from '@tanstack/react-query';
import type { RefObject } from 'react';
import { askWhy } from '../../client/tariff';
import type { WhyView } from '../../schemas/tariff-why';
import { DayFigure } from '../charts/DayChart';
import { Button } from '../ui/Button';
import { formatLongDate, formatNumber, formatQuantity } from '../ui/format';
import { Notice } from '../ui/Notice';
import { WhyPanel } from '../ui/WhyPanel';
import { LookBackFigure } from './LookBackChart';

export interface TariffWhyProps {
  code: string;
  billId: number;
  figure: string;
  origin: RefObject<HTMLElement | null>;
  onClose: () => void;
  onOpen: (figure: string) => void;
  /** The figure one came from, to go back to it. */
  back: string | null;
}

function Pictures({ why, fileName }: { why: WhyView; fileName: string }) {
  const { day, lookBack } = why;
  return (
    <>
      {lookBack && <LookBackFigure picture={lookBack} fileName={`${fileName}-look-back`} />}
      {day && (
        <DayFigure
          finding={`${day.quantity}: ${formatQuantity(day.value, day.unit, { upTo: 2 })} on ${formatLongDate(day.date)}.`}
          reading={
            day.peak
              ? `Ink: kW. Copper: kvar lagging. Power factor then ${formatNumber(day.peak.powerFactor, { decimals: 3 })}.`
              : 'Ink: kW. Copper: kvar lagging.'
          }
          fileName={`${fileName}-day`}
          dayName={formatLongDate(day.date)}
          stepMinutes={day.stepMinutes}
          points={day.points}
          peak={day.peak}
        />
      )}
    </>
  );
}

function Next({ why, onOpen, back }: { why: WhyView } & Pick<TariffWhyProps, 'onOpen' | 'back'>) {
  if (why.next.length === 0 && back === null) return null;
  return (
    <p className="why-next">
      {why.next.length > 0 && <span className="quiet">Ask on: </span>}
      {why.next.map(({ figure, label }) => (
        <Button key={figure} kind="quiet" onClick={() => onOpen(figure)}>
          {label}
        </Button>
      ))}
      {back !== null && (
        <Button kind="quiet" onClick={() => onOpen(back)}>
          Back
        </Button>
      )}
    </p>
  );
}

/** The reasoning behind one figure, asked from the server when it is opened; what it rests on opens in turn. */
export function TariffWhy({ code, billId, figure, origin, onClose, onOpen, back }: TariffWhyProps) {
  const { data: why, error } = useQuery({
    queryKey: ['tariff-why', code, billId, figure],
    queryFn: () => askWhy(code, billId, figure),
  });
  if (error) return <Notice kind="fault" title="The reasoning cannot be shown.">{` ${error.message}`}</Notice>;
  if (!why) return <p className="hint p-3">Working it out ...</p>;
  const hasPicture = why.day !== null || why.lookBack !== null || why.next.length > 0 || back !== null;
  return (
    <WhyPanel
      content={why}
      origin={origin}
      onClose={onClose}
      picture={
        hasPicture && (
          <div className="grid gap-4">
            <Next why={why} onOpen={onOpen} back={back} />
            <Pictures why={why} fileName={`${code}-${figure.replace(':', '-')}`} />
          </div>
        )
      }
    />
  );
}
