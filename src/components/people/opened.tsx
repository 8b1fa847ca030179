import { useEffect, useState } from 'react';
import type { PersonView } from '../../schemas/account';
import { Button } from '../ui/Button';

/** Which person is opened; kept in the address, so that it stays open after a change. */
export function useOpened() {
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

/** Opens or closes what can be changed of a person. */
export function OpenButton({
  person,
  isOpen,
  onToggle,
}: {
  person: PersonView;
  isOpen: boolean;
  onToggle: () => void;
}) {
  return (
    <Button kind="quiet" aria-expanded={isOpen} onClick={onToggle}>
      {isOpen ? 'Close' : 'Change'}
      <span className="unseen"> {person.name}</span>
    </Button>
  );
}

const accessWords = { open: 'open', invited: 'invited', closed: 'closed' };
const accessTones = { open: '', invited: 'warn', closed: 'quiet' };

/** How the account of a person stands. */
export function AccessCell({ person }: { person: PersonView }) {
  return (
    <td className={`left rights-column ${accessTones[person.access]}`} data-name="Account">
      {accessWords[person.access]}
    </td>
  );
}

/** The head of a table of people; the last column holds the actions. */
export function PeopleHead({ heads, withActions }: { heads: [head: string, unit?: string][]; withActions: boolean }) {
  const classOf = (head: string, unit?: string) =>
    unit ? undefined : head === 'Account' ? 'left rights-column' : 'left';
  return (
    <thead>
      <tr>
        {heads.map(([head, unit]) => (
          <th key={head} scope="col" className={classOf(head, unit)}>
            {head}
            {unit && <span className="unit">{unit}</span>}
          </th>
        ))}
        {withActions && (
          <th scope="col">
            <span className="unseen">Actions</span>
          </th>
        )}
      </tr>
    </thead>
  );
}
