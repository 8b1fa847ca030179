import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { moveFinding, noteFinding } from '../../client/findings';
import { moveFindingInput, type FindingState, type FindingView } from '../../schemas/finding';
import { Button } from '../ui/Button';
import { Field, NumberField, SelectField, TextAreaField } from '../ui/Field';
import { draftResolver } from '../ui/form-errors';
import { formatAmount, formatDateTime } from '../ui/format';
import { Notice } from '../ui/Notice';
import { StaleCompare } from '../ui/StaleCompare';
import { typedNumber } from '../ui/typed-number';
import { changeWords, moveWords, stateWords } from './finding-words';

interface Draft {
  to: FindingState;
  day: string;
  amount: string;
  note: string;
}

export interface FindingPanelProps {
  finding: FindingView;
  currency: string;
  today: string;
}

const toInput = ({ to, day, amount, note }: Draft, version: number) => ({
  version,
  to,
  day,
  amount: to === 'refunded' ? (typedNumber(amount) ?? null) : null,
  note,
});

interface Stored {
  to: FindingState;
  version: number;
}

function useMove({ finding, currency, today }: FindingPanelProps) {
  const form = useForm<Draft>({
    defaultValues: {
      to: finding.moves[0] ?? finding.state,
      day: today,
      amount: formatAmount(finding.wasMinor ?? finding.amountMinor, currency),
      note: '',
    },
    resolver: draftResolver<Draft>(moveFindingInput, (draft) => toInput(draft, finding.version)),
  });
  const kept = useDraft<Draft>(`finding:${finding.id}`, form);
  const [stored, setStored] = useState<Stored | null>(null);
  const move = useMutation({
    mutationFn: ({ draft, version }: { draft: Draft; version: number }) =>
      moveFinding(finding.id, moveFindingInput.parse(toInput(draft, version))),
    onSuccess: () => location.reload(),
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      setStored(error.code === 'stale' ? (error.details.theirs as Stored) : null);
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as keyof Draft, { type: 'server', message: fault[0] });
    },
  });
  const submit = (version: number) => form.handleSubmit((draft) => move.mutate({ draft, version }))();
  return { form, kept, stored, move, submit };
}

function MoveForm(props: FindingPanelProps) {
  const { finding, currency } = props;
  const { form, kept, stored, move, submit } = useMove(props);
  const { errors } = form.formState;
  const to = form.watch('to');
  return (
    <form
      className="stacked"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        void submit(finding.version);
      }}
    >
      {kept.restored && <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />}
      <div className="form-grid">
        <SelectField
          label="What happened"
          options={finding.moves.map((state) => ({ value: state, label: moveWords(finding.state, state) }))}
          error={errors.to?.message}
          {...form.register('to')}
        />
        <Field type="date" label="On" error={errors.day?.message} {...form.register('day')} />
        {to === 'refunded' && (
          <NumberField
            label="Amount refunded"
            unit={currency}
            hint="As credited; it may differ from what was claimed."
            error={errors.amount?.message}
            {...form.register('amount')}
          />
        )}
      </div>
      <TextAreaField
        label={to === 'dropped' ? 'Why it is dropped' : 'Note, if there is one'}
        rows={2}
        error={errors.note?.message}
        {...form.register('note')}
      />
      {move.error && !stored && <Notice kind="fault" title="Nothing was kept.">{` ${move.error.message}`}</Notice>}
      {stored && (
        <StaleCompare
          what="This finding"
          differences={[{ label: 'State', mine: stateWords[to], theirs: stateWords[stored.to] }]}
          onLoadTheirs={() => location.reload()}
          onSaveMine={() => void submit(stored.version)}
          busy={move.isPending}
        />
      )}
      <div className="actions actions-inline">
        <Button type="submit" kind="secondary" size="small" busy={move.isPending}>
          Keep
        </Button>
      </div>
    </form>
  );
}

function NoteForm({ finding }: FindingPanelProps) {
  const [note, setNote] = useState('');
  const add = useMutation({
    mutationFn: () => noteFinding(finding.id, { note }),
    onSuccess: () => location.reload(),
  });
  return (
    <form
      className="stacked"
      onSubmit={(event) => {
        event.preventDefault();
        add.mutate();
      }}
    >
      <TextAreaField
        label="A note of the practice"
        hint="The client never sees it."
        rows={2}
        maxLength={2000}
        value={note}
        onChange={(event) => setNote(event.target.value)}
        error={add.error?.message}
      />
      <div className="actions actions-inline">
        <Button
          type="submit"
          kind="secondary"
          size="small"
          busy={add.isPending}
          waiting={!note.trim() && 'write it first'}
        >
          Add note
        </Button>
      </div>
    </form>
  );
}

function History({ finding, currency }: FindingPanelProps) {
  if (finding.changes.length === 0) return <p className="hint">Nobody has decided anything about it yet.</p>;
  return (
    <ol className="finding-history" aria-label="History, the newest first">
      {[...finding.changes].reverse().map((change) => (
        <li key={change.id}>
          <b>{changeWords(change, currency)}</b>
          {change.note && <span>{change.note}</span>}
          <small>
            {change.by}, {formatDateTime(change.at)} UTC
          </small>
        </li>
      ))}
    </ol>
  );
}

/** A finding opened: what happened to it, a note, and its history. */
export function FindingPanel(props: FindingPanelProps) {
  return (
    <div className="finding-panel">
      <div>
        <p className="finding-sentence">{props.finding.sentence}</p>
        <MoveForm {...props} />
      </div>
      <div>
        <History {...props} />
        <NoteForm {...props} />
      </div>
    </div>
  );
}
