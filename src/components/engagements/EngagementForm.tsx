import { useMutation } from '@tanstack/react-query';
import { useEffect, useRef } from 'react';
import { FormProvider, useForm, useFormContext } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { createEngagement, proposeCode } from '../../client/engagements';
import { Queries } from '../../client/queries';
import { addDays, addMonths, isCalendarDate } from '../../core/load';
import { engagementInput, type EngagementChoices } from '../../schemas/engagement';
import { SheetPart } from '../intake/Sheet';
import { draftResolver, messageAt } from '../ui/form-errors';
import { Button } from '../ui/Button';
import { CheckField, Field, NumberField, SelectField } from '../ui/Field';
import { formatDate } from '../ui/format';
import { Notice } from '../ui/Notice';
import { emptyDraft, firstId, toInput, type EngagementDraft } from './draft';

export interface EngagementFormProps {
  choices: EngagementChoices;
  today: string;
}

type Path = Parameters<ReturnType<typeof useForm<EngagementDraft>>['register']>[0];

/** Wiring of one field by its path. */
function useEntry() {
  const { register, formState } = useFormContext<EngagementDraft>();
  return (path: Path, faultAt: string = path) => ({ ...register(path), error: messageAt(formState.errors, faultAt) });
}

const options = (rows: { id: number; label: string }[], fresh: string) => [
  ...rows.map(({ id, label }) => ({ value: String(id), label })),
  { value: 'new', label: fresh },
];

function ClientPart({ choices }: { choices: EngagementChoices }) {
  const entry = useEntry();
  const { watch } = useFormContext<EngagementDraft>();
  const known = choices.clients.map(({ id, name }) => ({ id, label: name }));
  return (
    <SheetPart id="client" number="1" title="Client" reference={<p>One you work for, or a new one</p>}>
      <div className="form-grid">
        <SelectField label="Client" options={options(known, 'A new client')} {...entry('client.pick', 'client.id')} />
        {watch('client.pick') === 'new' && (
          <>
            <Field label="Name of the client" {...entry('client.name')} />
            <Field label="City" {...entry('client.city')} />
            <Field label="Currency" maxLength={3} hint="Of its bills and of your rates" {...entry('client.currency')} />
          </>
        )}
      </div>
    </SheetPart>
  );
}

function SitePart({ choices }: { choices: EngagementChoices }) {
  const entry = useEntry();
  const { watch } = useFormContext<EngagementDraft>();
  const client = choices.clients.find((one) => String(one.id) === watch('client.pick'));
  const site = client?.sites.find((one) => String(one.id) === watch('site.pick'));
  const sites = client?.sites.map(({ id, name }) => ({ id, label: name })) ?? [];
  const newSite = watch('site.pick') === 'new';
  return (
    <SheetPart
      id="site"
      number="2"
      title="Site and meter"
      reference={
        <>
          <p>Bills and readings are laid out in the site’s own clock</p>
          <p>A setting card is released by a licence of the site’s jurisdiction</p>
        </>
      }
    >
      <div className="form-grid">
        <SelectField label="Site" options={options(sites, 'A new site')} {...entry('site.pick', 'site.id')} />
        {newSite && (
          <>
            <Field label="Name of the site" {...entry('site.name')} />
            <Field label="Place" {...entry('site.place')} />
            <Field label="Time zone" list="time-zones" hint="Such as America/Chicago" {...entry('site.timeZone')} />
            <Field label="Jurisdiction" maxLength={6} hint="Such as IL" {...entry('site.jurisdiction')} />
            <datalist id="time-zones">
              {choices.timeZones.map((name) => (
                <option key={name} value={name} />
              ))}
            </datalist>
          </>
        )}
        <SelectField
          label="Meter"
          options={options(site?.meters ?? [], 'A new meter')}
          {...entry('meter.pick', 'meter.id')}
        />
        {watch('meter.pick') === 'new' && (
          <>
            <Field label="Number of the meter" hint="As on the bill" {...entry('meter.label')} />
            <NumberField label="Service voltage" unit="kV" hint="May stay empty" {...entry('meter.serviceVoltageKv')} />
          </>
        )}
      </div>
    </SheetPart>
  );
}

function WorkPart({ choices }: { choices: EngagementChoices }) {
  const entry = useEntry();
  const { watch, register, formState } = useFormContext<EngagementDraft>();
  const from = watch('yearFrom');
  const last = isCalendarDate(from) ? formatDate(addDays(addMonths(from, 12), -1)) : null;
  return (
    <SheetPart
      id="work"
      number="3"
      title="The work"
      reference={
        <>
          <p>The year is that of the bills: twelve of them, ended</p>
          <p>A consultant opens the engagement only as a member</p>
        </>
      }
    >
      <div className="form-grid">
        <Field
          label="First day of the year"
          type="date"
          hint={last ? `To ${last}` : undefined}
          {...entry('yearFrom')}
        />
        <Field label="Code" hint="Initials and number; it stands on every sheet" {...entry('code')} />
        <Field label="Title" {...entry('title')} />
        <NumberField label="Budget" unit="h" hint="May stay empty" {...entry('budgetHours')} />
        <fieldset className="whole">
          <legend>Who works on it</legend>
          <div className="flex flex-wrap gap-x-6 gap-y-1">
            {choices.staff.map(({ id, name, role }) => (
              <CheckField key={id} value={String(id)} label={`${name}, ${role}`} {...register('memberIds')} />
            ))}
          </div>
          {messageAt(formState.errors, 'memberIds') && (
            <p className="field-error">{messageAt(formState.errors, 'memberIds')}</p>
          )}
        </fieldset>
      </div>
    </SheetPart>
  );
}

/** Follows the client: its first site and meter, and the next code, unless that was typed. */
function useFollowing(form: ReturnType<typeof useForm<EngagementDraft>>, choices: EngagementChoices) {
  const { watch, setValue, getFieldState } = form;
  const [pick, name, sitePick] = watch(['client.pick', 'client.name', 'site.pick']);
  const before = useRef({ pick, sitePick });
  useEffect(() => {
    const client = choices.clients.find((one) => String(one.id) === pick);
    if (before.current.pick !== pick) setValue('site.pick', firstId(client?.sites));
    before.current.pick = pick;
    if (client && !getFieldState('code').isDirty) form.resetField('code', { defaultValue: client.code });
  }, [pick, choices, setValue, getFieldState, form]);
  useEffect(() => {
    const sites = choices.clients.flatMap((client) => client.sites);
    const site = sites.find((one) => String(one.id) === sitePick);
    if (before.current.sitePick !== sitePick) setValue('meter.pick', firstId(site?.meters));
    before.current.sitePick = sitePick;
  }, [sitePick, choices, setValue]);
  useEffect(() => {
    if (pick !== 'new' || name.trim().length < 3 || getFieldState('code').isDirty) return undefined;
    const timer = setTimeout(() => {
      proposeCode(name).then(
        ({ code }) => getFieldState('code').isDirty || form.resetField('code', { defaultValue: code }),
        () => undefined, // no proposal; the code is typed
      );
    }, 400);
    return () => clearTimeout(timer);
  }, [pick, name, getFieldState, form]);
}

function Form({ choices, today }: EngagementFormProps) {
  const form = useForm<EngagementDraft>({
    defaultValues: emptyDraft(choices, today),
    resolver: draftResolver<EngagementDraft>(engagementInput, (draft) => toInput(draft)),
  });
  // One number a form, made in the browser: a second click or try makes no second engagement.
  const requestId = useRef('');
  useEffect(() => {
    requestId.current ||= crypto.randomUUID();
    form.setValue('requestId', requestId.current);
  }, [form]);
  useFollowing(form, choices);
  const draft = useDraft<EngagementDraft>('engagement:new', form);
  const create = useMutation({
    mutationFn: (values: EngagementDraft) => createEngagement(toInput({ ...values, requestId: requestId.current })),
    onSuccess: ({ code }) => location.assign(`/engagements/${code}`),
    onError: (error) => {
      if (draft.rescue(error) || !(error instanceof ApiError)) return;
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as Path, { type: 'server', message: fault[0] });
    },
  });
  return (
    <FormProvider {...form}>
      <form noValidate onSubmit={form.handleSubmit((values) => create.mutate(values))}>
        <ClientPart choices={choices} />
        <SitePart choices={choices} />
        <WorkPart choices={choices} />
        <div className="columns">
          <div className="reference" />
          <div className="working">
            {draft.restored && (
              <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />
            )}
            {create.error && <Notice kind="fault" title={create.error.message} />}
            <div className="actions">
              <Button type="submit" busy={create.isPending || create.isSuccess}>
                Begin the engagement
              </Button>
              <a className="text-link text-sm" href="/engagements">
                Back to the list
              </a>
            </div>
          </div>
          <div className="result" />
        </div>
      </form>
    </FormProvider>
  );
}

/** The form of a new engagement: client, site, meter, year and members at once. */
export function EngagementForm(props: EngagementFormProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
