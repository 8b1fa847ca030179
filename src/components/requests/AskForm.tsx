import { useMutation } from '@tanstack/react-query';
import { useForm, type UseFormReturn } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { Queries } from '../../client/queries';
import { sendRequest } from '../../client/requests';
import { requestInput, type ItemKind, type RequestDraft, type RequestInput } from '../../schemas/request';
import { ColumnNames, SheetPart } from '../intake/Sheet';
import { Button } from '../ui/Button';
import { CheckField, Field, NumberField, TextAreaField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import { formatCount } from '../ui/format';
import { Notice } from '../ui/Notice';
import { chosenRows, formPath, previewContent, startDraft, toRequestInput, type AskDraft } from './ask-draft';
import { AskRows } from './AskRows';
import { MailPreview } from './MailPreview';

export interface AskFormProps {
  draft: RequestDraft;
  /** The kind the page was opened for. */
  about: ItemKind | null;
  /** New for every opening of the page: pressing twice sends once. */
  requestId: string;
  /** Where the people of the client are entered. */
  peopleHref: string;
}

type Form = UseFormReturn<AskDraft>;

function useAsk({ draft, about, requestId }: AskFormProps) {
  const form = useForm<AskDraft>({ defaultValues: startDraft(draft, about) });
  const kept = useDraft<AskDraft>(`request:${draft.code}`, form);
  const mark = (path: string, message: string | undefined) =>
    form.setError(formPath(path, chosenRows(form.getValues())) as keyof AskDraft, { type: 'check', message });
  const sending = useMutation({
    mutationFn: (input: RequestInput) => sendRequest(draft.code, input),
    onSuccess: ({ code, number }) => location.assign(`/engagements/${code}/requests/${number}`),
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      for (const [path, [message]] of Object.entries(error.fields)) mark(path, message);
    },
  });
  const send = () => {
    form.clearErrors();
    const parsed = requestInput.safeParse(toRequestInput(form.getValues(), requestId));
    if (parsed.success) return sending.mutate(parsed.data);
    for (const issue of parsed.error.issues) mark(issue.path.join('.'), issue.message);
    requestAnimationFrame(() =>
      document.querySelector('.field-error, .notice-fault')?.scrollIntoView({ block: 'center' }),
    );
  };
  return { form, kept, sending, send };
}

function People({ form, people, peopleHref }: { form: Form; people: RequestDraft['people']; peopleHref: string }) {
  const fault = messageAt(form.formState.errors, 'userIds');
  if (people.length === 0) {
    return (
      <Notice title="The client has no people here yet.">
        <a className="text-link" href={peopleHref}>
          See the client’s people
        </a>
      </Notice>
    );
  }
  return (
    <fieldset>
      <legend>Who gets it</legend>
      {people.map(({ id, name, email, hasPassword }) => (
        <CheckField
          key={id}
          value={String(id)}
          label={`${name}, ${email}`}
          hint={hasPassword ? undefined : 'Has no password yet; the mail brings a link to choose one.'}
          {...form.register('userIds')}
        />
      ))}
      {fault && <Notice kind="fault" title={fault} />}
    </fieldset>
  );
}

function When({ form, today }: { form: Form; today: string }) {
  const error = (name: keyof AskDraft) => messageAt(form.formState.errors, name);
  return (
    <div className="form-grid">
      <Field label="Due" type="date" min={today} {...form.register('dueOn')} error={error('dueOn')} />
      <NumberField
        label="Remind before it"
        unit="days"
        hint="Empty: not at all."
        {...form.register('daysBefore')}
        error={error('daysBefore')}
      />
      <NumberField
        label="Remind after it, every"
        unit="days"
        hint="Three times, then it is yours to call."
        {...form.register('everyDaysAfter')}
        error={error('everyDaysAfter')}
      />
      <CheckField label="Remind on the day itself" {...form.register('onDue')} />
    </div>
  );
}

function Words({ form }: { form: Form }) {
  const error = (name: keyof AskDraft) => messageAt(form.formState.errors, name);
  return (
    <div className="word-pair">
      <TextAreaField label="A word of your own in the mail" rows={3} {...form.register('note')} error={error('note')} />
      <TextAreaField
        label="Note for the practice alone"
        rows={3}
        {...form.register('internalNote')}
        error={error('internalNote')}
      />
    </div>
  );
}

function AskSheet(props: AskFormProps) {
  const { draft, peopleHref } = props;
  const { form, kept, sending, send } = useAsk(props);
  const typed = form.watch();
  const count = chosenRows(typed).length;
  const people = typed.userIds.length;
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <ColumnNames />
      <SheetPart
        id="things"
        number="1"
        title="What is asked for"
        lead="Drafted from what is missing here. Untick what is not to be asked, change the words as you like."
        reference={<p>Bills, gaps of the year, columns the meter’s files lack, values assumed for motors</p>}
      >
        {kept.restored && <Notice title="This is what you typed before you had to sign in again. Nothing was sent." />}
        <AskRows form={form} motors={draft.motors} />
      </SheetPart>
      <SheetPart
        id="people"
        number="2"
        title="To whom, and by when"
        lead="Each person gets a mail of their own with a link to the list."
        reference={<p>Reminders go in the morning, one mail a person a day, and end when everything is answered</p>}
      >
        <div className="stacked">
          <People form={form} people={draft.people} peopleHref={peopleHref} />
          <When form={form} today={draft.today} />
          <Words form={form} />
        </div>
      </SheetPart>
      <SheetPart
        id="mail"
        number="3"
        title="The mail as it goes"
        result={
          <div className="stacked">
            <p>
              {formatCount(count, 'thing')} for {formatCount(people, 'person', 'people')}.
            </p>
            <Button type="submit" busy={sending.isPending || sending.isSuccess} full>
              Send the request
            </Button>
            {sending.error && (
              <Notice kind="fault" title="Nothing was sent.">
                {sending.error.message}
              </Notice>
            )}
          </div>
        }
      >
        <MailPreview content={previewContent(typed, draft)} />
      </SheetPart>
    </form>
  );
}

/** Island: a request to the client, drafted from what is missing, with its mail as it goes. */
export function AskForm(props: AskFormProps) {
  return (
    <Queries>
      <AskSheet {...props} />
    </Queries>
  );
}
