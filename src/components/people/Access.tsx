import { useState } from 'react';
import { changePerson, invitePerson } from '../../client/people';
import type { PersonView } from '../../schemas/account';
import { rightWords } from '../../schemas/client';
import { Button } from '../ui/Button';
import { CheckField } from '../ui/Field';
import { Notice } from '../ui/Notice';
import { ActFault, useAct } from './act';

/** Mails an invitation to who has no password; says whether the letter went. */
export function Invite({ person }: { person: PersonView }) {
  const [said, setSaid] = useState<{ kind: 'done' | 'fault'; title: string } | null>(null);
  const [busy, setBusy] = useState(false);
  const send = () => {
    setBusy(true);
    invitePerson(person.id)
      .then(
        ({ recipient, error }) =>
          setSaid(
            error
              ? { kind: 'fault', title: `The letter to ${recipient} did not go. ${error}` }
              : { kind: 'done', title: `The invitation is on its way to ${recipient}. Its link works for 14 days.` },
          ),
        (error: Error) => setSaid({ kind: 'fault', title: error.message }),
      )
      .finally(() => setBusy(false));
  };
  return (
    <>
      <Button kind="secondary" size="small" busy={busy} onClick={send}>
        Mail the invitation
      </Button>
      {said && <Notice kind={said.kind} title={said.title} />}
    </>
  );
}

/** Role within the practice, and whether the account is open. Never one's own. */
export function Access({ person, me }: { person: PersonView; me: number }) {
  const role = useAct(person.version, (version, input: 'partner' | 'consultant') =>
    changePerson(person.id, { change: 'role', role: input, version }),
  );
  const access = useAct(person.version, (version, closed: boolean) =>
    changePerson(person.id, { change: 'access', closed, version }),
  );
  const [asked, setAsked] = useState(false);
  if (person.id === me) {
    return (
      <div>
        <h3>Access</h3>
        <p className="quiet text-sm">Your own role and account are changed by another partner.</p>
      </div>
    );
  }
  const other = person.role === 'partner' ? 'consultant' : 'partner';
  const closed = person.access === 'closed';
  return (
    <div>
      <h3>Access</h3>
      <div className="panel-acts">
        {person.access === 'invited' && <Invite person={person} />}
        {person.role !== 'client' && (
          <Button kind="quiet" busy={role.busy} onClick={() => role.send(other)}>
            Make {person.name} a {other}
          </Button>
        )}
        {closed && (
          <Button kind="quiet" busy={access.busy} onClick={() => access.send(false)}>
            Open the account again
          </Button>
        )}
        {!closed && !asked && (
          <Button kind="quiet" onClick={() => setAsked(true)}>
            Close the account
          </Button>
        )}
        {!closed && asked && (
          <>
            <Button kind="secondary" size="small" busy={access.busy} onClick={() => access.send(true)}>
              Close the account of {person.name}
            </Button>
            <span className="quiet">All sessions and links end at once; hours and trail stay.</span>
            <Button kind="quiet" onClick={() => setAsked(false)}>
              Leave it open
            </Button>
          </>
        )}
      </div>
      <ActFault act={role} what={`The role of ${person.name}`} />
      <ActFault act={access} what={`The account of ${person.name}`} />
    </div>
  );
}

const rightNames = Object.keys(rightWords) as (keyof typeof rightWords)[];

/** What a person of a client may do there. */
export function Rights({ person }: { person: PersonView }) {
  const [rights, setRights] = useState(person.rights);
  const save = useAct(person.version, (version, input: PersonView['rights']) =>
    changePerson(person.id, { change: 'rights', rights: input, version }),
  );
  return (
    <div>
      <h3>Rights</h3>
      {rightNames.map((name) => (
        <CheckField
          key={name}
          label={rightWords[name]}
          checked={rights[name]}
          onChange={(event) => setRights({ ...rights, [name]: event.target.checked })}
        />
      ))}
      <Button kind="secondary" size="small" busy={save.busy} onClick={() => save.send(rights)}>
        Save the rights
      </Button>
      <ActFault act={save} what={`The rights of ${person.name}`} />
    </div>
  );
}

/** The rights in one line of a table. */
export function rightsInWords(rights: PersonView['rights']): string {
  return (
    rightNames
      .filter((name) => rights[name])
      .map((name) => rightWords[name])
      .join(', ') || 'none'
  );
}
