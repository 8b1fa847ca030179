import type { PlanMoney } from '../../schemas/assumptions';
import type { CashFlowMonth } from '../../schemas/plan-money';
import { yearsWorthDrawing, type PaybackData } from '../charts/payback';
import type { RankingData } from '../charts/ranking';
import { RankingFigure } from '../charts/RankingChart';
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
  /** What moves the edition's result; null in editions made without it. */
  ranking: RankingData | null;
  /** Whom to ask about what is fixed. */
  askName: string;
}

/** The edition's line and finding, which nothing moves, with the reader's own line where there is one. */
function pictureOf({ money, cashFlow, currency, paybackYears }: ClientPaybackProps, own: OwnFigures, moved: boolean) {
  const { horizonYears } = money.economics;
  const years = yearsWorthDrawing(paybackYears, horizonYears);
  const ownYears = moved ? yearsWorthDrawing(own.appraisal.simplePaybackYears, horizonYears) : 0;
  const ahead = cashFlow.find((point) => point.month === years * 12)?.cumulative ?? 0;
  const banded = cashFlow.some((point) => point.low !== undefined);
  return {
    finding:
      paybackYears === null
        ? `After ${formatCount(years, 'year')} the saving has not paid for the work.`
        : paidBackSentence({ payback: formatPayback(paybackYears), years, ahead, currency }),
    reading: [
      banded ? 'Band: eight of ten samples lie inside it.' : '',
      moved ? 'Dashed: your own assumptions; the report shows the full line.' : '',
    ].join(' '),
    shownYears: Math.max(years, ownYears),
    points: cashFlow.map(({ month, cumulative, low, high }) => ({
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
  const { money, currency, editionNumber, paybackYears, ranking } = props;
  const own = useOwnFigures(money);
  const moved = movableOf(money).some(({ key, own: value }) => (own.own[key] ?? value) !== value);
  return (
    <div className="client-columns client-money">
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
      {ranking && ranking.rows.length > 0 && (
        <div className="working client-ranking">
          <RankingFigure {...ranking} fileName={`what-moves-it-edition-${editionNumber}`} />
        </div>
      )}
    </div>
  );
}
