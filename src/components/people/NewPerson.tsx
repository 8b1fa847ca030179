import { useMutation } from '@tanstack/react-query';
import { FormProvider, useForm, useFormContext } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { addPerson } from '../../client/people';
import { Queries } from '../../client/queries';
import type { LetterOutcome } from '../../schemas/account';
import { personInput, rightWords, type PersonInput } from '../../schemas/client';
import { draftResolver } from '../ui/form-errors';
import { Button } from '../ui/Button';
import { CheckField, Field, SelectField } from '../ui/Field';
import { Notice } from '../ui/Notice';

export interface NewPersonProps {
  clients: { id: number; name: string }[];
  /** The one client of the list is taken without asking; nobody of the practice can be added here. */
  onlyClient?: boolean;
}

interface Draft {
  role: PersonInput['role'];
  name: string;
  email: string;
  clientId: string;
  rights: { view: boolean; record: boolean; decide: boolean; pay: boolean };
}

const toInput = ({ clientId, rights, ...person }: Draft) =>
  person.role === 'client' ? { ...person, clientId: Number(clientId), rights } : person;

function RoleFields({ clients }: { clients: NewPersonProps['clients'] }) {
  const { register, watch, formState } = useFormContext<Draft>();
  return (
    <>
      <SelectField
        label="As"
        options={[
          { value: 'consultant', label: 'consultant' },
          { value: 'partner', label: 'partner' },
          { value: 'client', label: 'person of a client' },
        ]}
        {...register('role')}
      />
      {watch('role') === 'client' && (
        <SelectField
          label="Client"
          placeholder="Choose the client"
          options={clients.map(({ id, name }) => ({ value: String(id), label: name }))}
          {...register('clientId')}
          error={formState.errors.clientId}
        />
      )}
    </>
  );
}

function RightFields() {
  const { register } = useFormContext<Draft>();
  return (
    <fieldset className="whole">
      <legend>May</legend>
      <div className="flex flex-wrap gap-x-6 gap-y-1">
        {Object.entries(rightWords).map(([name, words]) => (
          <CheckField key={name} label={words} {...register(`rights.${name as keyof typeof rightWords}`)} />
        ))}
      </div>
    </fieldset>
  );
}

function Sent({ name, letter }: { name: string; letter: LetterOutcome }) {
  return letter.error ? (
    <Notice kind="fault" title={`The account of ${name} is made, but the letter did not go. ${letter.error}`} />
  ) : (
    <Notice kind="done" title={`The invitation is on its way to ${letter.recipient}.`} />
  );
}

function useNewPerson({ clients, onlyClient = false }: NewPersonProps) {
  const form = useForm<Draft>({
    defaultValues: {
      role: onlyClient ? 'client' : 'consultant',
      name: '',
      email: '',
      clientId: onlyClient ? String(clients[0]?.id) : '',
      rights: { view: true, record: false, decide: false, pay: false },
    },
    resolver: draftResolver<Draft>(personInput, toInput),
  });
  const draft = useDraft<Draft>('person:new', form);
  const add = useMutation({
    mutationFn: (values: Draft) => addPerson(personInput.parse(toInput(values))),
    onSuccess: ({ letter }) => {
      if (!letter.error) setTimeout(() => location.reload(), 1500);
    },
    onError: (error) => {
      if (draft.rescue(error) || !(error instanceof ApiError)) return;
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as 'email', { type: 'server', message: fault[0] }, { shouldFocus: true });
    },
  });
  return { form, draft, add };
}

function Form(props: NewPersonProps) {
  const { form, draft, add } = useNewPerson(props);
  const { errors } = form.formState;
  return (
    <FormProvider {...form}>
      <form noValidate onSubmit={form.handleSubmit((values) => add.mutate(values))}>
        {draft.restored && (
          <Notice title="This is what you typed before you had to sign in again. It is not sent yet." />
        )}
        <div className="form-grid">
          <Field label="Name" autoComplete="off" {...form.register('name')} error={errors.name} />
          <Field label="E-mail" type="email" autoComplete="off" {...form.register('email')} error={errors.email} />
          {!props.onlyClient && <RoleFields clients={props.clients} />}
          {form.watch('role') === 'client' && <RightFields />}
          <div className="whole actions">
            <Button type="submit" busy={add.isPending || add.isSuccess}>
              Make the account and invite
            </Button>
          </div>
        </div>
        {add.data && <Sent name={add.data.person.name} letter={add.data.letter} />}
        {add.error && Object.keys(errors).length === 0 && <Notice kind="fault" title={add.error.message} />}
      </form>
    </FormProvider>
  );
}

/** Makes an account and mails its invitation. */
export function NewPerson(props: NewPersonProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
