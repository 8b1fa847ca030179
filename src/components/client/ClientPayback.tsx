import type { PlanMoney } from '../../schemas/assumptions';
import type { CashFlowMonth } from '../../schemas/plan-money';
import type { PaybackData } from '../charts/payback';
import { PaybackFigure } from '../charts/PaybackChart';
import { paidBackSentence } from '../report/words';
import { formatCount, formatPayback } from '../ui/format';
import { movableOf } from './edition-money';
import { useOwnFigures, type OwnFigures } from './own-figures';
import { OwnFiguresPanel } from './OwnFiguresPanel';

export interface ClientPaybackProps {
  currency: string;
  editionNumber: number;
  money: PlanMoney;
  cashFlow: CashFlowMonth[];
  paybackYears: number | null;
  paybackRange: PaybackData['paybackRange'];
  npv: number;
  /** Whom to ask about what is fixed. */
  askName: string;
}

/** The years worth showing, three times the longer payback, with the edition's finding in them. */
function pictureOf({ money, cashFlow, currency, paybackYears }: ClientPaybackProps, own: OwnFigures, moved: boolean) {
  const longest = Math.max(paybackYears ?? 10, moved ? (own.appraisal.simplePaybackYears ?? 10) : 0);
  const years = Math.min(money.economics.horizonYears, Math.max(3, Math.ceil(longest * 3)));
  const shown = cashFlow.filter((point) => point.month <= years * 12);
  const ahead = shown.at(-1)?.cumulative ?? 0;
  const banded = shown.some((point) => point.low !== undefined);
  return {
    finding:
      paybackYears === null
        ? `After ${formatCount(years, 'year')} the saving has not paid for the work.`
        : paidBackSentence({ payback: formatPayback(paybackYears), years, ahead, currency }),
    reading: [
      banded ? 'Band: eight of ten samples lie inside it.' : '',
      moved ? 'Dashed: your own assumptions; the report shows the full line.' : '',
    ].join(' '),
    points: shown.map(({ month, cumulative, low, high }) => ({
      year: month / 12,
      cumulative,
      p10: low,
      p90: high,
      ...(moved ? { yours: own.months[month]?.cumulative } : {}),
    })),
  };
}

/** The payback picture with the client's own assumptions beside it; worked out here in the browser. */
export function ClientPayback(props: ClientPaybackProps) {
  const { money, currency, editionNumber, paybackYears } = props;
  const own = useOwnFigures(money);
  const moved = movableOf(money).some(({ key, own: value }) => (own.own[key] ?? value) !== value);
  return (
    <div className="client-columns">
      <div className="working">
        <PaybackFigure
          {...pictureOf(props, own, moved)}
          fileName={`payback-edition-${editionNumber}`}
          currency={currency}
          capitalCost={money.capitalCost}
          incentive={money.economics.incentive}
          paybackYears={paybackYears}
          paybackRange={props.paybackRange}
          yoursPaybackYears={moved ? own.appraisal.simplePaybackYears : null}
          editionName={`edition ${editionNumber}`}
        />
      </div>
      <OwnFiguresPanel {...props} own={own} moved={moved} />
    </div>
  );
}
