import { useMutation } from '@tanstack/react-query';
import { useForm, type UseFormReturn } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { sendUtilityLetter } from '../../client/findings';
import { Queries } from '../../client/queries';
import {
  letterFieldNames,
  totalOf,
  utilityLetterInput,
  type LetterClaim,
  type UtilityLetterContent,
  type UtilityLetterInput,
} from '../../schemas/utility-letter';
import { Button } from '../ui/Button';
import { CheckField, Field, TextAreaField } from '../ui/Field';
import { draftResolver, messageAt } from '../ui/form-errors';
import { formatMoney } from '../ui/format';
import { Notice } from '../ui/Notice';
import { UtilityLetterPage } from './UtilityLetterPage';

interface Draft {
  /** Ids of the chosen findings, as a form holds them. */
  chosen: string[];
  name: string;
  address: string;
  postal: string;
  account: string;
  opening: string;
  closing: string;
  replyBy: string;
}

export interface UtilityLetterDraftProps {
  code: string;
  draft: UtilityLetterContent;
  /** New for every opening of the page: pressing twice sends once. */
  requestId: string;
  chosen: number[];
}

const chosenOf = (claims: LetterClaim[], { chosen }: Draft) =>
  claims.filter(({ findingId }) => chosen.includes(String(findingId)));

function toInput(props: UtilityLetterDraftProps, draft: Draft, way: 'mail' | 'post') {
  const { chosen: _chosen, ...words } = draft;
  const findings = chosenOf(props.draft.claims, draft).map(({ findingId, version }) => ({ id: findingId, version }));
  return { requestId: props.requestId, findings, way, ...words };
}

/** The letter as it stands with what is typed. */
function contentOf({ draft }: UtilityLetterDraftProps, typed: Draft): UtilityLetterContent {
  const { name, address, postal, account, opening, closing, replyBy } = typed;
  const claims = chosenOf(draft.claims, typed);
  const by = /^\d{4}-\d{2}-\d{2}$/.test(replyBy) ? replyBy : draft.replyBy;
  return { ...draft, addressee: { name, address, postal }, account, opening, closing, replyBy: by, claims };
}

function useLetter(props: UtilityLetterDraftProps) {
  const { draft, chosen, code } = props;
  const form = useForm<Draft>({
    defaultValues: {
      chosen: chosen.map(String),
      ...draft.addressee,
      account: draft.account,
      opening: draft.opening,
      closing: draft.closing,
      replyBy: draft.replyBy,
    },
  });
  const kept = useDraft<Draft>(`utility-letter:${code}`, form);
  const sending = useMutation({
    mutationFn: (input: UtilityLetterInput) => sendUtilityLetter(code, input),
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as keyof Draft, { type: 'server', message: fault[0] });
    },
  });
  const send = async (way: 'mail' | 'post') => {
    const values = form.getValues();
    const resolve = draftResolver<Draft>(utilityLetterInput, (typed) => toInput(props, typed, way));
    const { errors } = await resolve(values, undefined, { fields: {}, shouldUseNativeValidation: false });
    form.clearErrors();
    for (const path of Object.keys(errors))
      form.setError((path === 'findings' ? 'chosen' : path) as keyof Draft, { message: messageAt(errors, path) });
    if (Object.keys(errors).length === 0) sending.mutate(utilityLetterInput.parse(toInput(props, values, way)));
  };
  return { form, kept, sending, send };
}

function Claims({ claims, currency, form }: { claims: LetterClaim[]; currency: string; form: UseFormReturn<Draft> }) {
  const fault = messageAt(form.formState.errors, 'chosen');
  return (
    <fieldset>
      <legend>Findings it puts to the utility</legend>
      {claims.map(({ findingId, letter, title, billName, amountMinor }) => (
        <CheckField
          key={findingId}
          value={String(findingId)}
          label={`${letter}, ${billName}: ${title}, ${formatMoney(amountMinor, currency)}`}
          {...form.register('chosen')}
        />
      ))}
      {fault && <Notice kind="fault" title={fault} />}
    </fieldset>
  );
}

function Fields({ form }: { form: UseFormReturn<Draft> }) {
  const entry = (name: keyof Draft) => ({ ...form.register(name), error: messageAt(form.formState.errors, name) });
  const fields = letterFieldNames.map((name) => `{${name}}`).join(' ');
  return (
    <>
      <div className="form-grid">
        <Field label="To" {...entry('name')} />
        <Field label="E-mail" type="email" {...entry('address')} />
        <Field label="Account with the utility" {...entry('account')} />
        <Field label="Answer by" type="date" {...entry('replyBy')} />
      </div>
      <TextAreaField label="Postal address, if it is posted" rows={2} {...entry('postal')} />
      <TextAreaField
        label="Opening words"
        hint={`Names in braces become figures: ${fields}`}
        rows={3}
        {...entry('opening')}
      />
      <TextAreaField label="Closing words" rows={3} {...entry('closing')} />
    </>
  );
}

function Sent({ code, sending }: { code: string; sending: ReturnType<typeof useLetter>['sending'] }) {
  const letter = sending.data;
  if (!letter) return null;
  const went = letter.state === 'sent';
  return (
    <Notice
      kind={letter.state === 'failed' ? 'fault' : 'done'}
      title={
        letter.state === 'failed'
          ? `Letter ${letter.number} did not go.`
          : `Letter ${letter.number} is ${letter.way === 'post' ? 'kept; print and post it' : went ? 'sent' : 'on its way'}.`
      }
    >
      {letter.error && <span>{letter.error}</span>}
      {went && <span>Its findings are put to the utility.</span>}
      <a className="text-link" href={`/engagements/${code}/tariff/letters/${letter.number}`}>
        Open the letter
      </a>
      <a className="text-link" href={`/engagements/${code}/tariff#findings`}>
        Back to the findings
      </a>
    </Notice>
  );
}

function Form(props: UtilityLetterDraftProps) {
  const { draft, code } = props;
  const { form, kept, sending, send } = useLetter(props);
  const content = contentOf(props, form.watch());
  const isDone = sending.isSuccess;
  const total = formatMoney(totalOf(content.claims), draft.currency);
  return (
    <>
      <form className="letter-form stacked" noValidate onSubmit={(event) => event.preventDefault()}>
        {kept.restored && <Notice title="This is what you typed before you had to sign in again. Nothing was sent." />}
        <Claims claims={draft.claims} currency={draft.currency} form={form} />
        <Fields form={form} />
        {sending.error && <Notice kind="fault" title="Nothing was sent.">{` ${sending.error.message}`}</Notice>}
        <Sent code={code} sending={sending} />
        {!isDone && (
          <div className="actions actions-inline">
            <Button busy={sending.isPending} onClick={() => void send('mail')}>
              Mail it and claim {total}
            </Button>
            <Button kind="secondary" busy={sending.isPending} onClick={() => void send('post')}>
              Keep it as posted
            </Button>
            <span className="hint">Either freezes the letter and marks its findings as put to the utility.</span>
          </div>
        )}
      </form>
      <UtilityLetterPage content={content} digest={null} />
    </>
  );
}

/** Island: the letter to the utility with the words that may be changed above and the page as it prints below. */
export function UtilityLetterDraft(props: UtilityLetterDraftProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
