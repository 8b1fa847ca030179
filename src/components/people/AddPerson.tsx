import { useMutation } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { addPerson } from '../../client/people';
import { personInput, rightWords, type PersonInput } from '../../schemas/client';
import { draftResolver } from '../motors/form-errors';
import { Button } from '../ui/Button';
import { CheckField, Field, SelectField } from '../ui/Field';
import { Notice } from '../ui/Notice';

export interface AddPersonProps {
  /** Clients to choose from; a single one is taken without asking, and only its people can be added. */
  clients: { id: number; name: string }[];
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

/** Makes an account and mails its invitation. */
export function AddPerson({ clients, onlyClient = false }: AddPersonProps) {
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
  const { errors } = form.formState;
  const isClient = form.watch('role') === 'client';
  return (
    <form noValidate onSubmit={form.handleSubmit((values) => add.mutate(values))}>
      {draft.restored && <Notice title="This is what you typed before you had to sign in again. It is not sent yet." />}
      <div className="form-grid">
        <Field label="Name" autoComplete="off" {...form.register('name')} error={errors.name} />
        <Field label="E-mail" type="email" autoComplete="off" {...form.register('email')} error={errors.email} />
        {!onlyClient && (
          <SelectField
            label="As"
            options={[
              { value: 'consultant', label: 'consultant' },
              { value: 'partner', label: 'partner' },
              { value: 'client', label: 'person of a client' },
            ]}
            {...form.register('role')}
          />
        )}
        {isClient && !onlyClient && (
          <SelectField
            label="Client"
            placeholder="Choose the client"
            options={clients.map(({ id, name }) => ({ value: String(id), label: name }))}
            {...form.register('clientId')}
            error={errors.clientId}
          />
        )}
        {isClient && (
          <fieldset className="whole">
            <legend>May</legend>
            <div className="flex flex-wrap gap-x-6 gap-y-1">
              {Object.entries(rightWords).map(([name, words]) => (
                <CheckField key={name} label={words} {...form.register(`rights.${name as keyof typeof rightWords}`)} />
              ))}
            </div>
          </fieldset>
        )}
        <div className="whole actions">
          <Button type="submit" busy={add.isPending || add.isSuccess}>
            Make the account and invite
          </Button>
        </div>
      </div>
      {add.data && (
        <Notice
          kind={add.data.letter.error ? 'fault' : 'done'}
          title={
            add.data.letter.error
              ? `The account of ${add.data.person.name} is made, but the letter did not go. ${add.data.letter.error}`
              : `The invitation is on its way to ${add.data.letter.recipient}.`
          }
        />
      )}
      {add.error && Object.keys(errors).length === 0 && <Notice kind="fault" title={add.error.message} />}
    </form>
  );
}
