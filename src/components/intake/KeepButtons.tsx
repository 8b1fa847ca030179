import { Button } from '../ui/Button';
import type { IntakeActions } from './IntakeSheet';

export interface KeepButtonsProps {
  actions: IntakeActions;
  /** What is kept: "2,976 readings". */
  what: string;
  /** Whether it may stand above what is kept, and whether it may fill around it. */
  above: boolean;
  around: boolean;
}

/** The ways out where a file overlaps what is kept. */
export function KeepButtons({ actions, what, above, around }: KeepButtonsProps) {
  return (
    <div className="actions">
      {above && (
        <Button busy={actions.busy} onClick={() => actions.keep('keep-new')}>
          Keep {what}
        </Button>
      )}
      {around && (
        <Button kind="secondary" busy={actions.busy} onClick={() => actions.keep('keep-old')}>
          Keep without what is kept already
        </Button>
      )}
      <Button kind="quiet" busy={actions.busy} onClick={actions.giveUp}>
        Give it up
      </Button>
    </div>
  );
}
