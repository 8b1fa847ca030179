import type { EditionContent, EditionPlan } from '../../schemas/edition';
import { Caution } from '../ui/Caution';
import { formatMajor, formatNumber, formatPeriod, formatQuantity } from '../ui/format';
import type { LedgerColumn, LedgerRow } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { Stamp } from '../ui/Stamp';
import { Leaf, LeafRow, type LeafTap } from './Leaf';
import { answer, comesBack, costNow, toDo } from './words';

export interface LeafContext {
  content: EditionContent;
  taps: LeafTap[];
  foot: string[];
}

/** At most three plans beside standing fit the width of a leaf. */
const shownPlans = ({ plan, others }: EditionContent): EditionPlan[] => [plan, ...others.slice(0, 2)];

function comparison(content: EditionContent): { columns: LedgerColumn[]; rows: LedgerRow[] } {
  const { standing, currency } = content;
  const plans = shownPlans(content);
  const columns: LedgerColumn[] = [
    { key: 'what', head: 'The year', headUnseen: true },
    { key: 'standing', head: 'As it runs', unit: 'standing', align: 'right' },
    ...plans.map((plan, index) => ({
      key: `plan${index}`,
      head: plan.name,
      unit: index === 0 ? 'proposed' : 'compared',
      align: 'right' as const,
      picked: index === 0,
    })),
  ];
  const whole = (amount: number) => formatNumber(amount);
  const row = (id: string, label: string, of: (plan: EditionPlan) => string, stands: string | null): LedgerRow => ({
    id,
    cells: {
      what: label,
      standing: stands ?? of(standing),
      ...Object.fromEntries(plans.map((plan, index) => [`plan${index}`, of(plan)])),
    },
  });
  const { horizonYears, discountPercent } = plans[0]?.economics ?? standing.economics;
  return {
    columns,
    rows: [
      row('bills', `Bills of the year, ${currency}`, (plan) => whole(plan.yearTotal), null),
      row('saved', `Saved a year, ${currency}`, (plan) => whole(plan.saving), 'none'),
      row('work', `Work, once, ${currency}`, (plan) => whole(plan.capitalCost), 'none'),
      row('upkeep', `Upkeep a year, ${currency}`, (plan) => whole(plan.yearlyUpkeep), 'none'),
      row('payback', 'Pays back', (plan) => plan.paybackWords, 'none'),
      row(
        'npv',
        `Worth today, ${horizonYears} years at ${formatQuantity(discountPercent, '%', { upTo: 1 })}, ${currency}`,
        (plan) => whole(plan.appraisal.npv),
        'none',
      ),
      row(
        'pf',
        'Power factor at the peak, worst bill',
        (plan) => (plan.worstPf === null ? 'unknown' : formatNumber(plan.worstPf, { decimals: 2 })),
        null,
      ),
      row('leading', 'Hours leading at the meter', (plan) => formatNumber(plan.hoursLeading), null),
    ],
  };
}

function Contents({ taps }: { taps: LeafTap[] }) {
  return (
    <table className="ledger" aria-label="What is in this report">
      <tbody>
        {taps.map((tap, index) => (
          <tr key={tap.href}>
            <th scope="row" className="left">
              <b>{index + 1}</b>&ensp;{tap.label}
            </th>
            <td>
              <a className="text-link" href={tap.href}>
                page {index + 1}
              </a>
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** Page 1: the answer, the comparison, what is in the report, what stands between it and a change at the panel. */
export function AnswerLeaf({ content, taps, foot }: LeafContext) {
  const { site, year, schedule, readings, plan, currency } = content;
  const place = [site.name, site.place].filter(Boolean).join(', ');
  return (
    <Leaf
      page={1}
      taps={taps}
      foot={foot}
      finding={answer(content)}
      context={`Power factor audit of ${place}. Year of bills ${formatPeriod(year.from, year.to, { year: true })}.`}
    >
      <div className="leaf-thirds">
        <p>
          <b>What it costs now.</b>
          {costNow(content)}
        </p>
        <p>
          <b>What to do.</b>
          {toDo(content)}
        </p>
        <p>
          <b>What comes back besides.</b>
          {comesBack(content)}
        </p>
      </div>
      <LeafRow
        first
        number="1.1"
        title="The plant as it runs, and what was priced against it"
        reference={
          <p>
            All plans priced on the same {formatNumber(readings.intervals)} readings and on {schedule.title}
          </p>
        }
      >
        <LedgerTable label="Standing and plans" {...comparison(content)} />
      </LeafRow>
      <LeafRow
        number="1.2"
        title="What is in this report"
        reference={<p>Frozen under the digest below</p>}
        result={
          <>
            <h3>Before a setting is changed</h3>
            <p className="mb-2">
              The figures here are calculated. A licensed engineer releases a setting card; only then does anybody turn
              a rheostat.
            </p>
            <Stamp title="Not released" detail="no setting card exists yet" refused />
          </>
        }
      >
        <Contents taps={taps} />
        <p className="hint mt-2">
          {plan.saving > 0 &&
            `The saving of ${formatMajor(plan.saving, currency)} a year has all extra losses of the motors in it.`}
        </p>
      </LeafRow>
      <LeafRow reference={<p>In full on page {taps.length - 1}</p>}>
        <Caution title="Before settings are changed" narrow>
          <p>
            All settings here are calculated values. Qualified persons review, set and commission them under your
            electrical safety rules and local codes; the manufacturer’s limits prevail. Use only released setting cards.
          </p>
        </Caution>
      </LeafRow>
    </Leaf>
  );
}
