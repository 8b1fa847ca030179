import { useMutation } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { FormProvider, useForm } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { changePlan, createPlan, removePlan } from '../../client/plans';
import { Queries } from '../../client/queries';
import type { FormMeter, FormMotor } from '../../schemas/plan-form';
import { planInput, type PlanInput } from '../../schemas/plan-input';
import { draftResolver } from '../ui/form-errors';
import { Button, ButtonLink } from '../ui/Button';
import { Notice } from '../ui/Notice';
import { StaleCompare } from '../ui/StaleCompare';
import { planDraftOf, planDraftToInput, planEntries, type PlanDraft } from './draft';
import { BankFields } from './BankFields';
import { MoneyFields } from './MoneyFields';
import { MotorRows } from './MotorRows';
import { ReplacementFields } from './ReplacementFields';
import { SpanFields } from './SpanFields';

type StoredPlan = Omit<PlanInput, 'searchJobId'> & { version: number };

export interface PlanFormProps {
  code: string;
  currency: string;
  motors: FormMotor[];
  meters: FormMeter[];
  /** Names of the schedule's seasons. */
  seasons: string[];
  /** Values to begin with: the stored plan, or the settings a search found. */
  start: Omit<PlanInput, 'searchJobId'>;
  plan?: { id: number; version: number };
  searchJobId?: number;
}

function usePlanForm({ code, start, plan, motors, seasons, searchJobId }: PlanFormProps) {
  const plant = useMemo(() => ({ motors, seasons }), [motors, seasons]);
  const toInput = (draft: PlanDraft) => planDraftToInput(draft, plant, searchJobId);
  const form = useForm<PlanDraft>({
    defaultValues: planDraftOf(start, plant),
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
    form.reset(planDraftOf(stored, plant));
    setVersion(stored.version);
    setStored(null);
    save.reset();
  };
  return { form, kept, version, stored, save, submit, loadTheirs, plant };
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
  const { code, currency, motors, meters, seasons, plan, start } = props;
  const { form, kept, version, stored, save, submit, loadTheirs, plant } = usePlanForm(props);
  const theirs = stored && planEntries(planDraftOf(stored, plant), plant);
  const differences = Object.entries(planEntries(form.getValues(), plant))
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
        <SpanFields seasons={seasons} />
        <MotorRows motors={motors} currency={currency} seasons={seasons} />
        <BankFields meters={meters} currency={currency} />
        <ReplacementFields meters={meters} currency={currency} seasons={seasons} />
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
