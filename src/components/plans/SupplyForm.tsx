import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { FormProvider, useForm, useFormContext } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { Queries } from '../../client/queries';
import { changeSupply } from '../../client/supply';
import { supplyInput, type SupplyInput, type SupplyView } from '../../schemas/supply';
import { Button } from '../ui/Button';
import { NumberField, SelectField } from '../ui/Field';
import { draftResolver, messageAt } from '../ui/form-errors';
import { Notice } from '../ui/Notice';
import { StaleCompare } from '../ui/StaleCompare';
import { typedNumber } from '../ui/typed-number';

const numbers = {
  shortCircuitKva: [
    'Short-circuit power at the bus',
    'kVA',
    'From the utility or the relay study; behind a transformer alone at most its kVA over %Z',
  ],
  xOverR: ['X over R of the supply', '', 'Empty: 10, common practice at medium voltage'],
  noLoadPercent: ['Bus voltage at no load', '% of rated', 'Empty: 100'],
  allowedLowPercent: ['Least voltage allowed', '% of rated', undefined],
  allowedHighPercent: ['Greatest voltage allowed', '% of rated', undefined],
  transformerKva: ['Service transformer', 'kVA', undefined],
  impedancePercent: ['Its impedance', '%', 'On its plate'],
  loadLossKw: ['Its load loss', 'kW', 'At rated kVA, from its test sheet'],
  busVoltageV: ['Bus voltage', 'V', undefined],
  cableResistanceOhm: ['Cable, resistance', 'ohm', 'One conductor, whole length'],
  cableReactanceOhm: ['Cable, reactance', 'ohm', undefined],
} as const;
type NumberName = keyof typeof numbers;
const numberNames = Object.keys(numbers) as NumberName[];

type SupplyDraft = Record<NumberName, string> & { meterUpstream: string };

const shown = (value: number | null) => (value === null ? '' : String(value));

const draftOf = (supply: SupplyInput): SupplyDraft => ({
  ...(Object.fromEntries(numberNames.map((name) => [name, shown(supply[name])])) as Record<NumberName, string>),
  meterUpstream: supply.meterUpstream === null ? '' : supply.meterUpstream ? 'upstream' : 'bus',
});

const toInput = (draft: SupplyDraft): unknown => ({
  ...Object.fromEntries(numberNames.map((name) => [name, typedNumber(draft[name]) ?? null])),
  meterUpstream: draft.meterUpstream === '' ? null : draft.meterUpstream === 'upstream',
});

const sides = [
  { value: '', label: 'Not known' },
  { value: 'upstream', label: 'Before transformer and cable: it counts their losses' },
  { value: 'bus', label: 'At the bus: it does not' },
];

function Entries({ names }: { names: NumberName[] }) {
  const { register, formState } = useFormContext<SupplyDraft>();
  return names.map((name) => {
    const [label, unit, hint] = numbers[name];
    return (
      <NumberField
        key={name}
        label={label}
        unit={unit || undefined}
        hint={hint}
        {...register(name)}
        error={messageAt(formState.errors, name)}
      />
    );
  });
}

function useSupplyForm(code: string, supply: SupplyView) {
  const form = useForm<SupplyDraft>({
    defaultValues: draftOf(supply),
    resolver: draftResolver<SupplyDraft>(supplyInput, toInput),
  });
  const kept = useDraft<SupplyDraft>(`supply:${code}`, form);
  const [stored, setStored] = useState<SupplyView | null>(null);
  const [version, setVersion] = useState(supply.version);
  const save = useMutation({
    mutationFn: ({ draft, over }: { draft: SupplyDraft; over: number }) =>
      changeSupply(code, over, supplyInput.parse(toInput(draft))),
    onSuccess: () => location.assign(`/engagements/${code}/plans#supply`),
    onError: (error) => {
      if (kept.rescue(error) || !(error instanceof ApiError)) return;
      setStored(error.code === 'stale' ? ((error.details.theirs as SupplyView | undefined) ?? null) : null);
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
  return { form, kept, stored, version, save, submit, loadTheirs };
}

function Form({ code, supply }: SupplyFormProps) {
  const { form, kept, stored, version, save, submit, loadTheirs } = useSupplyForm(code, supply);
  const theirs = stored && draftOf(stored);
  const differences = numberNames
    .map((name) => ({ label: numbers[name][0], mine: form.getValues(name), theirs: theirs?.[name] ?? '' }))
    .filter(({ mine, theirs: other }) => theirs && mine !== other);
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
        <fieldset>
          <legend>The bus</legend>
          <div className="form-grid">
            <Entries
              names={['shortCircuitKva', 'xOverR', 'noLoadPercent', 'allowedLowPercent', 'allowedHighPercent']}
            />
          </div>
        </fieldset>
        <fieldset>
          <legend>Between the meter and the bus</legend>
          <div className="form-grid">
            <SelectField label="The utility’s meter stands" options={sides} {...form.register('meterUpstream')} />
            <Entries
              names={[
                'transformerKva',
                'impedancePercent',
                'loadLossKw',
                'busVoltageV',
                'cableResistanceOhm',
                'cableReactanceOhm',
              ]}
            />
          </div>
        </fieldset>
        {stored && (
          <StaleCompare
            what="the supply"
            differences={differences}
            onLoadTheirs={loadTheirs}
            onSaveMine={() => void submit(stored.version)}
            busy={save.isPending}
          />
        )}
        {save.error && !stored && <Notice kind="fault" title={save.error.message} />}
        <div className="actions">
          <Button type="submit" busy={save.isPending}>
            Save the supply
          </Button>
        </div>
      </form>
    </FormProvider>
  );
}

export interface SupplyFormProps {
  code: string;
  supply: SupplyView;
}

/** How the plant's bus is supplied; every entry may stay empty and is then not computed with. */
export function SupplyForm(props: SupplyFormProps) {
  return (
    <Queries>
      <Form {...props} />
    </Queries>
  );
}
