import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { ApiError } from '../../client/api';
import { startSearch } from '../../client/plans';
import type { SearchInput } from '../../schemas/search';
import { Button } from '../ui/Button';
import { Field, NumberField, SelectField } from '../ui/Field';
import { Notice } from '../ui/Notice';
import { searchAsked, type SearchDraft, type SearchFaults } from './search-draft';

/** A motor that may be searched. */
export interface SearchableMotor {
  motorId: number;
  name: string;
}

interface StartProps {
  code: string;
  currency: string;
  motors: SearchableMotor[];
  seasons: string[];
  /** What is typed; it stays while a search runs. */
  draft: SearchDraft;
  setDraft: (draft: SearchDraft) => void;
  onStarted: (jobId: number) => void;
}

interface EntryProps {
  draft: SearchDraft;
  faults: SearchFaults;
  set: (change: Partial<SearchDraft>) => void;
}

function MotorTicks({ draft, faults, set, motors }: EntryProps & { motors: SearchableMotor[] }) {
  const toggle = (id: number) =>
    set({ motors: draft.motors.includes(id) ? draft.motors.filter((one) => one !== id) : [...draft.motors, id] });
  return (
    <fieldset className="search-motors">
      <legend>Motors whose field is searched</legend>
      <div className="load-days">
        {motors.map(({ motorId, name }) => (
          <label key={motorId}>
            <input type="checkbox" checked={draft.motors.includes(motorId)} onChange={() => toggle(motorId)} />
            {name}
          </label>
        ))}
      </div>
      {faults.motorIds && <p className="field-error">{faults.motorIds}</p>}
    </fieldset>
  );
}

function PartEntries({ draft, faults, set, seasons }: EntryProps & { seasons: string[] }) {
  return (
    <>
      <SelectField
        label="Settings"
        size="small"
        value={draft.by}
        onChange={(event) => set({ by: event.target.value as SearchDraft['by'] })}
        options={[
          { value: 'year', label: 'One for the year' },
          { value: 'halves', label: 'Summer and winter half' },
          ...(seasons.length > 1 ? [{ value: 'schedule', label: 'By the schedule’s own seasons' }] : []),
          { value: 'shift', label: 'Day shift, and the rest' },
        ]}
        hint={draft.by === 'halves' ? 'April to September, and the rest' : undefined}
      />
      {draft.by === 'shift' && (
        <>
          <Field
            label="Day shift from"
            size="small"
            value={draft.from}
            onChange={(event) => set({ from: event.target.value })}
            error={faults.from}
          />
          <Field
            label="To"
            size="small"
            hint="Monday to Friday"
            value={draft.to}
            onChange={(event) => set({ to: event.target.value })}
            error={faults.to}
          />
        </>
      )}
    </>
  );
}

type BankEntry =
  'stepKvar' | 'mostSteps' | 'lossWPerKvar' | 'holdsPowerFactor' | 'costPerKvar' | 'detuningPercent' | 'motorWork';

function BankEntries({ draft, faults, set, currency }: EntryProps & { currency: string }) {
  const entry = (name: BankEntry) => ({
    size: 'small' as const,
    value: draft[name],
    onChange: (event: { target: { value: string } }) => set({ [name]: event.target.value }),
    error: faults[name],
  });
  return (
    <div className="search-bank">
      <div className="load-days">
        <label>
          <input
            type="checkbox"
            checked={draft.withBank}
            onChange={(event) => set({ withBank: event.target.checked })}
          />
          Weigh capacitors against the fields
        </label>
      </div>
      {draft.withBank && (
        <div className="search-entries">
          <NumberField label="One step" unit="kvar" {...entry('stepKvar')} />
          <NumberField label="Most steps" {...entry('mostSteps')} />
          <NumberField label="Losses, reactors in them" unit="W/kvar" {...entry('lossWPerKvar')} />
          <NumberField
            label="Switched to hold"
            hint="Power factor; empty: fixed steps only"
            {...entry('holdsPowerFactor')}
          />
          <NumberField
            label="Detuning reactors"
            unit="%"
            hint="5.67, 7 or 14; empty for none"
            {...entry('detuningPercent')}
          />
          <NumberField label="Cost, fitted" unit={`${currency}/kvar`} {...entry('costPerKvar')} />
          <NumberField
            label="Work at the motors, once"
            unit={currency}
            hint="Visit, tests, protection review; 0 for none"
            {...entry('motorWork')}
          />
        </div>
      )}
    </div>
  );
}

/** What is searched, and the button that begins it. */
export function SearchStart({ code, currency, motors, seasons, draft, setDraft, onStarted }: StartProps) {
  const allMotors = motors.map(({ motorId }) => motorId);
  const [faults, setFaults] = useState<SearchFaults>({});
  const [refused, setRefused] = useState<string | null>(null);
  const start = useMutation({
    mutationFn: (input: SearchInput) => startSearch(code, input),
    onSuccess: (job) => onStarted(job.id),
    onError: (error) => {
      if (error instanceof ApiError && error.fields.stepA?.[0]) setFaults({ stepA: error.fields.stepA[0] });
      else setRefused(error.message);
    },
  });
  const submit = () => {
    const asked = searchAsked(draft, { allMotors, seasons });
    setFaults(asked.faults ?? {});
    setRefused(null);
    if (asked.input) start.mutate(asked.input);
  };
  const entry = { draft, faults, set: (change: Partial<SearchDraft>) => setDraft({ ...draft, ...change }) };
  return (
    <form
      className="search-form"
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <div className="search-entries">
        <NumberField
          label="Step of the field current"
          unit="A"
          size="small"
          hint="What an operator can set, as the panel shows it"
          value={draft.stepA}
          onChange={(event) => entry.set({ stepA: event.target.value })}
          error={faults.stepA}
        />
        <PartEntries {...entry} seasons={seasons} />
      </div>
      {motors.length > 1 && <MotorTicks {...entry} motors={motors} />}
      <BankEntries {...entry} currency={currency} />
      <div className="actions actions-inline">
        <Button type="submit" kind="secondary" busy={start.isPending}>
          Find the best field currents
        </Button>
      </div>
      {refused && <Notice kind="fault" title={refused} />}
    </form>
  );
}
