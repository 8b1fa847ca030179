import type { PlanMoney } from '../../schemas/assumptions';
import { AssumptionField } from '../ui/AssumptionField';
import { assumptionFigure, assumptionUnit, assumptionWords } from '../ui/assumption-words';
import { Button } from '../ui/Button';
import { formatCount, formatMajor, formatPayback } from '../ui/format';
import { ResultSums, type SumRow } from '../ui/ResultSums';
import { fixedRows, movableOf, stepOf } from './edition-money';
import { ownSentence, type OwnFigures } from './own-figures';

export interface OwnFiguresPanelProps {
  money: PlanMoney;
  currency: string;
  editionNumber: number;
  paybackYears: number | null;
  /** Present value of the edition. */
  npv: number;
  /** Whom to ask about what is fixed. */
  askName: string;
  own: OwnFigures;
  moved: boolean;
}

/** The edition's assumptions where none may be moved. */
function FixedAssumptions({ money, currency, editionNumber, askName }: OwnFiguresPanelProps) {
  return (
    <aside className="result" aria-label="What it is reckoned with">
      <h2 className="section-title">What edition {editionNumber} reckons with</h2>
      <ResultSums rows={fixedRows(money, currency)} />
      <p className="section-lead">{`To see it with other figures, ask ${askName}.`}</p>
    </aside>
  );
}

function Outcome({ own, moved, currency, editionNumber, paybackYears, npv }: OwnFiguresPanelProps) {
  const { appraisal, horizonYears, spread } = own;
  const mine = (label: string, value: string): SumRow[] => (moved ? [{ label, value, kind: 'strong' }] : []);
  const whole = (amount: number) => formatMajor(amount, currency, { whole: true });
  return (
    <>
      <p className="own-sentence" aria-live="polite">
        {ownSentence({ moved, editionNumber, editionYears: paybackYears, appraisal, horizonYears, spread })}
      </p>
      <ResultSums
        rows={[
          { label: `Pays back, edition ${editionNumber}`, value: formatPayback(paybackYears) },
          ...mine('With your figures', formatPayback(appraisal.simplePaybackYears)),
          { label: `Worth today, edition ${editionNumber}`, value: whole(npv) },
          ...mine(`With your figures, ${formatCount(horizonYears, 'year')}`, whole(appraisal.npv)),
        ]}
      />
    </>
  );
}

/** The assumptions the consultant lets the reader move, each in its range, and what they come to. */
export function OwnFiguresPanel(props: OwnFiguresPanelProps) {
  const { money, currency, editionNumber, own, moved } = props;
  const movable = movableOf(money);
  if (movable.length === 0) return <FixedAssumptions {...props} />;
  const fixed = fixedRows(money, currency);
  return (
    <aside className="result" aria-label="Try your own figures">
      <h2 className="section-title">Try your own figures</h2>
      <p className="section-lead">
        {`These are your own assumptions; edition ${editionNumber}, the report, stays as it is. Nothing is stored.`}
      </p>
      {movable.map((one) => (
        <AssumptionField
          key={one.key}
          label={assumptionWords[one.key].asked}
          unit={assumptionUnit(one.key, currency)}
          figure={(value) => assumptionFigure(one.key, value)}
          min={one.low}
          max={one.high}
          step={stepOf(one)}
          value={own.own[one.key] ?? one.own}
          editionValue={one.own}
          editionName={`edition ${editionNumber}`}
          onChange={(value) => own.move({ [one.key]: value })}
        />
      ))}
      <Outcome {...props} />
      {moved && (
        <Button kind="quiet" onClick={own.reset}>
          Back to edition {editionNumber}
        </Button>
      )}
      {fixed.length > 0 && (
        <details className="folded">
          <summary>What else it reckons with</summary>
          <ResultSums rows={fixed} />
        </details>
      )}
    </aside>
  );
}
