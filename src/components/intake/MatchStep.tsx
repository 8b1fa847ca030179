import { columnKey, guessKey, toConfirm, type IntakePreview, type IntakeView } from '../../schemas/intake';
import { Button } from '../ui/Button';
import { formatCount, formatDate, formatSpelled } from '../ui/format';
import { Notice } from '../ui/Notice';
import type { IntakeActions } from './IntakeSheet';
import { foldProblems } from './intake-words';
import { ColumnTable } from './MatchColumns';
import { DecisionTable } from './MatchDecisions';
import { RememberMap } from './RememberMap';
import { SheetPart } from './Sheet';

export interface MatchStepProps {
  intake: IntakeView;
  preview: IntakePreview;
  actions: IntakeActions;
}

/** What each column is taken for and why; any of it can be corrected and the file is read again. */
export function MatchStep({ intake, preview, actions }: MatchStepProps) {
  const kept = intake.state === 'kept';
  const left = toConfirm(preview, intake.confirmed);
  return (
    <SheetPart
      id="match"
      number="2"
      title="Match"
      lead={
        <span role="status">
          {actions.busy
            ? 'The file is being read again.'
            : 'What each column is taken for, and why. Change any of them; the file is read again at once.'}
        </span>
      }
      foldedTo={kept ? `${formatCount(preview.columns.length, 'column')}, all confirmed.` : undefined}
      reference={<MapWords intake={intake} actions={actions} />}
      result={
        kept ? null : (
          <>
            {left.count > 0 && <ToConfirm left={left} actions={actions} />}
            <RememberMap intake={intake} preview={preview} actions={actions} />
          </>
        )
      }
    >
      <div className="stacked" aria-busy={actions.busy}>
        {preview.problems.length > 0 && (
          <Notice
            kind="fault"
            title="The file cannot be read as it is matched."
            problems={foldProblems(preview.problems)}
          />
        )}
        {preview.columns.length > 0 && <ColumnTable intake={intake} preview={preview} actions={actions} />}
        <DecisionTable intake={intake} preview={preview} actions={actions} />
      </div>
    </SheetPart>
  );
}

function MapWords({ intake, actions }: { intake: IntakeView; actions: IntakeActions }) {
  const { readWith, offered } = intake;
  if (readWith)
    return (
      <p>{`Read with the column map “${readWith.name}” of ${formatDate(readWith.at, intake.engagement.siteTimeZone)}.`}</p>
    );
  if (offered.length === 0) return <p>No remembered column map fits this file.</p>;
  return (
    <>
      {offered.slice(0, 3).map((map) => (
        <p key={map.id}>
          {`The column map “${map.name}” is of a file of this shape. `}
          <Button kind="quiet" busy={actions.busy} onClick={() => actions.useMap(map.id)}>
            Read with it
          </Button>
        </p>
      ))}
    </>
  );
}

function ToConfirm({ left, actions }: { left: ReturnType<typeof toConfirm>; actions: IntakeActions }) {
  const names = [
    ...left.columns.map((column) => `“${column.name || column.letter}”`),
    ...left.guesses.map((guess) => guess.takenAs),
  ];
  return (
    <div>
      <h3>{`${formatSpelled(left.count).replace(/^./, (first) => first.toUpperCase())} to confirm`}</h3>
      <p>{`${names.join(', ')}: the file alone does not prove it. Look at the evidence, correct it or give your word.`}</p>
      {left.count > 1 && (
        <p>
          <Button
            kind="quiet"
            busy={actions.busy}
            onClick={() => actions.confirm([...left.columns.map(columnKey), ...left.guesses.map(guessKey)])}
          >
            Confirm all {formatSpelled(left.count)}
          </Button>
        </p>
      )}
    </div>
  );
}
