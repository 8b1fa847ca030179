import { cloneElement, useId, type ReactElement, type ReactNode } from 'react';
import { useFieldArray, useFormState, useWatch, type UseFormReturn } from 'react-hook-form';
import { billQuantities, billQuantity, daysBetween, type BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { FieldError } from '../ui/FieldError';
import { formatAmount, formatBillName, formatCount, formatDay } from '../ui/format';
import { Mark } from '../ui/Mark';
import { dayAfter, dayBefore, typedAmount, typedSum, type TypedBill } from './typed';

type InputElement = ReactElement<{ id?: string; 'aria-invalid'?: true; 'aria-describedby'?: string }>;
type Form = UseFormReturn<TypedBill>;

function Legend({ children }: { children: string }) {
  return <h3 className="mt-4 mb-1">{children}</h3>;
}

/** First and last day, with how they stand to the bill before. */
export function PeriodRows({ form, others }: { form: Form; others: BillView[] }) {
  const { control, register } = form;
  const [from, lastDay] = useWatch({ control, name: ['from', 'lastDay'] });
  const { errors } = useFormState({ control });
  const before = others.filter((bill) => bill.from < from).at(-1);
  const days = from && lastDay ? daysBetween(from, dayAfter(lastDay)) : NaN;
  return (
    <>
      <Legend>Period</Legend>
      <div className="form-rows">
        <Row label="First day" note={before && from ? joining(before.to, from) : ''} fault={errors.from?.message}>
          <input type="date" className="input input-small" {...register('from')} />
        </Row>
        <Row label="Last day" note={days > 0 ? formatCount(days, 'day') : ''} fault={errors.lastDay?.message}>
          <input type="date" className="input input-small" {...register('lastDay')} />
        </Row>
      </div>
    </>
  );
}

/** How a period's first day stands to the end of the bill before it. */
function joining(to: string, from: string): string {
  const gap = daysBetween(to, from);
  if (gap === 0) return `joins ${formatDay(dayBefore(to))}`;
  return gap > 0
    ? `${formatCount(gap, 'day')} after ${formatDay(dayBefore(to))}`
    : `overlaps up to ${formatDay(dayBefore(to))}`;
}

interface RowProps {
  label: ReactNode;
  note?: ReactNode;
  fault?: string;
  children: InputElement;
}

/** Label, control, remark; the fault beneath. */
function Row({ label, note, fault, children }: RowProps) {
  const id = useId();
  return (
    <div className="form-row">
      {typeof label === 'string' ? <label htmlFor={id}>{label}</label> : label}
      {cloneElement(children, {
        id,
        'aria-invalid': fault ? true : undefined,
        'aria-describedby': fault ? `${id}-error` : undefined,
      })}
      <span className="hint">{note}</span>
      <FieldError fault={fault} id={`${id}-error`} />
    </div>
  );
}

const figureProps = { type: 'text', inputMode: 'decimal', autoComplete: 'off' } as const;
const figureClass = 'input input-small input-number';

/** Quantities as printed; others can be added. */
export function QuantityRows({ form }: { form: Form }) {
  const { control, register, formState } = form;
  const { fields, append } = useFieldArray({ control, name: 'quantities' });
  const unused = billQuantities.filter(({ name }) => !fields.some((field) => field.name === name));
  const id = useId();
  return (
    <>
      <Legend>Quantities, as printed</Legend>
      <div className="form-rows">
        {fields.map((field, index) => {
          const { label, unit } = billQuantity(field.name);
          return (
            <Row
              key={field.id}
              label={label}
              note={unit || 'as a fraction'}
              fault={formState.errors.quantities?.[index]?.figure?.message}
            >
              <input {...figureProps} className={figureClass} {...register(`quantities.${index}.figure`)} />
            </Row>
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
          </div>
        )}
      </div>
    </>
  );
}

/** Line charges with their names as printed. */
export function LineRows({ form, currency, others }: { form: Form; currency: string; others: BillView[] }) {
  const { control, register, formState } = form;
  const [from, typed] = useWatch({ control, name: ['from', 'lines'] });
  const before = others.filter((bill) => bill.from < from).at(-1);
  const amountBefore = (label: string | undefined) => before?.lines.find((line) => line.label === label)?.amountMinor;
  const { fields, append, remove } = useFieldArray({ control, name: 'lines' });
  return (
    <>
      <Legend>{`Lines, ${currency}`}</Legend>
      <div className="form-rows">
        {fields.map((field, index) => {
          const faults = formState.errors.lines?.[index];
          return (
            <Row
              key={field.id}
              label={
                <input
                  type="text"
                  aria-label={`Name of line ${index + 1}`}
                  placeholder="Name as printed"
                  className="input input-small"
                  {...register(`lines.${index}.label`)}
                />
              }
              note={
                <span className="flex justify-between gap-2">
                  <BeforeNote bill={before} amountMinor={amountBefore(typed[index]?.label)} currency={currency} />
                  <Button kind="quiet" onClick={() => remove(index)} aria-label={`Remove line ${index + 1}`}>
                    remove
                  </Button>
                </span>
              }
              fault={faults?.label?.message ?? faults?.amount?.message}
            >
              <input
                {...figureProps}
                aria-label={`Amount of line ${index + 1}`}
                className={figureClass}
                {...register(`lines.${index}.amount`)}
              />
            </Row>
          );
        })}
      </div>
      <p className="mt-1 text-sm">
        <Button kind="quiet" onClick={() => append({ label: '', amount: '' })}>
          Add a line
        </Button>
      </p>
    </>
  );
}

/** What the bill before asks for under the same name. */
function BeforeNote(props: { bill?: BillView; amountMinor?: number; currency: string }) {
  const { bill, amountMinor, currency } = props;
  if (!bill || amountMinor === undefined) return <span />;
  return <span className="max-phone:hidden">{`${formatBillName(bill)}: ${formatAmount(amountMinor, currency)}`}</span>;
}

/** The running sum of the lines against the printed total. */
export function TotalRows({ form, currency }: { form: Form; currency: string }) {
  const { control, register, formState } = form;
  const lines = useWatch({ control, name: 'lines' });
  const total = useWatch({ control, name: 'total' });
  const sum = typedSum(lines, currency);
  const printed = typedAmount(total, currency);
  return (
    <div className="form-rows bill-form-total mt-4">
      <div className="form-row">
        <span>Lines typed</span>
        <b className="figure pr-[7px]">{formatAmount(sum, currency)}</b>
        <span className="hint">{currency}</span>
      </div>
      <Row label="Printed total" note={currency} fault={formState.errors.total?.message}>
        <input {...figureProps} className={`${figureClass} font-bold`} {...register('total')} />
      </Row>
      <div className="form-row" role="status">
        <span>{agreement(sum, printed)}</span>
        <b className={`figure pr-[7px] ${printed !== null && sum !== printed ? 'fault' : ''}`}>
          {printed === null ? '' : formatAmount(sum - printed, currency, { signed: true })}
        </b>
        <span className="hint">{printed === null ? '' : 'lines less total'}</span>
      </div>
    </div>
  );
}

function agreement(sum: number, printed: number | null) {
  if (printed === null) return <Mark kind="hollow" word="no total typed" tone="quiet" />;
  if (sum === printed) return <Mark kind="filled" word="agrees" />;
  return <Mark kind="diamond" word="differs" tone="fault" />;
}
