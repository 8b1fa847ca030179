import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation } from '@tanstack/react-query';
import { useId, useState } from 'react';
import { useForm } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { changeHours, logHours } from '../../client/hours';
import { hourInput, parseMinutes, type HourForm as Values, type HourView } from '../../schemas/hour';
import { Button } from '../ui/Button';
import { CheckField, Field, SelectField } from '../ui/Field';
import { formatClock, formatHours } from '../ui/format';
import { Notice } from '../ui/Notice';
import { StaleCompare, type StaleDifference } from '../ui/StaleCompare';
import { formOf, stationOptions } from './words';

export interface HourFormProps {
  code: string;
  /** The entry that is corrected; none for a new one. */
  entry?: HourView;
  start: Values;
  onSaved: (entry: HourView) => void;
  onClose?: () => void;
}

type Stored = Pick<HourView, 'day' | 'minutes' | 'station' | 'note' | 'billable' | 'version'>;

function differences(mine: Values, theirs: Stored): StaleDifference[] {
  const rows: [string, string, string][] = [
    ['Day', mine.day, theirs.day],
    ['Time', formatClock(parseMinutes(mine.time) ?? 0), formatClock(theirs.minutes)],
    ['Station', mine.station, theirs.station],
    ['What you did', mine.note, theirs.note],
    ['Billable', mine.billable ? 'yes' : 'no', theirs.billable ? 'yes' : 'no'],
  ];
  return rows.filter(([, a, b]) => a !== b).map(([label, a, b]) => ({ label, mine: a, theirs: b }));
}

function useHourForm({ code, entry, start, onSaved }: HourFormProps) {
  // Raw: what is typed goes to the server, which reads it by the same schema.
  const form = useForm({ defaultValues: start, resolver: zodResolver(hourInput, undefined, { raw: true }) });
  const draft = useDraft<Values>(`hours:${code}:${entry?.id ?? 'new'}`, form);
  const [stored, setStored] = useState<Stored | null>(null);
  const save = useMutation({
    mutationFn: ({ values, version }: { values: Values; version: number }) =>
      entry ? changeHours(entry.id, version, values) : logHours(code, values),
    onSuccess: (saved, { values }) => {
      setStored(null);
      if (!entry) form.reset({ ...values, time: '', note: '' });
      onSaved(saved);
    },
    onError: (error) => {
      if (draft.rescue(error) || !(error instanceof ApiError)) return;
      if (error.code === 'stale' && error.details.theirs) setStored(error.details.theirs as Stored);
      for (const [name, fault] of Object.entries(error.fields))
        form.setError(name as keyof Values, { type: 'server', message: fault[0] }, { shouldFocus: true });
    },
  });
  const [version, setVersion] = useState(entry?.version ?? 0);
  const submit = (over: number) => form.handleSubmit((values) => save.mutate({ values, version: over }));
  return { form, draft, stored, setStored, save, submit, version, setVersion };
}

/** One entry of hours: day, time as it is typed, where, what. */
export function HourForm(props: HourFormProps) {
  const { entry, start, onClose } = props;
  const { form, draft, stored, setStored, save, submit, version, setVersion } = useHourForm(props);
  const { errors } = form.formState;
  const noteId = useId();
  const minutes = parseMinutes(form.watch('time') ?? '');
  const failure = save.error && !stored && Object.keys(errors).length === 0 ? save.error.message : null;
  return (
    <form className="hour-form" noValidate onSubmit={submit(version)}>
      {draft.restored && (
        <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />
      )}
      <div className="hour-fields">
        <Field label="Day" type="date" defaultValue={start.day} {...form.register('day')} error={errors.day} />
        <Field
          label="Time"
          autoComplete="off"
          placeholder="1:45"
          {...form.register('time')}
          error={errors.time}
          hint={minutes === null ? undefined : `${formatHours(minutes)} h`}
        />
        <SelectField label="Station" options={stationOptions} {...form.register('station')} error={errors.station} />
        <Field label="What you did" id={noteId} autoComplete="off" {...form.register('note')} error={errors.note} />
        <div className="hour-actions">
          <CheckField label="billable" defaultChecked={start.billable} {...form.register('billable')} />
          <Button type="submit" kind={entry ? 'secondary' : 'primary'} busy={save.isPending}>
            {entry ? 'Save the correction' : 'Write hours'}
          </Button>
          {onClose && (
            <Button kind="quiet" onClick={onClose}>
              Leave as it was
            </Button>
          )}
        </div>
      </div>
      {failure && <Notice kind="fault" title={failure} />}
      {stored && (
        <StaleCompare
          what="This entry"
          differences={differences(form.getValues(), stored)}
          busy={save.isPending}
          onLoadTheirs={() => {
            form.reset(formOf({ ...(entry as HourView), ...stored }));
            setVersion(stored.version);
            setStored(null);
          }}
          onSaveMine={() => void submit(stored.version)()}
        />
      )}
    </form>
  );
}
