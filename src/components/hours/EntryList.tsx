import { useMutation } from '@tanstack/react-query';
import { Fragment, useState } from 'react';
import { removeHours, type HoursAnswer } from '../../client/hours';
import type { HourView } from '../../schemas/hour';
import { Button } from '../ui/Button';
import { formatAmount, formatCount, formatHours, formatWeekday } from '../ui/format';
import { Notice } from '../ui/Notice';
import { HourForm } from './HourForm';
import { formOf, stationLabel, worthOf } from './words';

interface EntryProps {
  entry: HourView;
  code: string;
  currency: string;
  withPerson: boolean;
  onChanged: () => void;
}

type Opened = 'closed' | 'correct' | 'remove';

function RemoveEntry({ entry, onChanged, onKeep }: EntryProps & { onKeep: () => void }) {
  const remove = useMutation({ mutationFn: () => removeHours(entry.id, entry.version), onSuccess: onChanged });
  const what = `${formatHours(entry.minutes)} h of ${formatWeekday(entry.day)}, “${entry.note}”`;
  return (
    <Notice kind={remove.error ? 'fault' : 'plain'} title={remove.error ? remove.error.message : `Remove ${what}?`}>
      <span className="flex gap-4">
        <Button kind="secondary" size="small" busy={remove.isPending} onClick={() => remove.mutate()}>
          Remove these hours
        </Button>
        <Button kind="quiet" onClick={onKeep}>
          Keep them
        </Button>
      </span>
    </Notice>
  );
}

function Entry(props: EntryProps) {
  const { entry, code, currency, withPerson, onChanged } = props;
  const [opened, setOpened] = useState<Opened>('closed');
  const worth = worthOf(entry, currency);
  const close = () => setOpened('closed');
  const saved = () => {
    close();
    onChanged();
  };
  return (
    <Fragment>
      <tr className={opened === 'closed' ? undefined : 'chosen'}>
        <th scope="row" className="left">
          {formatWeekday(entry.day)}
        </th>
        {withPerson && (
          <td className="left" data-name="Person">
            {entry.person}
          </td>
        )}
        <td className="left" data-name="Station">
          {stationLabel(entry.station)}
        </td>
        <td className="left wrap note">{entry.note}</td>
        <td className="strong" data-name="Hours, h">
          {formatHours(entry.minutes)}
        </td>
        <td data-name={`Rate, ${currency}/h`}>
          {entry.perHourMinor === null ? '' : formatAmount(entry.perHourMinor, currency)}
        </td>
        <td className={worth.tone} data-name={`Amount, ${currency}`}>
          {worth.text}
        </td>
        <td className="acts">
          {entry.mine && (
            <>
              <Button kind="quiet" aria-expanded={opened === 'correct'} onClick={() => setOpened('correct')}>
                Correct
              </Button>
              <Button kind="quiet" aria-expanded={opened === 'remove'} onClick={() => setOpened('remove')}>
                Remove
              </Button>
            </>
          )}
        </td>
      </tr>
      {opened !== 'closed' && (
        <tr className="why-row">
          <td colSpan={withPerson ? 8 : 7}>
            <div className="entry-opened">
              {opened === 'correct' ? (
                <HourForm code={code} entry={entry} start={formOf(entry)} onSaved={saved} onClose={close} />
              ) : (
                <RemoveEntry {...props} onChanged={saved} onKeep={close} />
              )}
            </div>
          </td>
        </tr>
      )}
    </Fragment>
  );
}

export interface EntryListProps {
  code: string;
  answer: HoursAnswer;
  withPerson: boolean;
  onChanged: () => void;
}

/** All entries, newest first; one's own can be corrected or removed in their place. */
export function EntryList({ code, answer, withPerson, onChanged }: EntryListProps) {
  const { entries, sums, currency } = answer;
  const columns: [string, string?, string?][] = [
    ['Day', undefined, 'left'],
    ...(withPerson ? [['Person', undefined, 'left'] as [string, string?, string?]] : []),
    ['Station', undefined, 'left'],
    ['What was done', undefined, 'left'],
    ['Hours', 'h'],
    ['Rate', `${currency}/h`],
    ['Amount', currency],
  ];
  return (
    <div className="ledger-scroll" role="region" aria-label="Entries" tabIndex={0}>
      <table className="ledger ledger-roomy ledger-stack entry-list">
        <thead>
          <tr>
            {columns.map(([head, unit, align]) => (
              <th key={head} scope="col" className={align}>
                {head}
                {unit && <span className="unit">{unit}</span>}
              </th>
            ))}
            <th scope="col">
              <span className="unseen">Actions</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {entries.map((entry) => (
            <Entry key={entry.id} {...{ entry, code, currency, withPerson, onChanged }} />
          ))}
        </tbody>
        <tfoot>
          <tr>
            <th scope="row" className="left" colSpan={withPerson ? 4 : 3}>
              {formatCount(entries.length, 'entry', 'entries')}
            </th>
            <td data-name="Hours, h">{formatHours(sums.minutes)}</td>
            <td />
            <td data-name={`Amount, ${currency}`}>{formatAmount(sums.amountMinor, currency)}</td>
            <td />
          </tr>
        </tfoot>
      </table>
    </div>
  );
}
