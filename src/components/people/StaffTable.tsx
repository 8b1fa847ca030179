import { Fragment } from 'react';
import { Queries } from '../../client/queries';
import type { PersonView } from '../../schemas/account';
import type { RateView } from '../../schemas/rate';
import { formatAmount, formatDate } from '../ui/format';
import { Access } from './Access';
import { LicenceForm } from './Licence';
import { AccessCell, OpenButton, PeopleHead, useOpened } from './opened';
import { RateTable } from './RateTable';

export interface StaffRow extends PersonView {
  rates: RateView[];
  checkedBy: string | null;
}

export interface StaffTableProps {
  staff: StaffRow[];
  engagements: { id: number; code: string }[];
  currency: string;
  today: string;
  me: number;
}

/** The rate of a day that holds for engagements without their own. */
function rateNow(rates: RateView[], today: string): RateView | undefined {
  return rates.find((rate) => rate.engagementId === null && rate.from <= today);
}

function licenceWords({ licence }: PersonView): string {
  if (!licence) return 'none';
  return `${licence.jurisdiction} ${licence.number}${licence.expires ? `, to ${formatDate(licence.expires)}` : ''}`;
}

type RowProps = Omit<StaffTableProps, 'staff'> & { person: StaffRow; isOpen: boolean; onToggle: () => void };

function Panel({ person, engagements, currency, today, me }: RowProps) {
  return (
    <tr className="why-row">
      <td colSpan={7}>
        <div className="person-panel">
          <RateTable userId={person.id} {...{ engagements, currency, today }} rates={person.rates} />
          <div className="grid content-start gap-5">
            <LicenceForm person={person} checkedBy={person.checkedBy} me={me} />
            <Access person={person} me={me} />
          </div>
        </div>
      </td>
    </tr>
  );
}

function Row(props: RowProps) {
  const { person, isOpen, onToggle, currency, today } = props;
  const rate = rateNow(person.rates, today);
  return (
    <Fragment>
      <tr className={isOpen ? 'chosen' : undefined} id={`person-${person.id}`}>
        <th scope="row" className="left strong">
          {person.name}
        </th>
        <td className="left" data-name="E-mail">
          {person.email}
        </td>
        <td className="left" data-name="Role">
          {person.role}
        </td>
        <td className={person.licence ? 'left' : 'left quiet'} data-name="Licence">
          {licenceWords(person)}
        </td>
        <td className={rate ? undefined : 'warn'} data-name={`Rate today, ${currency}/h`}>
          {rate ? formatAmount(rate.perHourMinor, rate.currency) : 'no rate'}
        </td>
        <AccessCell person={person} />
        <td>
          <OpenButton {...{ person, isOpen, onToggle }} />
        </td>
      </tr>
      {isOpen && <Panel {...props} />}
    </Fragment>
  );
}

function Rows({ staff, ...rest }: StaffTableProps) {
  const { opened, toggle } = useOpened();
  const heads: [string, string?][] = [
    ['Name'],
    ['E-mail'],
    ['Role'],
    ['Licence'],
    ['Rate today', `${rest.currency}/h`],
    ['Account'],
  ];
  return (
    <div className="ledger-scroll" role="region" aria-label="People of the practice" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack">
        <PeopleHead heads={heads} withActions />
        <tbody>
          {staff.map((person) => (
            <Row
              key={person.id}
              person={person}
              isOpen={opened === person.id}
              onToggle={() => toggle(person.id)}
              {...rest}
            />
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** The practice's people: role, licence, rate, account; each opens in its place. */
export function StaffTable(props: StaffTableProps) {
  return (
    <Queries>
      <Rows {...props} />
    </Queries>
  );
}
