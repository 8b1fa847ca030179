import { useRef, useState } from 'react';
import { useForm, type Resolver, type UseFormReturn } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { chooseSchedule } from '../../client/tariff';
import { mostToleranceMinor } from '../../schemas/pricing';
import type { ChoiceView, ChooseInput, LibraryEntry } from '../../schemas/tariff';
import { messageAt, nestErrors } from '../ui/form-errors';
import { Button } from '../ui/Button';
import { CheckField, NumberField, SelectField } from '../ui/Field';
import { formatCount, formatMoney } from '../ui/format';
import { Notice } from '../ui/Notice';
import { StaleCompare } from '../ui/StaleCompare';
import { ContractInput, HistoryInput } from './ContractFields';
import { differencesOf, draftOf, faultsOf, toChooseInput, type Choosable, type ChoiceDraft } from './choice-draft';

export interface ChooseScheduleProps {
  code: string;
  currency: string;
  library: LibraryEntry[];
  choice: ChoiceView | null;
  /** Month before the first bill, which the last value of a series of earlier months stands for: "Oct 2025". */
  monthBefore: string | null;
}

type Form = UseFormReturn<ChoiceDraft>;

function schedulesOf(library: LibraryEntry[], choice: ChoiceView | null): Map<string, Choosable> {
  const all = new Map<string, Choosable>(library.map((entry) => [entry.id, entry]));
  if (choice && choice.contractFields.length + choice.historyFields.length > 0) {
    all.set(choice.scheduleId, {
      id: choice.scheduleId,
      contract: choice.contractFields,
      history: choice.historyFields,
    });
  }
  return all;
}

function libraryOptions(library: LibraryEntry[], choice: ChoiceView | null) {
  const options = library.map(({ id, title, publisher, problems }) => ({
    value: id,
    label: title
      ? `${title}${publisher ? `, ${publisher}` : ''}`
      : `${id} (${formatCount(problems.length, 'error')} in its file)`,
    disabled: title === null && id !== choice?.scheduleId,
  }));
  if (!choice || options.some((option) => option.value === choice.scheduleId)) return options;
  return [
    { value: choice.scheduleId, label: `${choice.title} (no longer in the library)`, disabled: false },
    ...options,
  ];
}

/** Keeps the form's version and sends; a choice changed meanwhile is shown beside one's own. */
function useSaving(props: ChooseScheduleProps, form: Form, schedules: Map<string, Choosable>) {
  const version = useRef(props.choice?.version ?? null);
  const [fault, setFault] = useState<{
    message: string;
    stale: { mine: ChooseInput; theirs: ChoiceView } | null;
  } | null>(null);
  const kept = useDraft<ChoiceDraft>(`tariff:${props.code}`, form);
  const send = async (draft: ChoiceDraft) => {
    const schedule = schedules.get(draft.scheduleId);
    if (!schedule) return;
    const input = toChooseInput(draft, schedule, { version: version.current, currency: props.currency });
    setFault(null);
    try {
      await chooseSchedule(props.code, input);
      location.reload();
    } catch (error) {
      if (kept.rescue(error)) return;
      if (!(error instanceof ApiError)) throw error;
      const theirs = error.code === 'stale' ? (error.details.theirs as ChoiceView) : null;
      for (const [path, [message]] of Object.entries(error.fields)) form.setError(path as 'scheduleId', { message });
      setFault({ message: error.message, stale: theirs && { mine: input, theirs } });
    }
  };
  const saveOver = (theirs: ChoiceView) => {
    version.current = theirs.version;
    void form.handleSubmit(send)();
  };
  return { fault, kept, submit: form.handleSubmit(send), saveOver };
}

/** Island: chooses the schedule an engagement is priced on, with what its contract supplies. */
export function ChooseSchedule(props: ChooseScheduleProps) {
  const { library, choice, monthBefore, currency } = props;
  const schedules = schedulesOf(library, choice);
  const resolver: Resolver<ChoiceDraft> = (draft) => {
    const schedule = schedules.get(draft.scheduleId);
    const blank = { id: '', contract: [], history: [] };
    const faults = faultsOf(toChooseInput(draft, schedule ?? blank, { version: null, currency }), schedule);
    return Object.keys(faults).length === 0
      ? { values: draft, errors: {} }
      : { values: {}, errors: nestErrors<ChoiceDraft>(faults) };
  };
  const form = useForm<ChoiceDraft>({
    defaultValues: draftOf(schedules.get(choice?.scheduleId ?? ''), choice, currency),
    resolver,
    mode: 'onTouched',
  });
  const { fault, kept, submit, saveOver } = useSaving(props, form, schedules);
  const scheduleId = form.watch('scheduleId');
  const schedule = schedules.get(scheduleId);
  const isChosen = choice?.scheduleId === scheduleId;
  return (
    <form onSubmit={(event) => void submit(event)} noValidate className="choose-schedule">
      {kept.restored && <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />}
      <div className="form-grid">
        <div className="whole choose-schedule-name">
          <SelectField
            label="Schedule"
            placeholder="Choose a schedule"
            options={libraryOptions(library, choice)}
            error={messageAt(form.formState.errors, 'scheduleId')}
            {...form.register('scheduleId', {
              onChange: (event: { target: { value: string } }) =>
                form.reset(draftOf(schedules.get(event.target.value), choice, currency), { keepDefaultValues: true }),
            })}
          />
        </div>
        {schedule?.contract.map((field) => (
          <ContractInput key={`${scheduleId}.${field.name}`} field={field} form={form} />
        ))}
        <NumberField
          label="Tolerance a line"
          unit={currency}
          hint={`Up to this a difference is rounding, no finding. At most ${formatMoney(mostToleranceMinor, currency)}.`}
          error={messageAt(form.formState.errors, 'toleranceMinor')}
          {...form.register('tolerance')}
        />
      </div>
      {schedule && schedule.history.length > 0 && (
        <div className="form-grid mt-4">
          {schedule.history.map((field) => (
            <HistoryInput key={`${scheduleId}.${field.name}`} field={field} form={form} monthBefore={monthBefore} />
          ))}
        </div>
      )}
      {isChosen && choice.library === 'changed' && (
        <CheckField
          label="Take the library's file as it stands today"
          hint="Otherwise the text kept with this engagement stays in force."
          {...form.register('takeNewText')}
        />
      )}
      {fault && !fault.stale && <Notice kind="fault" title="Nothing was kept.">{` ${fault.message}`}</Notice>}
      {fault?.stale && (
        <StaleCompare
          what="The choice of the schedule"
          differences={differencesOf(fault.stale.mine, fault.stale.theirs, currency)}
          onLoadTheirs={() => location.reload()}
          onSaveMine={() => fault.stale && saveOver(fault.stale.theirs)}
          busy={form.formState.isSubmitting}
        />
      )}
      <div className="actions actions-inline mt-4">
        <Button type="submit" kind={choice ? 'secondary' : 'primary'} busy={form.formState.isSubmitting}>
          {isChosen ? 'Keep and price again' : 'Choose and price'}
        </Button>
      </div>
    </form>
  );
}
