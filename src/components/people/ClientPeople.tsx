import { Fragment } from 'react';
import { Queries } from '../../client/queries';
import type { PersonView } from '../../schemas/account';
import { Access, Rights, rightsInWords } from './Access';
import { AccessCell, OpenButton, PeopleHead, useOpened } from './opened';

type ClientPerson = PersonView & { client?: string };

export interface ClientPeopleProps {
  people: ClientPerson[];
  mayManage: boolean;
  me: number;
}

interface RowProps {
  person: ClientPerson;
  withClient: boolean;
  mayManage: boolean;
  me: number;
  isOpen: boolean;
  onToggle: () => void;
}

function Row({ person, withClient, mayManage, me, isOpen, onToggle }: RowProps) {
  return (
    <Fragment>
      <tr className={isOpen ? 'chosen' : undefined} id={`person-${person.id}`}>
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
            <OpenButton {...{ person, isOpen, onToggle }} />
          </td>
        )}
      </tr>
      {mayManage && isOpen && (
        <tr className="why-row">
          <td colSpan={withClient ? 6 : 5}>
            <div className="person-panel">
              <Rights person={person} />
              <Access person={person} me={me} />
            </div>
          </td>
        </tr>
      )}
    </Fragment>
  );
}

function Rows({ people, mayManage, me }: ClientPeopleProps) {
  const { opened, toggle } = useOpened();
  const withClient = people.some((person) => person.client !== undefined);
  const names = ['Name', 'E-mail', ...(withClient ? ['Client'] : []), 'May', 'Account'];
  return (
    <div className="ledger-scroll" role="region" aria-label="People of clients" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack">
        <PeopleHead heads={names.map((name) => [name])} withActions={mayManage} />
        <tbody>
          {people.map((person) => (
            <Row
              key={person.id}
              {...{ person, withClient, mayManage, me }}
              isOpen={opened === person.id}
              onToggle={() => toggle(person.id)}
            />
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
      <Rows {...props} />
    </Queries>
  );
}
