import { useMemo, useState } from 'react';
import { appraise, cashFlow } from '../../core/economics';
import type { CashFlowMonth, PlanEconomics } from '../../schemas/plan';
import type { PaybackData } from '../charts/payback';
import { PaybackFigure } from '../charts/PaybackChart';
import { paidBackSentence } from '../report/words';
import { AssumptionField } from '../ui/AssumptionField';
import { Button } from '../ui/Button';
import { formatCount, formatMajor, formatNumber, formatPayback } from '../ui/format';
import { ResultSums } from '../ui/ResultSums';

export interface ClientPaybackProps {
  currency: string;
  editionNumber: number;
  capitalCost: number;
  saving: number;
  yearlyUpkeep: number;
  economics: PlanEconomics;
  cashFlow: CashFlowMonth[];
  paybackYears: number | null;
  paybackRange: PaybackData['paybackRange'];
}

interface Figures {
  escalationPercent: number;
  runsPercent: number;
  capitalCost: number;
  discountPercent: number;
}

/** The project under the reader's figures: the saving follows how much the plant runs and how prices change. */
function projectOf({ saving, yearlyUpkeep, economics }: ClientPaybackProps, figures: Figures) {
  const growth = 1 + figures.escalationPercent / 100;
  const years = Array.from({ length: economics.horizonYears }, (_, index) => index);
  return {
    capitalCost: figures.capitalCost,
    yearlySaving: years.map((year) => saving * (figures.runsPercent / 100) * growth ** year),
    yearlyUpkeep: years.map(() => yearlyUpkeep),
    discountRate: figures.discountPercent / 100,
  };
}

/** Years until the work is paid for; never where upkeep eats what is saved, however little the work costs. */
const comesBack = ({ saving, yearlyUpkeep }: ClientPaybackProps, years: number | null, runs: number) =>
  saving * runs - yearlyUpkeep > 0 ? years : null;

/** Round end of a slider for the cost of work. */
const roundUp = (amount: number) => Math.ceil(amount / 1000) * 1000;

/** The payback picture with the client's own figures beside it; worked out here in the browser. */
export function ClientPayback(props: ClientPaybackProps) {
  const { currency, editionNumber, economics } = props;
  const edition: Figures = {
    escalationPercent: economics.escalationPercent,
    runsPercent: 100,
    capitalCost: props.capitalCost,
    discountPercent: economics.discountPercent,
  };
  const [figures, setFigures] = useState(edition);
  const moved = (Object.keys(edition) as (keyof Figures)[]).some((key) => figures[key] !== edition[key]);
  const yours = useMemo(() => {
    const project = projectOf(props, figures);
    return { appraisal: appraise(project), months: cashFlow(project).months };
  }, [props, figures]);
  const paybackYears = comesBack(props, props.paybackYears, 1);
  const yourYears = comesBack(props, yours.appraisal.simplePaybackYears, figures.runsPercent / 100);
  const shownYears = Math.min(economics.horizonYears, Math.max(3, Math.ceil((paybackYears ?? 10) * 3)));
  const shown = props.cashFlow.filter((point) => point.month <= shownYears * 12);
  const points = shown.map(({ month, cumulative, low, high }) => ({
    year: month / 12,
    cumulative,
    p10: low,
    p90: high,
    ...(moved ? { yours: yours.months[month]?.cumulative } : {}),
  }));
  const last = shown.at(-1)?.cumulative ?? 0;
  const whole = { whole: true } as const;
  const finding =
    paybackYears === null
      ? `After ${formatCount(shownYears, 'year')} the saving has not paid for the work.`
      : paidBackSentence({ payback: formatPayback(paybackYears), years: shownYears, ahead: last, currency });
  const banded = shown.some((point) => point.low !== undefined);
  const set = (key: keyof Figures) => (value: number) => setFigures({ ...figures, [key]: value });
  const field = { editionName: `edition ${editionNumber}` };
  const costEnd = roundUp(Math.max(props.capitalCost * 2, 10_000));
  return (
    <div className="client-columns">
      <div className="working">
        <PaybackFigure
          finding={finding}
          reading={`${banded ? 'Band: eight of ten samples lie inside it. ' : ''}${moved ? 'Dashed: with your figures.' : ''}`}
          fileName={`payback-edition-${editionNumber}`}
          currency={currency}
          capitalCost={props.capitalCost}
          points={points}
          paybackYears={paybackYears}
          paybackRange={props.paybackRange}
          editionName={field.editionName}
        />
      </div>
      <aside className="result" aria-label="Try your own figures">
        <h2 className="section-title">Try your own figures</h2>
        <p className="section-lead">Edition {editionNumber} stays as it is; this only shows you the effect.</p>
        <AssumptionField
          {...field}
          label="Power prices change by"
          unit="% a year"
          min={-2}
          max={6}
          step={0.5}
          decimals={1}
          value={figures.escalationPercent}
          editionValue={edition.escalationPercent}
          onChange={set('escalationPercent')}
        />
        <AssumptionField
          {...field}
          label="The plant runs"
          unit="% of last year"
          min={60}
          max={120}
          step={1}
          value={figures.runsPercent}
          editionValue={100}
          onChange={set('runsPercent')}
        />
        <AssumptionField
          {...field}
          label="The work costs"
          unit={currency}
          min={0}
          max={costEnd}
          step={500}
          value={figures.capitalCost}
          editionValue={edition.capitalCost}
          onChange={set('capitalCost')}
        />
        <AssumptionField
          {...field}
          label="Interest you reckon with"
          unit="% a year"
          min={0}
          max={15}
          step={0.5}
          decimals={1}
          value={figures.discountPercent}
          editionValue={edition.discountPercent}
          onChange={set('discountPercent')}
        />
        <div aria-live="polite">
          <ResultSums
            rows={[
              { label: `Pays back, edition ${editionNumber}`, value: formatPayback(paybackYears) },
              { label: 'With your figures', value: formatPayback(yourYears), kind: 'strong' },
              {
                label: `Worth today, ${formatNumber(economics.horizonYears)} years`,
                value: formatMajor(yours.appraisal.npv, currency, whole),
              },
            ]}
          />
        </div>
        {moved && (
          <Button kind="quiet" onClick={() => setFigures(edition)}>
            Back to edition {editionNumber}
          </Button>
        )}
      </aside>
    </div>
  );
}
