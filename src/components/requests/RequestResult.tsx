import { useState } from 'react';
import type { RequestPersonView } from '../../schemas/request';
import { Button } from '../ui/Button';
import { Field } from '../ui/Field';
import { formatDateTime, formatLongDate } from '../ui/format';
import { Mark, type MarkProps } from '../ui/Mark';
import { Notice } from '../ui/Notice';
import { ResultSums } from '../ui/ResultSums';
import { dueWords } from './request-words';
import type { OpenedRequest } from './use-request';

interface Props {
  opened: OpenedRequest;
  timeZone: string;
}

function mailMark({ state, isUncertain }: RequestPersonView): MarkProps {
  if (state === 'sent') return { kind: 'filled', word: 'mailed' };
  if (state === 'failed') return { kind: 'diamond', word: 'the mail did not go', tone: 'fault' };
  return isUncertain
    ? { kind: 'diamond', word: 'not known to have gone', tone: 'fault' }
    : { kind: 'half', word: 'being mailed' };
}

function Person({ person, opened, timeZone }: Props & { person: RequestPersonView }) {
  const { userId, name, email, sentAt, state, isUncertain, error } = person;
  const { request, busy, change } = opened;
  return (
    <li>
      <b>{name}</b>
      <br />
      {email}
      <br />
      <Mark {...mailMark(person)} />
      {sentAt && <span className="hint"> {formatDateTime(sentAt, timeZone)}</span>}
      {error && <p className="fault">{error}</p>}
      {(state === 'failed' || isUncertain) && request.state === 'open' && (
        <p>
          <Button
            kind="secondary"
            size="small"
            busy={busy}
            onClick={() => void change({ change: 'mail', userId, version: request.version })}
          >
            Mail it again
          </Button>
        </p>
      )}
    </li>
  );
}

function Reminders({ opened }: Pick<Props, 'opened'>) {
  const { reminders, nextReminderOn, state } = opened.request;
  const went = { sent: 'mailed', sending: 'not known to have gone', failed: 'did not go' };
  return (
    <>
      <h3>Reminders</h3>
      {reminders.length > 0 && (
        <ul>
          {reminders.map(({ day, name, state: outcome }) => (
            <li key={`${day} ${name}`}>
              {formatLongDate(day)}, {name}: {went[outcome]}
            </li>
          ))}
        </ul>
      )}
      <p>
        {nextReminderOn
          ? `The next goes on ${formatLongDate(nextReminderOn)}.`
          : state === 'open'
            ? 'None is to come.'
            : 'They have ended.'}
      </p>
    </>
  );
}

function DueDay({ opened }: Pick<Props, 'opened'>) {
  const { request, busy, change, fault } = opened;
  const [day, setDay] = useState(request.dueOn);
  return (
    <form
      className="stacked"
      onSubmit={(event) => {
        event.preventDefault();
        void change({ change: 'due', dueOn: day, version: request.version });
      }}
    >
      <Field
        label="Another due day"
        type="date"
        size="small"
        hint="The client sees it on the page; reminders go by it."
        value={day}
        error={fault?.fields.dueOn?.[0]}
        onChange={(event) => setDay(event.target.value)}
      />
      <p className="actions actions-inline">
        <Button
          type="submit"
          kind="secondary"
          size="small"
          busy={busy}
          waiting={day === request.dueOn && 'choose another day'}
        >
          Move the day
        </Button>
      </p>
    </form>
  );
}

function End({ opened }: Pick<Props, 'opened'>) {
  const { request, busy, change } = opened;
  const [asked, setAsked] = useState(false);
  const { version, items, state } = request;
  if (state !== 'open') {
    return (
      <Button kind="secondary" size="small" busy={busy} onClick={() => void change({ change: 'reopen', version })}>
        Open it again
      </Button>
    );
  }
  if (asked) {
    return (
      <Notice title={`Withdraw request ${request.number}?`}>
        <span>The client can send nothing more for it and is told so on the page. What came stays here.</span>
        <span className="actions">
          <Button
            kind="secondary"
            size="small"
            busy={busy}
            onClick={() => void change({ change: 'withdraw', version })}
          >
            Withdraw it
          </Button>
          <Button kind="quiet" onClick={() => setAsked(false)}>
            Leave it open
          </Button>
        </span>
      </Notice>
    );
  }
  const isDone = items.every((item) => item.state === 'accepted');
  return (
    <p className="actions actions-inline">
      <Button
        kind={isDone ? 'primary' : 'secondary'}
        size="small"
        busy={busy}
        onClick={() => void change({ change: 'close', version })}
      >
        Close the request
      </Button>
      <Button kind="quiet" onClick={() => setAsked(true)}>
        Withdraw
      </Button>
    </p>
  );
}

/** The result column of a request: due day, people and their mails, reminders, its end. */
export function RequestResult({ opened, timeZone }: Props) {
  const { request } = opened;
  const { dueOn, daysLeft, sentOn, by, people, internalNote, items, state } = request;
  const accepted = items.filter((item) => item.state === 'accepted').length;
  return (
    <div className="request-result">
      <ResultSums
        rows={[
          { label: 'Asked', value: `${formatLongDate(sentOn)}` },
          { label: 'By', value: by },
          { label: 'Due', value: formatLongDate(dueOn), kind: 'strong' },
          { label: '', value: dueWords(daysLeft), tone: daysLeft < 0 && state === 'open' ? 'fault' : undefined },
          { label: 'Accepted', value: `${accepted} of ${items.length}`, kind: 'total' },
        ]}
      />
      <End opened={opened} />
      {state === 'open' && <DueDay key={dueOn} opened={opened} />}
      <h3>People</h3>
      <ul>
        {people.map((person) => (
          <Person key={person.userId} person={person} opened={opened} timeZone={timeZone} />
        ))}
      </ul>
      <Reminders opened={opened} />
      {internalNote && (
        <>
          <h3>Note of the practice</h3>
          <p className="whitespace-pre-line">{internalNote}</p>
        </>
      )}
    </div>
  );
}
