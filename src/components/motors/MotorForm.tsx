import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { FormProvider, useForm, useFormContext } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { changeMotor, createMotor, removeMotor } from '../../client/motors';
import { Queries } from '../../client/queries';
import { motorInput, type MotorInput, type MotorView } from '../../schemas/motor';
import { Button, ButtonLink } from '../ui/Button';
import { NumberField, SelectField } from '../ui/Field';
import { Notice } from '../ui/Notice';
import { StaleCompare, type StaleDifference } from '../ui/StaleCompare';
import { CalendarFields } from './CalendarFields';
import { draftEntries, draftOf, draftToInput, emptyDraft, entryLabels, type MotorDraft } from './draft';
import { draftResolver } from '../ui/form-errors';
import { DataSheetFields, LimitFields } from './MachineFields';
import { FieldFields, PlateFields, useEntry } from './PlateFields';

/** What the server keeps, as it comes with a 409. */
type StoredMotor = MotorInput & { version: number };

/** A motor's view as its form holds it: today's field of a brushless machine as its panel shows it. */
const asEntered = (motor: MotorView) =>
  draftOf({
    ...motor,
    fieldTodayA: motor.panel?.todayA ?? motor.fieldTodayA,
    fieldReadAt: motor.panel ? 'panel' : 'field',
  });

export interface MotorFormProps {
  code: string;
  motor?: MotorView;
  /** The engagement's meters; a motor stands behind one of them. */
  meters: { id: number; label: string }[];
}

function differences(mine: MotorDraft, theirs: StoredMotor): StaleDifference[] {
  const stored = draftEntries(draftOf(theirs));
  return Object.entries(draftEntries(mine))
    .filter(([path, text]) => path in entryLabels && text !== (stored[path] ?? ''))
    .map(([path, text]) => ({ label: entryLabels[path] ?? path, mine: text, theirs: stored[path] ?? '' }));
}

function SettingFields({ meters }: Pick<MotorFormProps, 'meters'>) {
  const entry = useEntry();
  const { watch } = useFormContext<MotorDraft>();
  const brushless = watch('plate.exciterKind') === 'brushless';
  return (
    <fieldset>
      <legend>Setting today</legend>
      <div className="form-grid">
        {meters.length > 1 && (
          <SelectField
            {...entry('meterId')}
            hint="Its kvar changes that meter’s registers"
            options={meters.map(({ id, label }) => ({ value: String(id), label }))}
          />
        )}
        <NumberField {...entry('fieldTodayA')} unit="A" hint="At its usual load, read at the panel" />
        {brushless && (
          <SelectField
            {...entry('fieldReadAt')}
            label="Read at"
            options={[
              { value: 'panel', label: 'the panel: the exciter’s field' },
              { value: 'field', label: 'the motor’s own field' },
            ]}
          />
        )}
      </div>
    </fieldset>
  );
}

function useMotorForm({ code, motor }: MotorFormProps) {
  const form = useForm<MotorDraft>({
    defaultValues: motor ? asEntered(motor) : emptyDraft(),
    resolver: draftResolver<MotorDraft>(motorInput, draftToInput),
  });
  const kept = useDraft<MotorDraft>(`motor:${code}:${motor?.id ?? 'new'}`, form);
  const [version, setVersion] = useState(motor?.version ?? 0);
  const [stored, setStored] = useState<StoredMotor | null>(null);
  const save = useMutation({
    mutationFn: ({ draft, over }: { draft: MotorDraft; over: number }) => {
      const input = motorInput.parse(draftToInput(draft));
      return motor ? changeMotor(motor.id, over, input) : createMotor(code, input);
    },
    onSuccess: (saved) => location.assign(`/engagements/${code}/motors#motor-${saved.id}`),
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      setStored(error.code === 'stale' ? ((error.details.theirs as StoredMotor | undefined) ?? null) : null);
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as keyof MotorDraft, { type: 'server', message: fault[0] });
    },
  });
  const submit = (over: number) => form.handleSubmit((draft) => save.mutate({ draft, over }))();
  const loadTheirs = () => {
    if (!stored) return;
    form.reset(draftOf(stored));
    setVersion(stored.version);
    setStored(null);
    save.reset();
  };
  return { form, kept, version, stored, save, submit, loadTheirs };
}

function RemoveMotor({ code, motor }: { code: string; motor: MotorView }) {
  const [asked, setAsked] = useState(false);
  const remove = useMutation({
    mutationFn: () => removeMotor(motor.id, motor.version),
    onSuccess: () => location.assign(`/engagements/${code}/motors`),
  });
  if (!asked) {
    return (
      <Button kind="quiet" onClick={() => setAsked(true)}>
        Remove {motor.name}
      </Button>
    );
  }
  return (
    <Notice
      kind={remove.error ? 'fault' : 'plain'}
      title={remove.error ? remove.error.message : `Remove ${motor.name}?`}
    >
      {!remove.error && <span>Its nameplate, shaft load and setting go. The trail keeps what they were.</span>}
      <Button kind="secondary" size="small" busy={remove.isPending} onClick={() => remove.mutate()}>
        Remove {motor.name}
      </Button>
      <Button kind="quiet" onClick={() => setAsked(false)}>
        Keep it
      </Button>
    </Notice>
  );
}

function Form(props: MotorFormProps) {
  const { code, motor } = props;
  const { form, kept, version, stored, save, submit, loadTheirs } = useMotorForm(props);
  const failure = save.error && !stored ? save.error.message : null;
  return (
    <FormProvider {...form}>
      <form
        noValidate
        className="motor-form"
        onSubmit={(event) => {
          event.preventDefault();
          void submit(version);
        }}
      >
        {kept.restored && (
          <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />
        )}
        <PlateFields />
        <FieldFields />
        <DataSheetFields />
        <LimitFields />
        <CalendarFields />
        <SettingFields meters={props.meters} />
        {stored && (
          <StaleCompare
            what={`Motor ${stored.name}`}
            differences={differences(form.getValues(), stored)}
            onLoadTheirs={loadTheirs}
            onSaveMine={() => void submit(stored.version)}
            busy={save.isPending}
          />
        )}
        {failure && <Notice kind="fault" title={failure} />}
        {Object.keys(form.formState.errors).length > 0 && !failure && (
          <Notice kind="fault" title="Some entries cannot be used. Each is marked with what to change." />
        )}
        <div className="actions">
          <Button type="submit" busy={save.isPending}>
            {motor ? `Save ${motor.name}` : 'Add the motor'}
          </Button>
          <ButtonLink kind="secondary" href={`/engagements/${code}/motors`}>
            Close without saving
          </ButtonLink>
          {motor && <RemoveMotor code={code} motor={motor} />}
        </div>
      </form>
    </FormProvider>
  );
}

/** Enters or changes a motor. */
export function MotorForm(props: MotorFormProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
