import { Button } from './Button';
import { formatNumber, formatPercent, formatTimeLeft } from './format';

export interface ProgressProps {
  /** What runs: "Reading ylv-2026-q3.csv". */
  title: string;
  done: number;
  /** Unknown size: leave out; the bar is then not drawn. */
  total?: number;
  /** What is counted: "rows", "settings". */
  units: string;
  secondsLeft?: number | null;
  /** Whether it goes on when one leaves the page. */
  goesOn?: boolean;
  onStop?: () => void;
}

/** An honest measure of long work: share, counted units, time left, Stop. */
export function Progress({ title, done, total, units, secondsLeft, goesOn = false, onStop }: ProgressProps) {
  const share = total ? Math.min(1, done / total) : null;
  const words = [
    total ? `${formatNumber(done)} of ${formatNumber(total)} ${units}` : `${formatNumber(done)} ${units}`,
    secondsLeft != null && `${formatTimeLeft(secondsLeft)} left`,
    goesOn && 'goes on when you leave',
  ].filter(Boolean);
  return (
    <div className="progress">
      <div className="progress-line">
        <span>{title}</span>
        {share !== null && <b>{formatPercent(Math.floor(share * 100) / 100)}</b>}
      </div>
      {share !== null && (
        <div
          className="progress-track"
          role="progressbar"
          aria-label={title}
          aria-valuemin={0}
          aria-valuemax={total}
          aria-valuenow={done}
        >
          <span style={{ width: `${share * 100}%` }} />
        </div>
      )}
      <div className="progress-line hint">
        <span>{words.join(', ')}</span>
        {onStop && (
          <Button kind="quiet" onClick={onStop}>
            Stop
          </Button>
        )}
      </div>
    </div>
  );
}
