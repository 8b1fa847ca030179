import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { FormProvider, useForm } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { Queries } from '../../client/queries';
import { changeShaftLoad } from '../../client/shaft-load';
import { loadSources, shaftLoadInput, type LoadSource, type ShaftLoadView } from '../../schemas/shaft-load';
import { Button } from '../ui/Button';
import { CheckField } from '../ui/Field';
import { FieldError } from '../ui/FieldError';
import { draftResolver, messageAt } from '../ui/form-errors';
import { Notice } from '../ui/Notice';
import { loadDraftOf, loadDraftToInput, type LoadDraft } from './load-draft';
import { LoadTestFields } from './LoadTestFields';
import { gapSentence, yearSentence } from './load-words';
import { ProfileFields } from './ProfileFields';
import { SubmeterFields } from './SubmeterFields';

export interface ShaftLoadPartProps {
  motor: { id: number; name: string; brushless: boolean };
  view: ShaftLoadView;
  /** Zone of the site, for the days of files. */
  timeZone: string;
}

const choices: Record<LoadSource, { label: string; hint: string }> = {
  calendar: { label: 'The shift calendar of the motor', hint: 'Days, hours and loads, as in the form above' },
  profile: { label: 'A profile by hour', hint: '24 loads for weekdays, Saturdays and Sundays' },
  submeter: { label: 'Its submeter', hint: 'What was metered at the motor, interval by interval' },
};

function useLoadForm(props: ShaftLoadPartProps) {
  const [view, setView] = useState(props.view);
  const form = useForm<LoadDraft>({
    defaultValues: loadDraftOf(props.view),
    resolver: draftResolver<LoadDraft>(shaftLoadInput, (draft) => loadDraftToInput(draft, view.version)),
  });
  const kept = useDraft<LoadDraft>(`shaft-load:${props.motor.id}`, form);
  const take = (saved: ShaftLoadView) => {
    setView(saved);
    form.clearErrors('source');
    form.setValue('source', saved.source);
  };
  const save = useMutation({
    mutationFn: (draft: LoadDraft) =>
      changeShaftLoad(props.motor.id, shaftLoadInput.parse(loadDraftToInput(draft, view.version))),
    onSuccess: take,
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as keyof LoadDraft, { type: 'server', message: fault[0] });
    },
  });
  const takeFile = (saved: ShaftLoadView) => {
    save.reset();
    take(saved);
  };
  return { form, kept, view, takeFile, save };
}

function Form(props: ShaftLoadPartProps) {
  const { motor, timeZone } = props;
  const { form, kept, view, takeFile, save } = useLoadForm(props);
  const source = form.watch('source');
  const gaps = gapSentence(view);
  return (
    <FormProvider {...form}>
      <form
        noValidate
        className="motor-form"
        onSubmit={(event) => void form.handleSubmit((draft) => save.mutate(draft))(event)}
      >
        {kept.restored && (
          <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />
        )}
        <fieldset>
          <legend>Where the shaft load comes from</legend>
          <div className="load-choice">
            {loadSources.map((one) => (
              <CheckField key={one} type="radio" value={one} {...choices[one]} {...form.register('source')} />
            ))}
          </div>
          <FieldError fault={messageAt(form.formState.errors, 'source')} id="load-source-error" />
          {source === 'profile' && <ProfileFields />}
          {source === 'submeter' && <SubmeterFields view={view} timeZone={timeZone} onChange={takeFile} />}
        </fieldset>
        <LoadTestFields test={view.test} brushless={motor.brushless} />
        {gaps && <Notice title={gaps} />}
        <Notice title={yearSentence(motor.name, view)} kind={save.isSuccess ? 'done' : 'plain'} />
        {save.error && <Notice kind="fault" title={save.error.message} />}
        <div className="actions">
          <Button type="submit" kind="secondary" busy={save.isPending}>
            Save the shaft load
          </Button>
        </div>
      </form>
    </FormProvider>
  );
}

/** Where a motor's load over the year comes from, and its load test. Saved by itself, beside the nameplate. */
export function ShaftLoadPart(props: ShaftLoadPartProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
