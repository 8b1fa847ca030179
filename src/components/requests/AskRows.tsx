import { useFieldArray, type UseFormReturn } from 'react-hook-form';
import { itemKinds, itemKindWords, type RequestDraft } from '../../schemas/request';
import { Button } from '../ui/Button';
import { Field, SelectField, TextAreaField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import { Notice } from '../ui/Notice';
import { emptyRow, type AskDraft } from './ask-draft';

const kindOptions = itemKinds.map((value) => ({ value, label: itemKindWords[value] }));

interface RowProps {
  form: UseFormReturn<AskDraft>;
  index: number;
  motors: RequestDraft['motors'];
}

function AskRowFields({ form, index, motors }: RowProps) {
  const { why, chosen } = form.watch(`rows.${index}`);
  const entry = (name: 'kind' | 'words' | 'from' | 'lastDay' | 'motorId') => ({
    ...form.register(`rows.${index}.${name}`),
    error: messageAt(form.formState.errors, `rows.${index}.${name}`),
  });
  const motorOptions = motors.map(({ id, name }) => ({ value: String(id), label: name }));
  return (
    <li className={`ask-row ${chosen ? '' : 'ask-out'}`}>
      <input type="checkbox" aria-label={`Ask for thing ${index + 1}`} {...form.register(`rows.${index}.chosen`)} />
      <div className="stacked">
        {why && <p className="hint">{why}</p>}
        {chosen ? (
          <div className="ask-fields">
            <div className="whole">
              <TextAreaField label="What the client reads" rows={2} {...entry('words')} />
            </div>
            <SelectField label="Kind" size="small" options={kindOptions} {...entry('kind')} />
            <Field label="First day" type="date" size="small" {...entry('from')} />
            <Field label="Last day" type="date" size="small" {...entry('lastDay')} />
            {motors.length > 0 && (
              <SelectField label="Motor" size="small" placeholder="none" options={motorOptions} {...entry('motorId')} />
            )}
          </div>
        ) : (
          <p>{form.getValues(`rows.${index}.words`)}</p>
        )}
      </div>
    </li>
  );
}

/** What is asked for, a row a thing: those drafted from what is missing, and those one adds. */
export function AskRows({ form, motors }: Omit<RowProps, 'index'>) {
  const rows = useFieldArray({ control: form.control, name: 'rows' });
  const fault = messageAt(form.formState.errors, 'rows');
  return (
    <div>
      <ol className="ask-rows">
        {rows.fields.map((field, index) => (
          <AskRowFields key={field.id} form={form} index={index} motors={motors} />
        ))}
      </ol>
      {fault && <Notice kind="fault" title={fault} />}
      <p className="mt-3">
        <Button kind="secondary" size="small" onClick={() => rows.append(emptyRow())}>
          Add another thing
        </Button>
      </p>
    </div>
  );
}
