import type { IntakeView } from '../../schemas/intake';
import type { IntervalsOverlap } from '../../schemas/overlap';
import { formatCount, formatDate, formatNumber } from '../ui/format';
import { Notice } from '../ui/Notice';
import type { IntakeActions } from './IntakeSheet';
import { KeepButtons } from './KeepButtons';
import { IntervalsBesideTable } from './IntervalsBesideTable';

export interface KeepChoiceProps {
  intake: IntakeView;
  overlap: IntervalsOverlap;
  /** `35,008 readings`. */
  what: string;
  actions: IntakeActions;
}

/** Where readings are kept already: both side by side, and which of them stand. */
export function KeepChoice({ intake, overlap, what, actions }: KeepChoiceProps) {
  const { keepNewRefused, total } = overlap;
  const timeZone = intake.engagement.siteTimeZone;
  return (
    <div className="stacked mt-4">
      <p className="max-w-[60em]">{meeting(overlap, timeZone)}</p>
      <IntervalsBesideTable overlap={overlap} timeZone={timeZone} />
      <ul className="max-w-[60em]">
        <li>
          <b>Keep {what}:</b> where both have a reading that of this file stands. The kept ones lie under it, in the
          drawer, and come back when this file is undone.
        </li>
        <li>
          <b>Keep without what is kept already:</b> this file fills only what is not there,{' '}
          {formatCount(total?.onlyComes ?? 0, 'reading')}.
        </li>
        <li>
          <b>Give it up:</b> nothing changes.
        </li>
      </ul>
      {keepNewRefused && <Notice title="They cannot go above the kept ones">{keepNewRefused}</Notice>}
      <KeepButtons actions={actions} what={what} above={!keepNewRefused} around />
    </div>
  );
}

/** What is kept already, from where, and whether it agrees. */
function meeting({ files, span, total }: IntervalsOverlap, timeZone: string): string {
  const names = files.map(({ fileName }) => fileName ?? 'a file of another engagement').join(' and ');
  const days = span ? `, ${formatDate(span.fromMs, timeZone)} to ${formatDate(span.toMs - 1, timeZone)}` : '';
  const inCommon = total?.inCommon ?? 0;
  const differing = inCommon - (total?.equal ?? 0);
  const agree =
    differing === 0
      ? 'All of them agree.'
      : `${differing === inCommon ? 'All' : formatNumber(differing)} of them differ.`;
  return `${formatCount(inCommon, 'reading')} of it ${inCommon === 1 ? 'is' : 'are'} kept already, from ${names}${days}. ${agree}`;
}
