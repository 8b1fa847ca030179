import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { FormProvider, useForm, useFormContext } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { changePlan, createPlan, removePlan } from '../../client/plans';
import { Queries } from '../../client/queries';
import { planInput, type PlanInput } from '../../schemas/plan-input';
import { draftResolver, messageAt } from '../ui/form-errors';
import { Button, ButtonLink } from '../ui/Button';
import { Field, NumberField } from '../ui/Field';
import { Notice } from '../ui/Notice';
import { StaleCompare } from '../ui/StaleCompare';
import { planDraftOf, planDraftToInput, planEntries, type PlanDraft } from './draft';
import { amperes } from '../ui/setting-words';
import { MoneyFields } from './MoneyFields';

/** What the form says of a motor beside its field current. */
export interface FormMotor {
  motorId: number;
  name: string;
  todayA: number;
  limitA: number;
}

type StoredPlan = Omit<PlanInput, 'searchJobId'> & { version: number };

export interface PlanFormProps {
  code: string;
  currency: string;
  motors: FormMotor[];
  /** Values to begin with: the stored plan, or the settings a search found. */
  start: Omit<PlanInput, 'searchJobId'>;
  plan?: { id: number; version: number };
  searchJobId?: number;
}

function usePlanForm({ code, start, plan, searchJobId }: PlanFormProps) {
  const toInput = (draft: PlanDraft) => planDraftToInput(draft, searchJobId);
  const form = useForm<PlanDraft>({
    defaultValues: planDraftOf(start),
    resolver: draftResolver<PlanDraft>(planInput, toInput),
  });
  const kept = useDraft<PlanDraft>(`plan:${code}:${plan?.id ?? 'new'}`, form);
  const [version, setVersion] = useState(plan?.version ?? 0);
  const [stored, setStored] = useState<StoredPlan | null>(null);
  const save = useMutation({
    mutationFn: ({ draft, over }: { draft: PlanDraft; over: number }) => {
      const input = planInput.parse(toInput(draft));
      return plan ? changePlan(plan.id, over, input) : createPlan(code, input);
    },
    onSuccess: () => location.assign(`/engagements/${code}/plans`),
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      setStored(error.code === 'stale' ? ((error.details.theirs as StoredPlan | undefined) ?? null) : null);
      for (const [path, fault] of Object.entries(error.fields))
        form.setError(path as keyof PlanDraft, { type: 'server', message: fault[0] });
    },
  });
  const submit = (over: number) => form.handleSubmit((draft) => save.mutate({ draft, over }))();
  const loadTheirs = () => {
    if (!stored) return;
    form.reset(planDraftOf(stored));
    setVersion(stored.version);
    setStored(null);
    save.reset();
  };
  return { form, kept, version, stored, save, submit, loadTheirs };
}

function PlanFields({ motors }: Pick<PlanFormProps, 'motors'>) {
  const { register, formState } = useFormContext<PlanDraft>();
  const fault = (path: string) => messageAt(formState.errors, path);
  return (
    <>
      <div className="form-grid">
        <Field label="Name" {...register('name')} error={fault('name')} />
        {motors.map((motor, index) => (
          <NumberField
            key={motor.motorId}
            label={`Field of ${motor.name}`}
            unit="A"
            hint={`Today ${amperes(motor.todayA)}, limit ${amperes(motor.limitA)}`}
            {...register(`fields.${index}.fieldA`)}
            error={fault(`fields.${index}.fieldA`)}
          />
        ))}
      </div>
    </>
  );
}

/** The alternative everybody knows: a fixed bank on the plant's bus. */
function CapacitorFields() {
  const { register, formState, watch } = useFormContext<PlanDraft>();
  const fault = (path: string) => messageAt(formState.errors, path);
  const size = watch('capacitors.kvar').trim();
  const none = size === '' || size === '0';
  return (
    <fieldset className="mt-5">
      <legend>Capacitors instead, or besides</legend>
      <div className="form-grid">
        <NumberField
          label="Bank, all steps together"
          unit="kvar"
          hint="Empty for none"
          {...register('capacitors.kvar')}
          error={fault('capacitors.kvar')}
        />
        {!none && (
          <>
            <NumberField
              label="Losses"
              unit="W/kvar"
              hint="About 0.5 plain, 4 to 8 with reactors"
              {...register('capacitors.lossWPerKvar')}
              error={fault('capacitors.lossWPerKvar')}
            />
            <NumberField
              label="Detuning reactors"
              unit="%"
              hint="5.67, 7 or 14; empty for none"
              {...register('capacitors.detuningPercent')}
              error={fault('capacitors.detuningPercent')}
            />
          </>
        )}
      </div>
    </fieldset>
  );
}

function RemovePlan({ code, name, plan }: { code: string; name: string; plan: { id: number; version: number } }) {
  const [asked, setAsked] = useState(false);
  const remove = useMutation({
    mutationFn: () => removePlan(plan.id, plan.version),
    onSuccess: () => location.assign(`/engagements/${code}/plans`),
  });
  if (!asked) {
    return (
      <Button kind="quiet" onClick={() => setAsked(true)}>
        Remove {name}
      </Button>
    );
  }
  return (
    <Notice kind={remove.error ? 'fault' : 'plain'} title={remove.error ? remove.error.message : `Remove ${name}?`}>
      {!remove.error && (
        <span>
          Its settings, costs and the search it was made of go. Editions already made of it keep what they show.
        </span>
      )}
      <Button kind="secondary" size="small" busy={remove.isPending} onClick={() => remove.mutate()}>
        Remove {name}
      </Button>
      <Button kind="quiet" onClick={() => setAsked(false)}>
        Keep it
      </Button>
    </Notice>
  );
}

function Form(props: PlanFormProps) {
  const { code, currency, motors, plan, start } = props;
  const { form, kept, version, stored, save, submit, loadTheirs } = usePlanForm(props);
  const nameOf = (motorId: number) => motors.find((motor) => motor.motorId === motorId)?.name ?? `motor ${motorId}`;
  const theirs = stored && planEntries(planDraftOf(stored), nameOf);
  const differences = Object.entries(planEntries(form.getValues(), nameOf))
    .filter(([label, mine]) => theirs && mine !== theirs[label])
    .map(([label, mine]) => ({ label, mine, theirs: theirs?.[label] ?? '' }));
  return (
    <FormProvider {...form}>
      <form
        noValidate
        className="plan-form"
        onSubmit={(event) => {
          event.preventDefault();
          void submit(version);
        }}
      >
        {kept.restored && (
          <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />
        )}
        <PlanFields motors={motors} />
        <CapacitorFields />
        <MoneyFields currency={currency} />
        {stored && (
          <StaleCompare
            what={stored.name}
            differences={differences}
            onLoadTheirs={loadTheirs}
            onSaveMine={() => void submit(stored.version)}
            busy={save.isPending}
          />
        )}
        {save.error && !stored && <Notice kind="fault" title={save.error.message} />}
        <div className="actions">
          <Button type="submit" busy={save.isPending}>
            {plan ? `Save ${start.name}` : 'Price this plan'}
          </Button>
          <ButtonLink kind="secondary" href={`/engagements/${code}/plans`}>
            Close without saving
          </ButtonLink>
          {plan && <RemovePlan code={code} name={start.name} plan={plan} />}
        </div>
      </form>
    </FormProvider>
  );
}

/** Enters or changes a plan: settings, costs, assumptions of its money. */
export function PlanForm(props: PlanFormProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
