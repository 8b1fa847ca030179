import { useMemo, useState } from 'react';
import { appraise, cashFlow } from '../../core/economics';
import type { CashFlowMonth, PlanEconomics } from '../../schemas/plan-money';
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

/** The reader's figures, and what the project comes to with them. */
function useOwnFigures(props: ClientPaybackProps) {
  const { economics, capitalCost, saving, yearlyUpkeep } = props;
  const edition: Figures = {
    escalationPercent: economics.escalationPercent,
    runsPercent: 100,
    capitalCost,
    discountPercent: economics.discountPercent,
  };
  const [figures, setFigures] = useState(edition);
  const { appraisal, months } = useMemo(() => {
    const project = projectOf(props, figures);
    return { appraisal: appraise(project), months: cashFlow(project).months };
  }, [props, figures]);
  // Where upkeep eats what is saved nothing comes back, however little the work costs.
  const comesBack = (saving * figures.runsPercent) / 100 > yearlyUpkeep;
  return {
    edition,
    figures,
    setFigures,
    moved: (Object.keys(edition) as (keyof Figures)[]).some((key) => figures[key] !== edition[key]),
    months,
    npv: appraisal.npv,
    paybackYears: comesBack ? appraisal.simplePaybackYears : null,
  };
}

type OwnFigures = ReturnType<typeof useOwnFigures>;

/** The years worth showing, three times the payback, with the finding in them. */
function pictureOf({ economics, cashFlow: flow, currency, paybackYears }: ClientPaybackProps, own: OwnFigures) {
  const years = Math.min(economics.horizonYears, Math.max(3, Math.ceil((paybackYears ?? 10) * 3)));
  const shown = flow.filter((point) => point.month <= years * 12);
  const ahead = shown.at(-1)?.cumulative ?? 0;
  const banded = shown.some((point) => point.low !== undefined);
  return {
    finding:
      paybackYears === null
        ? `After ${formatCount(years, 'year')} the saving has not paid for the work.`
        : paidBackSentence({ payback: formatPayback(paybackYears), years, ahead, currency }),
    reading: `${banded ? 'Band: eight of ten samples lie inside it. ' : ''}${own.moved ? 'Dashed: with your figures.' : ''}`,
    points: shown.map(({ month, cumulative, low, high }) => ({
      year: month / 12,
      cumulative,
      p10: low,
      p90: high,
      ...(own.moved ? { yours: own.months[month]?.cumulative } : {}),
    })),
  };
}

/** Round end of a slider for the cost of work. */
const roundUp = (amount: number) => Math.ceil(amount / 1000) * 1000;

const slidersOf = ({ capitalCost, currency }: ClientPaybackProps) =>
  [
    {
      key: 'escalationPercent',
      label: 'Power prices change by',
      unit: '% a year',
      min: -2,
      max: 6,
      step: 0.5,
      decimals: 1,
    },
    { key: 'runsPercent', label: 'The plant runs', unit: '% of last year', min: 60, max: 120, step: 1, decimals: 0 },
    {
      key: 'capitalCost',
      label: 'The work costs',
      unit: currency,
      min: 0,
      max: roundUp(Math.max(capitalCost * 2, 10_000)),
      step: 500,
      decimals: 0,
    },
    {
      key: 'discountPercent',
      label: 'Interest you reckon with',
      unit: '% a year',
      min: 0,
      max: 15,
      step: 0.5,
      decimals: 1,
    },
  ] as const;

function OwnFiguresPanel({ props, own }: { props: ClientPaybackProps; own: OwnFigures }) {
  const { currency, editionNumber, economics } = props;
  const { edition, figures, setFigures } = own;
  return (
    <aside className="result" aria-label="Try your own figures">
      <h2 className="section-title">Try your own figures</h2>
      <p className="section-lead">Edition {editionNumber} stays as it is; this only shows you the effect.</p>
      {slidersOf(props).map(({ key, ...slider }) => (
        <AssumptionField
          key={key}
          {...slider}
          editionName={`edition ${editionNumber}`}
          value={figures[key]}
          editionValue={edition[key]}
          onChange={(value) => setFigures({ ...figures, [key]: value })}
        />
      ))}
      <div aria-live="polite">
        <ResultSums
          rows={[
            { label: `Pays back, edition ${editionNumber}`, value: formatPayback(props.paybackYears) },
            { label: 'With your figures', value: formatPayback(own.paybackYears), kind: 'strong' },
            {
              label: `Worth today, ${formatNumber(economics.horizonYears)} years`,
              value: formatMajor(own.npv, currency, { whole: true }),
            },
          ]}
        />
      </div>
      {own.moved && (
        <Button kind="quiet" onClick={() => setFigures(edition)}>
          Back to edition {editionNumber}
        </Button>
      )}
    </aside>
  );
}

/** The payback picture with the client's own figures beside it; worked out here in the browser. */
export function ClientPayback(props: ClientPaybackProps) {
  const own = useOwnFigures(props);
  return (
    <div className="client-columns">
      <div className="working">
        <PaybackFigure
          {...pictureOf(props, own)}
          fileName={`payback-edition-${props.editionNumber}`}
          currency={props.currency}
          capitalCost={props.capitalCost}
          paybackYears={props.paybackYears}
          paybackRange={props.paybackRange}
          editionName={`edition ${props.editionNumber}`}
        />
      </div>
      <OwnFiguresPanel props={props} own={own} />
    </div>
  );
}
