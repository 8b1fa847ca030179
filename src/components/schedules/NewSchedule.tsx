import { zodResolver } from '@hookform/resolvers/zod';
import { useState } from 'react';
import { useForm } from 'react-hook-form';
import { z } from 'zod';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { createSchedule } from '../../client/schedules';
import { newScheduleInput, type Beginning } from '../../schemas/schedule-editor';
import { Button } from '../ui/Button';
import { Field, SelectField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import { Notice } from '../ui/Notice';

/** Something to begin from: "form:kvarh-cliff". */
export interface BeginningChoice {
  value: string;
  label: string;
}

interface Values {
  title: string;
  slug: string;
  from: string;
}

const draftSchema = z.object({
  title: newScheduleInput.shape.title,
  slug: newScheduleInput.shape.slug,
  from: z.string().min(1, 'Choose what it begins from.'),
});

function beginningOf(value: string): Beginning {
  const [kind, id = ''] = value.split(':');
  return kind === 'form' || kind === 'schedule' ? { kind, id } : { kind: 'blank' };
}

/** An id made of a title: "Large power, 2026" -> "large-power-2026". */
const slugOf = (title: string) =>
  title
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
    .slice(0, 60);

/** Island: names a schedule of one's own and what it begins from; leads to its editor. */
export function NewSchedule({ choices, from }: { choices: BeginningChoice[]; from: string }) {
  const form = useForm<Values>({
    defaultValues: { title: '', slug: '', from: choices.some(({ value }) => value === from) ? from : '' },
    resolver: zodResolver(draftSchema),
    mode: 'onTouched',
  });
  const kept = useDraft<Values>('schedules:new', form);
  const [fault, setFault] = useState<string | null>(null);
  const { errors, isSubmitting, dirtyFields } = form.formState;
  const send = async ({ title, slug, from: value }: Values) => {
    setFault(null);
    try {
      const { id } = await createSchedule({ title, slug, from: beginningOf(value) });
      location.assign(`/schedules/${id}/edit`);
    } catch (error) {
      if (kept.rescue(error)) return;
      if (!(error instanceof ApiError)) throw error;
      for (const [path, [message]] of Object.entries(error.fields)) form.setError(path as 'slug', { message });
      setFault(error.message);
    }
  };
  return (
    <form noValidate className="stacked choose-schedule" onSubmit={(event) => void form.handleSubmit(send)(event)}>
      {kept.restored && <Notice title="This is what you typed before you had to sign in again." />}
      <SelectField
        label="Begins from"
        placeholder="Choose a form or a schedule"
        options={choices}
        error={messageAt(errors, 'from')}
        {...form.register('from')}
      />
      <Field
        label="Title"
        hint="As the utility's sheet is called: Large power at primary voltage."
        error={messageAt(errors, 'title')}
        {...form.register('title', {
          onChange: (event: { target: { value: string } }) => {
            if (!dirtyFields.slug) form.setValue('slug', slugOf(event.target.value));
          },
        })}
      />
      <Field
        label="Id"
        hint="Its name in addresses and files: small letters, digits and hyphens. It stays for good."
        error={messageAt(errors, 'slug')}
        {...form.register('slug')}
      />
      {fault && <Notice kind="fault" title="No schedule was begun.">{` ${fault}`}</Notice>}
      <div className="actions actions-inline">
        <Button type="submit" busy={isSubmitting}>
          Begin and write
        </Button>
      </div>
    </form>
  );
}
