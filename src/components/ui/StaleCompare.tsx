import { Button } from './Button';
import { LedgerTable } from './LedgerTable';

/** One differing entry, as the two people wrote it. */
export interface StaleDifference {
  label: string;
  mine: string;
  theirs: string;
}

export interface StaleCompareProps {
  /** What was changed: "Motor M-1". */
  what: string;
  differences: StaleDifference[];
  onLoadTheirs: () => void;
  onSaveMine: () => void;
  busy?: boolean;
}

/** Two people changed the same thing: both values side by side, and the choice between them. */
export function StaleCompare({ what, differences, onLoadTheirs, onSaveMine, busy }: StaleCompareProps) {
  return (
    <div className="notice notice-fault" role="alert">
      <b>{what} was saved by somebody else while you had it open.</b>
      <span>
        {differences.length > 0
          ? 'These entries differ. Nothing of yours is lost; choose which to keep.'
          : 'Both say the same. Save again to confirm, or load what is stored.'}
      </span>
      {differences.length > 0 && (
        <div className="w-full max-w-[640px]">
          <LedgerTable
            label={`Differences in ${what}`}
            columns={[
              { key: 'entry', head: 'Entry' },
              { key: 'mine', head: 'Yours', align: 'right', strong: true, wrap: true },
              { key: 'theirs', head: 'Stored', align: 'right', wrap: true },
            ]}
            rows={differences.map(({ label, mine, theirs }) => ({ id: label, cells: { entry: label, mine, theirs } }))}
          />
        </div>
      )}
      <div className="actions actions-inline w-full">
        <Button kind="secondary" onClick={onLoadTheirs}>
          Load what is stored
        </Button>
        <Button kind="secondary" onClick={onSaveMine} busy={busy}>
          Save mine over it
        </Button>
      </div>
    </div>
  );
}
