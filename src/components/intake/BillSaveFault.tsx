import type { ApiError } from '../../client/api';
import type { BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { formatAmount, formatCount } from '../ui/format';
import { Notice } from '../ui/Notice';

/** What the server said; of two changes of one bill the person may load theirs or save over it knowingly. */
export function BillSaveFault(props: {
  fault: ApiError;
  currency: string;
  onTheirs: (theirs: BillView) => void;
  onMine: (theirs: BillView) => void;
}) {
  const { fault, currency, onTheirs, onMine } = props;
  const theirs = fault.code === 'stale' ? (fault.details.theirs as BillView | undefined) : undefined;
  const fields = Object.values(fault.fields).flat();
  return (
    <div className="mt-4">
      <Notice kind="fault" title={fault.message} problems={fields.map((message) => ({ message }))}>
        {theirs && (
          <span className="actions">
            <span>
              Theirs: {formatCount(theirs.lines.length, 'line')}, lines {formatAmount(theirs.linesMinor, currency)},
              total {theirs.totalMinor === null ? 'none' : formatAmount(theirs.totalMinor, currency)}.
            </span>
            <Button kind="quiet" onClick={() => onTheirs(theirs)}>
              Load theirs
            </Button>
            <Button kind="quiet" onClick={() => onMine(theirs)}>
              Save mine over it
            </Button>
          </span>
        )}
      </Notice>
    </div>
  );
}
