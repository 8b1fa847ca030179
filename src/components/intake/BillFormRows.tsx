import { useId } from 'react';
import { useFieldArray, useFormState, useWatch } from 'react-hook-form';
import { billQuantities, billQuantity, type BillView, type MeteredPeriod } from '../../schemas/bill';
import { beginCheck, endCheck, quantityChecks } from './bill-checks';
import { Checks, figureClass, figureProps, FormRow, Legend, type Form } from './BillFormRow';
import type { TypedBill } from './typed';

/** Number, period and reading as the head of the bill has them, with how the days stand to the bills around. */
export function HeadRows({ form, others }: { form: Form; others: BillView[] }) {
  const { control, register } = form;
  const [from, lastDay] = useWatch({ control, name: ['from', 'lastDay'] });
  const { errors } = useFormState({ control });
  return (
    <>
      <Legend>From the head</Legend>
      <div className="form-rows">
        <FormRow label="Invoice no." fault={errors.invoice?.message}>
          <input type="text" autoComplete="off" className={figureClass} {...register('invoice')} />
        </FormRow>
        <FormRow label="First day" note={<Checks checks={[beginCheck(from, others)]} />} fault={errors.from?.message}>
          <input type="date" className="input input-small" {...register('from')} />
        </FormRow>
        <FormRow
          label="Last day"
          note={<Checks checks={[endCheck(from, lastDay, others)]} />}
          fault={errors.lastDay?.message}
        >
          <input type="date" className="input input-small" {...register('lastDay')} />
        </FormRow>
        <FormRow label="Read on" note="where the bill says" fault={errors.readOn?.message}>
          <input type="date" className="input input-small" {...register('readOn')} />
        </FormRow>
        <div className="form-row">
          <span>Reading</span>
          <label className="field-check">
            <input type="checkbox" {...register('estimated')} />
            estimated
          </label>
          <span />
          <span />
        </div>
      </div>
    </>
  );
}

/** Quantities as printed, each against the meter and against one another; others can be added. */
export function QuantityRows({ form, metered }: { form: Form; metered: MeteredPeriod | null }) {
  const { control, register, formState } = form;
  const { fields, append } = useFieldArray({ control, name: 'quantities' });
  const typed = useWatch({ control }) as TypedBill;
  const unused = billQuantities.filter(({ name }) => !fields.some((field) => field.name === name));
  const id = useId();
  return (
    <>
      <Legend>Quantities</Legend>
      <div className="form-rows">
        {fields.map((field, index) => {
          const { label, unit } = billQuantity(field.name);
          return (
            <FormRow
              key={field.id}
              label={label}
              unit={unit}
              note={<Checks checks={quantityChecks(typed, index, metered)} />}
              fault={formState.errors.quantities?.[index]?.figure?.message}
            >
              <input {...figureProps} className={figureClass} {...register(`quantities.${index}.figure`)} />
            </FormRow>
          );
        })}
        {unused.length > 0 && (
          <div className="form-row">
            <label htmlFor={id} className="quiet">
              Another quantity
            </label>
            <select
              id={id}
              className="input input-small"
              value=""
              onChange={(event) => append({ name: event.target.value, figure: '' })}
            >
              <option value="">Choose</option>
              {unused.map(({ name, label, unit }) => (
                <option key={name} value={name}>
                  {unit ? `${label}, ${unit}` : label}
                </option>
              ))}
            </select>
            <span />
            <span />
          </div>
        )}
      </div>
    </>
  );
}
