import { useRef, useState } from 'react';
import { useForm, type Resolver, type UseFormReturn } from 'react-hook-form';
import { compareQuery, mostCompared, type CompareCandidate, type CompareChoice } from '../../schemas/compare';
import { ContractInput, HistoryInput } from '../tariff/ContractFields';
import { draftOf, faultsOf, toChooseInput, type ChoiceDraft } from '../tariff/choice-draft';
import { Button } from '../ui/Button';
import { CheckField } from '../ui/Field';
import { nestErrors } from '../ui/form-errors';
import { formatDate } from '../ui/format';

export interface CompareFormProps {
  code: string;
  candidates: CompareCandidate[];
  /** Month before the first bill: "Oct 2025". */
  monthBefore: string | null;
}

/** Gives the checked draft of one schedule, or nothing where a field is wrong and says so. */
type Collect = () => Promise<CompareChoice | null>;

interface FieldsProps {
  candidate: CompareCandidate;
  monthBefore: string | null;
  offer: (collect: Collect) => void;
}

const collectFrom =
  (form: UseFormReturn<ChoiceDraft>, candidate: CompareCandidate): Collect =>
  async () => {
    if (!(await form.trigger())) return null;
    const { contract, history } = toChooseInput(form.getValues(), candidate, {
      version: null,
      currency: candidate.currency,
    });
    return { id: candidate.id, contract, history };
  };

/** What the contract would supply to one schedule. */
function ChosenFields({ candidate, monthBefore, offer }: FieldsProps) {
  const resolver: Resolver<ChoiceDraft> = (draft) => {
    const faults = faultsOf(
      toChooseInput(draft, candidate, { version: null, currency: candidate.currency }),
      candidate,
    );
    return Object.keys(faults).length === 0
      ? { values: draft, errors: {} }
      : { values: {}, errors: nestErrors<ChoiceDraft>(faults) };
  };
  const start = { scheduleId: candidate.id, ...candidate.start };
  const form = useForm<ChoiceDraft>({
    defaultValues: draftOf(candidate, start, candidate.currency),
    resolver,
    mode: 'onTouched',
  });
  offer(collectFrom(form, candidate));
  if (candidate.contract.length + candidate.history.length === 0) {
    return <p className="hint">Its contract supplies nothing.</p>;
  }
  return (
    <div className="form-grid">
      {candidate.contract.map((field) => (
        <ContractInput key={field.name} field={field} form={form} />
      ))}
      {candidate.history.map((field) => (
        <HistoryInput key={field.name} field={field} form={form} monthBefore={monthBefore} />
      ))}
    </div>
  );
}

const whatItIs = ({ publisher, inForce }: CompareCandidate) =>
  [publisher, inForce && `in force from ${formatDate(inForce)}`].filter(Boolean).join(', ');

/** Island: chooses schedules to price the year on. The address of the page keeps what was chosen and typed. */
export function CompareForm({ code, candidates, monthBefore }: CompareFormProps) {
  const [chosen, setChosen] = useState(() => candidates.filter((one) => one.chosen).map(({ id }) => id));
  const [busy, setBusy] = useState(false);
  const collectors = useRef(new Map<string, Collect>());
  const isFull = chosen.length >= mostCompared;
  const toggle = (id: string) =>
    setChosen((ids) => (ids.includes(id) ? ids.filter((one) => one !== id) : [...ids, id]));
  const compare = async () => {
    const ids = candidates.map(({ id }) => id).filter((id) => chosen.includes(id));
    const choices = await Promise.all(ids.map((id) => collectors.current.get(id)?.() ?? null));
    if (choices.some((choice) => choice === null)) return;
    setBusy(true);
    const query = compareQuery(choices as CompareChoice[]);
    location.assign(`/engagements/${encodeURIComponent(code)}/tariff/compare?${query.toString()}`);
  };
  return (
    <form
      noValidate
      className="compare-form"
      onSubmit={(event) => {
        event.preventDefault();
        void compare();
      }}
    >
      {candidates.map((candidate) => {
        const isChosen = chosen.includes(candidate.id);
        return (
          <fieldset key={candidate.id} className="compare-choice">
            <legend className="unseen">{candidate.title}</legend>
            <CheckField
              label={candidate.title}
              hint={
                isFull && !isChosen ? `At most ${mostCompared} at once. Take another out first.` : whatItIs(candidate)
              }
              checked={isChosen}
              disabled={isFull && !isChosen}
              onChange={() => toggle(candidate.id)}
            />
            {isChosen && (
              <div className="compare-fields">
                <ChosenFields
                  candidate={candidate}
                  monthBefore={monthBefore}
                  offer={(collect) => collectors.current.set(candidate.id, collect)}
                />
              </div>
            )}
          </fieldset>
        );
      })}
      <div className="actions actions-inline mt-4">
        <Button type="submit" busy={busy} waiting={chosen.length === 0 && 'choose a schedule first'}>
          {busy ? 'Pricing ...' : 'Price the year on these'}
        </Button>
      </div>
    </form>
  );
}
