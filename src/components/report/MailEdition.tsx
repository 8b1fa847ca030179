import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { ApiError } from '../../client/api';
import { mailEdition } from '../../client/editions';
import { Queries } from '../../client/queries';
import { Button } from '../ui/Button';
import { Notice } from '../ui/Notice';

export interface MailEditionProps {
  editionId: number;
  number: number;
  readers: { id: number; name: string; email: string }[];
  /** Where the people of the client are entered. */
  peopleHref: string;
  /** Whether it is what this page is for now: then its button is the primary one. */
  isNext: boolean;
}

/** Mails an edition to chosen people of the client; from then on they see it in their pages too. */
export function MailEdition(props: MailEditionProps) {
  return (
    <Queries>
      <Mailer {...props} />
    </Queries>
  );
}

function Mailer({ editionId, number, readers, peopleHref, isNext }: MailEditionProps) {
  const [chosen, setChosen] = useState(readers.length === 1 ? readers.map((reader) => reader.id) : []);
  const [greeting, setGreeting] = useState('');
  const sending = useMutation({ mutationFn: () => mailEdition(editionId, { userIds: chosen, greeting }) });
  if (readers.length === 0) {
    return (
      <p>
        Nobody of the client may read reports yet. <a href={peopleHref}>Name a person first</a>.
      </p>
    );
  }
  const toggle = (id: number) => setChosen(chosen.includes(id) ? chosen.filter((one) => one !== id) : [...chosen, id]);
  const failed = sending.data?.letters.filter((letter) => letter.state === 'failed') ?? [];
  return (
    <form
      className="stacked max-w-[560px]"
      onSubmit={(event) => {
        event.preventDefault();
        sending.mutate();
      }}
    >
      <fieldset>
        <legend>Mail edition {number} to</legend>
        {readers.map((reader) => (
          <label key={reader.id} className="field-check">
            <input type="checkbox" checked={chosen.includes(reader.id)} onChange={() => toggle(reader.id)} />
            <span>
              {reader.name}, {reader.email}
            </span>
          </label>
        ))}
      </fieldset>
      <div className="field">
        <label htmlFor="edition-greeting">A word of your own, placed first</label>
        <textarea
          id="edition-greeting"
          className="input"
          rows={2}
          maxLength={600}
          value={greeting}
          onChange={(event) => setGreeting(event.target.value)}
        />
      </div>
      <Button
        type="submit"
        kind={isNext ? 'primary' : 'secondary'}
        busy={sending.isPending}
        waiting={chosen.length === 0 && 'choose who gets it'}
      >
        Mail edition {number}
      </Button>
      {sending.error instanceof ApiError && <Notice kind="fault" title={sending.error.message} />}
      {sending.data && failed.length === 0 && (
        <Notice
          kind="done"
          title={`Edition ${number} is on its way to ${chosen.length === 1 ? 'one person' : `${chosen.length} people`}.`}
        >
          They see it in their pages from now on. <a href="">Show the letters</a>
        </Notice>
      )}
      {failed.length > 0 && (
        <Notice
          kind="fault"
          title="A letter did not go."
          problems={failed.map((letter) => ({ message: letter.error ?? '', where: letter.recipient }))}
        />
      )}
    </form>
  );
}
