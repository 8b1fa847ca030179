import { useId } from 'react';
import type { ColumnEvidence, Guess } from '../../core/intake';
import { columnKey, guessKey, toConfirm, type IntakePreview, type IntakeView } from '../../schemas/intake';
import { Button } from '../ui/Button';
import { formatCount, formatDate, formatSpelled } from '../ui/format';
import { Mark } from '../ui/Mark';
import { Notice } from '../ui/Notice';
import { decisionOf, sheetDecision, type Decision } from './decisions';
import type { IntakeActions } from './IntakeSheet';
import { roleOptions, roleValue, unitOptions, unitValue, withRole, withUnit } from './roles';
import { SheetPart } from './Sheet';
import { RememberMap } from './RememberMap';
import { TimeZoneField } from './TimeZoneField';

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
      lead="What each column is taken for, and why. Change any of them; the file is read again at once."
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
          <Notice kind="fault" title="The file cannot be read as it is matched." problems={preview.problems} />
        )}
        <ColumnTable intake={intake} preview={preview} actions={actions} />
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

function Heads({ heads }: { heads: string[] }) {
  return (
    <thead>
      <tr>
        {heads.map((head) => (
          <th key={head} scope="col" className="left">
            {head}
          </th>
        ))}
      </tr>
    </thead>
  );
}

interface TestsProps {
  met: number;
  total: number;
  asks: boolean;
  name: string;
  onConfirm: (() => void) | null;
}

function Tests({ met, total, asks, name, onConfirm }: TestsProps) {
  return (
    <td className="left unbroken">
      <Mark kind={asks ? 'hollow' : 'filled'} word={`${met} of ${total}`} tone={asks ? 'caution' : 'ink'} />
      {asks && onConfirm && (
        <>
          {' '}
          <Button kind="quiet" onClick={onConfirm} aria-label={`Confirm ${name}`}>
            Confirm
          </Button>
        </>
      )}
    </td>
  );
}

function ColumnTable({ intake, preview, actions }: MatchStepProps) {
  return (
    <div className="ledger-scroll" role="region" aria-label="Columns of the file" tabIndex={0}>
      <table className="ledger ledger-roomy evidence">
        <Heads heads={['Column', 'Values', 'Taken as', 'Unit', 'Evidence', 'Tests met']} />
        <tbody>
          {preview.columns.map((column) => (
            <ColumnRow key={column.index} column={column} intake={intake} preview={preview} actions={actions} />
          ))}
        </tbody>
      </table>
    </div>
  );
}

function ColumnRow({ column, intake, preview, actions }: MatchStepProps & { column: ColumnEvidence }) {
  const key = columnKey(column);
  const asks = !column.sure && !intake.confirmed.includes(key);
  const fixed = intake.state === 'kept' || intake.state === 'given-up';
  const name = column.name || `Column ${column.letter}`;
  const change = (edit: (use: NonNullable<typeof preview.columnMap.columns>[number]) => typeof use) => {
    const last = column.index + column.span - 1;
    const columns = (preview.columnMap.columns ?? []).map((use) =>
      use.index >= column.index && use.index <= last ? edit(use) : use,
    );
    actions.match({ ...preview.columnMap, columns }, { confirm: [key] });
  };
  const units = unitOptions(column);
  return (
    <tr className={asks ? 'asks' : undefined}>
      <th scope="row" className="left wrap strong">
        {column.span > 1 ? `${name} and ${column.span - 1} more` : name}
      </th>
      <td className="left quiet wrap">{column.values}</td>
      <td className="left">
        <select
          className="input input-small role-select"
          aria-label={`${name}, taken as`}
          value={roleValue(column)}
          disabled={fixed || actions.busy}
          onChange={(event) => change((use) => withRole(use, event.target.value))}
        >
          {roleOptions(preview.kind, column).map((option) => (
            <option key={option.value} value={option.value}>
              {option.label}
            </option>
          ))}
        </select>
      </td>
      <td className="left">
        {units.length > 0 ? (
          <select
            className="input input-small unit-select"
            aria-label={`${name}, unit`}
            value={unitValue(column)}
            disabled={fixed || actions.busy}
            onChange={(event) => change((use) => withUnit(use, event.target.value))}
          >
            {units.map((option) => (
              <option key={option.value} value={option.value}>
                {option.label}
              </option>
            ))}
          </select>
        ) : (
          column.unit
        )}
      </td>
      <td className="left wrap">{column.why}</td>
      <Tests
        met={column.testsMet}
        total={column.testsTotal}
        asks={asks}
        name={name}
        onConfirm={fixed ? null : () => actions.confirm([key])}
      />
    </tr>
  );
}

/** Decisions about the whole file: dates, clock, decimal mark, layout, zone. */
function DecisionTable({ intake, preview, actions }: MatchStepProps) {
  const sheet = sheetDecision(preview);
  return (
    <div className="ledger-scroll" role="region" aria-label="Decisions about the whole file" tabIndex={0}>
      <table className="ledger ledger-roomy evidence">
        <Heads heads={['Whole file', 'Taken as', 'Evidence', 'Tests met']} />
        <tbody>
          {preview.guesses.map((guess) => (
            <GuessRow key={guess.key} guess={guess} intake={intake} preview={preview} actions={actions} />
          ))}
          {sheet && (
            <tr>
              <DecisionCells decision={sheet} intake={intake} preview={preview} actions={actions} />
              <td className="left wrap">{formatCount(sheet.options.length, 'sheet')} in the workbook</td>
              <td />
            </tr>
          )}
          {preview.kind === 'intervals' && (
            <TimeZoneField
              key={intake.timeZone}
              intake={intake}
              onChange={(timeZone) => actions.match(preview.columnMap, { timeZone })}
              busy={actions.busy}
            />
          )}
        </tbody>
      </table>
    </div>
  );
}

function GuessRow({ guess, intake, preview, actions }: MatchStepProps & { guess: Guess }) {
  const key = guessKey(guess);
  const asks = !guess.sure && !intake.confirmed.includes(key);
  const decision = decisionOf(guess, preview);
  return (
    <tr className={asks ? 'asks' : undefined}>
      <DecisionCells decision={decision} confirm={key} intake={intake} preview={preview} actions={actions} />
      <td className="left wrap">{guess.why}</td>
      <Tests
        met={guess.testsMet}
        total={guess.testsTotal}
        asks={asks}
        name={decision.label}
        onConfirm={intake.state === 'kept' ? null : () => actions.confirm([key])}
      />
    </tr>
  );
}

function DecisionCells(props: MatchStepProps & { decision: Decision; confirm?: string }) {
  const { decision, confirm, intake, preview, actions } = props;
  const id = useId();
  const [only] = decision.options;
  return (
    <>
      <th scope="row" className="left strong">
        <label htmlFor={id}>{decision.label}</label>
      </th>
      <td className="left">
        {decision.options.length > 1 ? (
          <select
            id={id}
            className="input input-small decision-select"
            value={decision.value}
            disabled={actions.busy || intake.state === 'kept' || intake.state === 'given-up'}
            onChange={(event) =>
              actions.match(decision.apply(preview.columnMap, event.target.value), {
                confirm: confirm ? [confirm] : [],
              })
            }
          >
            {decision.options.map((option) => (
              <option key={option.value} value={option.value}>
                {option.label}
              </option>
            ))}
          </select>
        ) : (
          <output id={id}>{only?.label}</output>
        )}
      </td>
    </>
  );
}
