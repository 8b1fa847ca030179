import { useState } from 'react';
import { useFieldArray, useWatch } from 'react-hook-form';
import type { BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { formatAmount, formatBillName } from '../ui/format';
import { lineCheck, priceCheck } from './bill-checks';
import { Checks, figureClass, figureProps, FormRow, Legend, type Form } from './BillFormRow';
import { Mark } from '../ui/Mark';
import { emptyLine, typedAmount, typedSum, type TypedBill, type TypedLine } from './typed';

interface LinesProps {
  form: Form;
  currency: string;
  others: BillView[];
}

const hasRate = ({ quantity, rate }: TypedLine) => quantity !== '' || rate !== '';

/** Line charges with their names as printed; where the bill prints them with quantity and rate. */
export function LineRows({ form, currency, others }: LinesProps) {
  const { control, getValues } = form;
  const { fields, append, remove } = useFieldArray({ control, name: 'lines' });
  const [from, lines] = useWatch({ control, name: ['from', 'lines'] });
  const before = others.filter((bill) => bill.from < from).at(-1);
  const usual = before?.lines.some(({ rate }) => typeof rate === 'number') ?? false;
  const [open, setOpen] = useState(usual || getValues('lines').some(hasRate));
  return (
    <>
      <Legend
        action={
          <span className="text-sm">
            <Button kind="quiet" aria-expanded={open} onClick={() => setOpen(!open)}>
              {open ? 'Amounts alone' : 'With quantities and rates'}
            </Button>
          </span>
        }
      >{`Lines, ${currency}`}</Legend>
      <div className="form-rows">
        {fields.map((field, index) => (
          <LineRow
            key={field.id}
            form={form}
            index={index}
            line={lines[index] ?? emptyLine()}
            currency={currency}
            before={before}
            withRate={open}
            onRemove={() => remove(index)}
          />
        ))}
      </div>
      <p className="mt-1 text-sm">
        <Button kind="quiet" onClick={() => append(emptyLine())}>
          Add a line
        </Button>
      </p>
    </>
  );
}

interface LineProps {
  form: Form;
  index: number;
  line: TypedLine;
  currency: string;
  before?: BillView;
  withRate: boolean;
  onRemove: () => void;
}

function LineRow({ form, index, line, currency, before, withRate, onRemove }: LineProps) {
  const { register, formState } = form;
  const faults = formState.errors.lines?.[index];
  const check = lineCheck(line, currency);
  const name = line.label || `line ${index + 1}`;
  return (
    <div className="bill-line">
      <FormRow
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
          <span className="flex items-baseline justify-between gap-2">
            <span>{check ? <Checks checks={[check]} /> : <BeforeNote {...{ before, line, currency }} />}</span>
            <Button kind="quiet" onClick={onRemove} aria-label={`Remove line ${index + 1}`}>
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
      </FormRow>
      {withRate && (
        <div className="bill-line-rate">
          <span>
            <input
              {...figureProps}
              aria-label={`Quantity of ${name}`}
              aria-invalid={faults?.quantity ? true : undefined}
              className={figureClass}
              placeholder="quantity"
              {...register(`lines.${index}.quantity`)}
            />
            <input
              type="text"
              aria-label={`Unit of ${name}`}
              autoComplete="off"
              className="input input-small"
              placeholder="unit"
              {...register(`lines.${index}.unit`)}
            />
          </span>
          <span>
            <i aria-hidden="true">×</i>
            <input
              {...figureProps}
              aria-label={`Rate of ${name}`}
              aria-invalid={faults?.rate ? true : undefined}
              className={figureClass}
              placeholder="rate"
              {...register(`lines.${index}.rate`)}
            />
          </span>
          <span className="hint fault">
            {faults?.quantity?.message ?? faults?.unit?.message ?? faults?.rate?.message}
          </span>
        </div>
      )}
    </div>
  );
}

/** What the bill before asks for under the same name. */
function BeforeNote({ before, line, currency }: { before?: BillView; line: TypedLine; currency: string }) {
  const amount = before?.lines.find(({ label }) => label === line.label)?.amountMinor;
  if (!before || amount === undefined) return null;
  if (typedAmount(line.amount, currency) === amount) return `as in ${formatBillName(before)}`;
  return <span className="max-phone:hidden">{`${formatBillName(before)}: ${formatAmount(amount, currency)}`}</span>;
}

/** The running sum of the lines against the printed total, and the average price against the bills around. */
export function TotalRows({ form, currency, others }: LinesProps) {
  const { control, register, formState } = form;
  const typed = useWatch({ control }) as TypedBill;
  const sum = typedSum(typed.lines, currency);
  const printed = typedAmount(typed.total, currency);
  const average = priceCheck(typed, printed ?? sum, others, currency);
  return (
    <div className="form-rows bill-form-total mt-4">
      <div className="form-row">
        <span>Lines typed</span>
        <b className="figure pr-[7px]">{formatAmount(sum, currency)}</b>
        <span className="hint">{currency}</span>
        <span />
      </div>
      <FormRow label="Printed total" unit={currency} fault={formState.errors.total?.message}>
        <input {...figureProps} className={`${figureClass} font-bold`} {...register('total')} />
      </FormRow>
      <div className="form-row" role="status">
        <span>{agreement(sum, printed)}</span>
        <b className={`figure pr-[7px] ${printed !== null && sum !== printed ? 'fault' : ''}`}>
          {printed === null ? '' : formatAmount(sum - printed, currency, { signed: true })}
        </b>
        <span />
        <span className="hint">{printed === null ? '' : 'lines less total'}</span>
      </div>
      {average && (
        <div className="form-row">
          <span>Average price</span>
          <b className="figure pr-[7px]">{average.price}</b>
          <span className="hint wide-note">
            <Checks checks={[average.check]} />
          </span>
        </div>
      )}
    </div>
  );
}

function agreement(sum: number, printed: number | null) {
  if (printed === null) return <Mark kind="hollow" word="no total typed" tone="quiet" />;
  if (sum === printed) return <Mark kind="filled" word="agrees" />;
  return <Mark kind="diamond" word="differs" tone="fault" />;
}
