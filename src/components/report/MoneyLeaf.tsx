import type { EditionContent } from '../../schemas/edition';
import { formatNumber, formatPayback, formatPercent, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { editionRanking } from '../client/edition-money';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums, type SumRow } from '../ui/ResultSums';
import type { LeafContext } from './AnswerLeaf';
import { Leaf, LeafRow } from './Leaf';
import { rankingShort } from '../charts/ranking';
import { riseWords, spreadWords } from '../plans/money-words';
import { Picture } from './Picture';
import { paybackFinding } from './words';

/** Years told one by one; of later ones each tenth and the last, so that any horizon fits the leaf. */
const yearsInFull = 5;

/** Cumulative cash at the end of years. */
function yearsTable({ cashFlow, currency }: EditionContent): LedgerData {
  const figure = { kind: 'number' as const, unit: currency };
  const years = cashFlow.filter((point) => point.month % 12 === 0);
  const isTold = (year: number) => year <= yearsInFull || year % 10 === 0 || year === years.length - 1;
  const banded = years.some((point) => point.low !== undefined);
  return {
    columns: [
      { key: 'year', head: 'After year', align: 'right' },
      { key: 'flow', head: 'In the year', ...figure },
      { key: 'sum', head: 'All so far', ...figure, strong: true },
      ...(banded
        ? [
            { key: 'low', head: '1 in 10 below', ...figure, quiet: true },
            { key: 'high', head: '1 in 10 above', ...figure, quiet: true },
          ]
        : []),
    ],
    rows: years
      .map((point, year) => ({
        id: String(point.month),
        cells: {
          year: formatNumber(year),
          flow: year === 0 ? point.cumulative : point.cumulative - (years[year - 1]?.cumulative ?? 0),
          sum: point.cumulative,
          low: point.low ?? null,
          high: point.high ?? null,
        },
      }))
      .filter((_, year) => isTold(year)),
  };
}

function sums({ plan, currency, money }: EditionContent): SumRow[] {
  const { appraisal, economics } = plan;
  const { incentive = 0, taxPercent = 0 } = economics;
  const tax = money?.years[1]?.tax ?? 0;
  return [
    { label: `Work, once, ${currency}`, value: formatNumber(plan.capitalCost) },
    ...(incentive > 0 ? [{ label: 'Incentive, once', value: formatNumber(-incentive) }] : []),
    { label: 'Saved a year', value: formatNumber(plan.saving) },
    { label: 'Upkeep a year', value: formatNumber(plan.yearlyUpkeep) },
    ...(taxPercent > 0
      ? [{ label: `Tax of year 1, ${formatQuantity(taxPercent, '%', { upTo: 1 })}`, value: formatNumber(tax) }]
      : []),
    { label: 'Net in year 1', value: formatNumber(plan.saving - plan.yearlyUpkeep - tax), kind: 'total' },
    { label: 'Pays back', value: plan.paybackWords, kind: 'strong' },
    {
      label: `At ${formatQuantity(economics.discountPercent, '%', { upTo: 1 })} interest`,
      value: formatPayback(appraisal.discountedPaybackYears),
    },
    { label: `Worth today, ${economics.horizonYears} years`, value: formatNumber(appraisal.npv) },
    { label: 'Internal rate', value: appraisal.irr === null ? 'none' : formatPercent(appraisal.irr) },
  ];
}

export interface MoneyLeafProps extends LeafContext {
  pictures: Record<string, string>;
  page: number;
}

/** Payback and cash flow. */
export function MoneyLeaf({ content, taps, foot, pictures, page }: MoneyLeafProps) {
  const { plan } = content;
  const ranking = editionRanking(content);
  return (
    <Leaf page={page} taps={taps} foot={foot} finding={paybackFinding(content)}>
      <LeafRow
        first
        number={`${page}.1`}
        title="Payback"
        reference={
          <>
            <p>Work and upkeep as quoted or entered</p>
            <p>{riseWords(plan.economics)}</p>
            {content.money && <p>{spreadWords(plan.economics)}</p>}
          </>
        }
      >
        <Picture svg={pictures['payback-page']} label="Payback" />
      </LeafRow>
      <LeafRow
        number={`${page}.2`}
        title="Cash flow"
        reference={
          <>
            <p>Savings arrive evenly through each year</p>
            {plan.economics.horizonYears > yearsInFull + 1 && <p>After the fifth year each tenth, and the last</p>}
          </>
        }
        result={<ResultSums rows={sums(content)} />}
      >
        <LedgerTable label="Cash flow by year" {...yearsTable(content)} />
        {plan.appraisal.notes.map((note) => (
          <p key={note} className="hint mt-2">
            {note}
          </p>
        ))}
      </LeafRow>
      {ranking && ranking.rows.length > 0 && (
        <LeafRow
          number={`${page}.3`}
          title="What moves it"
          reference={<p>One figure at a time, between the values it lies between eight of ten times</p>}
        >
          <LedgerTable label="What moves the result" {...rankingShort(ranking)} />
        </LeafRow>
      )}
    </Leaf>
  );
}
