import { useState } from 'react';
import { changePerson } from '../../client/people';
import type { PersonView } from '../../schemas/account';
import type { PersonChangeInput } from '../../schemas/client';
import { Button } from '../ui/Button';
import { Field } from '../ui/Field';
import { ActFault, useAct } from './act';

type Licence = Extract<PersonChangeInput, { change: 'licence' }>['licence'];

export interface LicenceProps {
  person: PersonView;
  checkedBy: string | null;
  me: number;
}

/** A licence is entered and checked by a partner, never by its holder. */
export function LicenceForm({ person, checkedBy, me }: LicenceProps) {
  const { licence } = person;
  const [draft, setDraft] = useState({
    jurisdiction: licence?.jurisdiction ?? '',
    number: licence?.number ?? '',
    expires: licence?.expires ?? '',
  });
  const save = useAct(person.version, (version, input: Licence) =>
    changePerson(person.id, { change: 'licence', licence: input, version }),
  );
  const set = (name: keyof typeof draft) => (event: { target: { value: string } }) =>
    setDraft({ ...draft, [name]: event.target.value });
  const fault = (name: string) => save.fields[`licence.${name}`]?.[0];
  if (person.id === me) {
    return (
      <div>
        <h3>Licence</h3>
        <p className="quiet text-sm">
          {licence ? `${licence.jurisdiction} ${licence.number}. ` : ''}Your own licence is entered and checked by
          another partner.
        </p>
      </div>
    );
  }
  return (
    <div>
      <h3>Licence</h3>
      {licence && checkedBy && <p className="quiet text-sm">Checked by {checkedBy}.</p>}
      <div className="panel-form">
        <Field
          label="Jurisdiction"
          value={draft.jurisdiction}
          maxLength={6}
          error={fault('jurisdiction')}
          onChange={set('jurisdiction')}
        />
        <Field label="Number" value={draft.number} error={fault('number')} onChange={set('number')} />
        <Field label="Last day" type="date" value={draft.expires} error={fault('expires')} onChange={set('expires')} />
        <Button
          kind="secondary"
          busy={save.busy}
          onClick={() => save.send({ ...draft, expires: draft.expires === '' ? null : draft.expires })}
        >
          I have checked it; save
        </Button>
        {licence && (
          <Button kind="quiet" busy={save.busy} onClick={() => save.send(null)}>
            Remove the licence
          </Button>
        )}
      </div>
      <ActFault act={save} what={`The licence of ${person.name}`} />
    </div>
  );
}
