import { useId } from 'react';
import type { Guess } from '../../core/intake';
import { guessKey } from '../../schemas/intake';
import { formatCount } from '../ui/format';
import { decisionOf, sheetDecision, type Decision } from './decisions';
import { Choice, Heads, sentence, Tests } from './match-parts';
import type { MatchStepProps } from './MatchStep';
import { TimeZoneField } from './TimeZoneField';

/** Decisions about the whole file: dates, clock, decimal mark, layout, zone. */
export function DecisionTable({ intake, preview, actions }: MatchStepProps) {
  const sheet = sheetDecision(preview);
  return (
    <div className="ledger-scroll" role="region" aria-label="Decisions about the whole file" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack evidence">
        <Heads heads={['Whole file', 'Taken as', 'Evidence', 'Tests met']} />
        <tbody>
          {preview.guesses.map((guess) => (
            <GuessRow key={guess.key} guess={guess} intake={intake} preview={preview} actions={actions} />
          ))}
          {sheet && (
            <tr>
              <DecisionCells decision={sheet} intake={intake} preview={preview} actions={actions} />
              <td className="left wrap" data-name="Evidence">
                {formatCount(sheet.options.length, 'sheet')} in the workbook
              </td>
              <td />
            </tr>
          )}
          {(preview.kind === 'intervals' || preview.format === 'espi') && (
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
      <td className="left wrap" data-name="Evidence">
        {sentence(guess.why)}
      </td>
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
      <td className="left" data-name="Taken as">
        {decision.options.length > 1 ? (
          <Choice
            id={id}
            className="decision-select"
            value={decision.value}
            options={decision.options}
            disabled={actions.busy || intake.state === 'kept' || intake.state === 'given-up'}
            onChoose={(value) =>
              actions.match(decision.apply(preview.columnMap, value), { confirm: confirm ? [confirm] : [] })
            }
          />
        ) : (
          <output id={id}>{only?.label}</output>
        )}
      </td>
    </>
  );
}
