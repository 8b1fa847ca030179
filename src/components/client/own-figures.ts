import { useDeferredValue, useMemo, useState } from 'react';
import {
  appraiseInvestment,
  investmentMonths,
  investmentYears,
  sampleAppraisal,
  type Appraisal,
  type Investment,
} from '../../core/economics';
import { investmentOf, spreadsOf, type OwnAssumptions, type PlanMoney } from '../../schemas/assumptions';
import { formatCount, formatNumber, formatPayback } from '../ui/format';

/** Draws of the reader's own spread; the same seed always, so that only what is moved changes it. */
const sampling = { samples: 600, seed: 20_260_907 };

/** The reader's own assumptions, and what the plan comes to with them, worked out here by the same core. */
export function useOwnFigures(money: PlanMoney) {
  const [own, setOwn] = useState<OwnAssumptions>({});
  const investment = useMemo(() => investmentOf(money, own), [money, own]);
  const result = useMemo(
    () => ({
      appraisal: appraiseInvestment(investment),
      months: investmentMonths(investmentYears(investment)),
    }),
    [investment],
  );
  // The figures follow the hand at once; the spread, a thousand times the work, follows when it can.
  const settled = useDeferredValue(investment);
  const spread = useMemo(() => spreadOf(settled, money), [settled, money]);
  return {
    own,
    move: (change: OwnAssumptions) => setOwn({ ...own, ...change }),
    reset: () => setOwn({}),
    horizonYears: investment.years,
    spread: settled === investment ? spread : null,
    ...result,
  };
}
export type OwnFigures = ReturnType<typeof useOwnFigures>;

function spreadOf(investment: Investment, money: PlanMoney) {
  const { p10, p90 } = sampleAppraisal(investment, spreadsOf(money.economics), sampling).paybackMonths;
  return { lowMonths: p10, highMonths: p90 };
}

/** What the reader's own assumptions change, in a sentence; never what the edition shows. */
export function ownSentence(said: {
  moved: boolean;
  editionNumber: number;
  editionYears: number | null;
  appraisal: Pick<Appraisal, 'simplePaybackYears'>;
  horizonYears: number;
  spread: OwnFigures['spread'];
}): string {
  const { moved, editionNumber, editionYears, appraisal, horizonYears, spread } = said;
  const report = reportWords(editionNumber, editionYears);
  if (!moved) return `${report} Move a figure to see what it changes.`;
  const years = appraisal.simplePaybackYears;
  if (years === null)
    return `With your own assumptions it is not paid back within ${formatCount(horizonYears, 'year')}. ${report}`;
  const own = years === 0 ? 'there is nothing to pay back' : `it is paid back in ${formatPayback(years)}`;
  return `With your own assumptions ${own}${spreadWords(spread, years)}. ${report}`;
}

const reportWords = (number: number, years: number | null) =>
  years === null
    ? `Edition ${number} shows no payback.`
    : `Edition ${number} shows ${years === 0 ? 'nothing to pay back' : formatPayback(years)}.`;

function spreadWords(spread: OwnFigures['spread'], years: number): string {
  if (!spread || spread.lowMonths === null || years === 0) return '';
  const low = formatNumber(Math.max(1, Math.round(spread.lowMonths)));
  const high = spread.highMonths === null ? 'never' : formatPayback(spread.highMonths / 12);
  return `, eight of ten samples between ${low}${spread.highMonths === null ? ' months' : ''} and ${high}`;
}
