import { Fragment, useEffect, useState } from 'react';
import { Queries } from '../../client/queries';
import type { PersonView } from '../../schemas/account';
import type { RateView } from '../../schemas/rate';
import { Button } from '../ui/Button';
import { formatAmount, formatDate } from '../ui/format';
import { Access, Rights, rightsInWords } from './Access';
import { AddPerson, type AddPersonProps } from './AddPerson';
import { LicenceForm } from './Licence';
import { RateTable } from './RateTable';

const accessWords = { open: 'open', invited: 'invited', closed: 'closed' };

/** Which person is opened; kept in the address, so that it stays open after a change. */
function useOpened() {
  const [opened, setOpened] = useState<number | null>(null);
  useEffect(() => {
    const at = /^#person-(\d+)$/.exec(location.hash);
    if (at) setOpened(Number(at[1]));
  }, []);
  const toggle = (id: number) => {
    const next = opened === id ? null : id;
    setOpened(next);
    history.replaceState(null, '', next === null ? location.pathname : `#person-${next}`);
  };
  return { opened, toggle };
}

function OpenButton({ person, opened, toggle }: { person: PersonView; opened: boolean; toggle: () => void }) {
  return (
    <Button kind="quiet" aria-expanded={opened} onClick={toggle}>
      {opened ? 'Close' : 'Change'}
      <span className="unseen"> {person.name}</span>
    </Button>
  );
}

function AccessCell({ person }: { person: PersonView }) {
  const tone = { open: undefined, invited: 'warn', closed: 'quiet' }[person.access];
  return (
    <td className={`left rights-column ${tone ?? ''}`} data-name="Account">
      {accessWords[person.access]}
    </td>
  );
}

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

/** The practice's people: role, licence, rate, account; each opens in its place. */
export function StaffTable(props: StaffTableProps) {
  return (
    <Queries>
      <Staff {...props} />
    </Queries>
  );
}

function Staff({ staff, engagements, currency, today, me }: StaffTableProps) {
  const { opened, toggle } = useOpened();
  return (
    <div className="ledger-scroll" role="region" aria-label="People of the practice" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack">
        <thead>
          <tr>
            {['Name', 'E-mail', 'Role', 'Licence'].map((head) => (
              <th key={head} scope="col" className="left">
                {head}
              </th>
            ))}
            <th scope="col">
              Rate today<span className="unit">{currency}/h</span>
            </th>
            <th scope="col" className="left rights-column">
              Account
            </th>
            <th scope="col">
              <span className="unseen">Actions</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {staff.map((person) => {
            const rate = rateNow(person.rates, today);
            const isOpen = opened === person.id;
            return (
              <Fragment key={person.id}>
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
                    <OpenButton person={person} opened={isOpen} toggle={() => toggle(person.id)} />
                  </td>
                </tr>
                {isOpen && (
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
                )}
              </Fragment>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

export interface ClientPeopleProps {
  people: (PersonView & { client?: string })[];
  mayManage: boolean;
  me: number;
}

function ClientRows({ people, mayManage, me }: ClientPeopleProps) {
  const { opened, toggle } = useOpened();
  const withClient = people.some((person) => person.client !== undefined);
  const heads = ['Name', 'E-mail', ...(withClient ? ['Client'] : []), 'May', 'Account'];
  return (
    <div className="ledger-scroll" role="region" aria-label="People of clients" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack">
        <thead>
          <tr>
            {heads.map((head) => (
              <th key={head} scope="col" className={head === 'Account' ? 'left rights-column' : 'left'}>
                {head}
              </th>
            ))}
            {mayManage && (
              <th scope="col">
                <span className="unseen">Actions</span>
              </th>
            )}
          </tr>
        </thead>
        <tbody>
          {people.map((person) => (
            <Fragment key={person.id}>
              <tr className={opened === person.id ? 'chosen' : undefined} id={`person-${person.id}`}>
                <th scope="row" className="left strong">
                  {person.name}
                </th>
                <td className="left" data-name="E-mail">
                  {person.email}
                </td>
                {withClient && (
                  <td className="left" data-name="Client">
                    <a className="text-link" href={`/clients/${person.clientId}`}>
                      {person.client}
                    </a>
                  </td>
                )}
                <td className="left wrap may" data-name="May">
                  {rightsInWords(person.rights)}
                </td>
                <AccessCell person={person} />
                {mayManage && (
                  <td>
                    <OpenButton person={person} opened={opened === person.id} toggle={() => toggle(person.id)} />
                  </td>
                )}
              </tr>
              {mayManage && opened === person.id && (
                <tr className="why-row">
                  <td colSpan={heads.length + 1}>
                    <div className="person-panel">
                      <Rights person={person} />
                      <Access person={person} me={me} />
                    </div>
                  </td>
                </tr>
              )}
            </Fragment>
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** People of clients with their rights; a partner opens and changes them. */
export function ClientPeople(props: ClientPeopleProps) {
  return (
    <Queries>
      <ClientRows {...props} />
    </Queries>
  );
}

/** The form of a new person, as an island of its own. */
export function NewPerson(props: AddPersonProps) {
  return (
    <Queries>
      <AddPerson {...props} />
    </Queries>
  );
}
