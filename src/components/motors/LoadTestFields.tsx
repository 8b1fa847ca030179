import { useFieldArray, useFormContext } from 'react-hook-form';
import type { LoadTestView } from '../../schemas/shaft-load';
import { Button } from '../ui/Button';
import { NumberField, SelectField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { emptyTestRow, type LoadDraft } from './load-draft';
import { testSentence, testTable } from './load-words';

export interface LoadTestFieldsProps {
  test: LoadTestView | null;
  /** Brushless: the panel shows the exciter's field. */
  brushless: boolean;
}

const figures = [
  ['inputKw', 'Input', 'kW'],
  ['kvar', 'Reactive', 'kvar'],
  ['powerFactor', 'or power factor', ''],
  ['lineA', 'Stator', 'A'],
  ['voltageV', 'Volts', 'V'],
] as const;

function TestRow({ index, brushless, onRemove }: { index: number; brushless: boolean; onRemove: () => void }) {
  const { register, formState } = useFormContext<LoadDraft>();
  const path = `loadTest.${index}` as const;
  const fault = (name: string) => messageAt(formState.errors, `${path}.${name}`);
  return (
    <div className="load-test-row" role="group" aria-label={`Row ${index + 1} of the load test`}>
      <NumberField
        label={brushless ? 'Exciter field' : 'Field'}
        unit="A"
        size="small"
        {...register(`${path}.fieldA`)}
        error={fault('fieldA')}
      />
      {figures.map(([name, label, unit]) => (
        <NumberField
          key={name}
          label={label}
          unit={unit || undefined}
          size="small"
          {...register(`${path}.${name}`)}
          error={fault(name)}
        />
      ))}
      <SelectField
        label="Sense"
        size="small"
        {...register(`${path}.sense`)}
        options={[
          { value: 'leading', label: 'leading' },
          { value: 'lagging', label: 'lagging' },
        ]}
      />
      <Button kind="quiet" onClick={onRemove}>
        Remove row {index + 1}
      </Button>
    </div>
  );
}

/** What was read at the motor at several loads, and what it says of the motor's data. */
export function LoadTestFields({ test, brushless }: LoadTestFieldsProps) {
  const { control } = useFormContext<LoadDraft>();
  const rows = useFieldArray({ control, name: 'loadTest' });
  return (
    <fieldset>
      <legend>Load test</legend>
      <p className="section-lead">
        Readings at several loads: the field and the input at least, kvar or power factor or stator amperes beside. Each
        gives its shaft load, to be written into the calendar or the profile, and checks the motor’s data.
      </p>
      {rows.fields.map((row, index) => (
        <TestRow key={row.id} index={index} brushless={brushless} onRemove={() => rows.remove(index)} />
      ))}
      <div className="actions actions-inline">
        <Button kind="secondary" size="small" onClick={() => rows.append(emptyTestRow())}>
          Add a reading
        </Button>
      </div>
      {test && (
        <div className="load-test-result">
          <Notice kind={test.agrees ? 'done' : 'plain'} title={testSentence(test)} />
          <LedgerTable {...testTable(test)} label="Load test beside the motor’s data" />
        </div>
      )}
    </fieldset>
  );
}
