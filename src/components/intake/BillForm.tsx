import { cloneElement, useId, useRef, useState, type ReactElement, type ReactNode } from 'react';
import {
  useFieldArray,
  useForm,
  useFormState,
  useWatch,
  type Control,
  type FieldErrors,
  type Resolver,
} from 'react-hook-form';
import { ApiError } from '../../client/api';
import { addBill, changeBill } from '../../client/intake';
import { billQuantities, billQuantity, daysBetween, type BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { FieldError } from '../ui/FieldError';
import { formatAmount, formatCount, formatDay } from '../ui/format';
import { Mark } from '../ui/Mark';
import { Notice } from '../ui/Notice';
import { keptAsTyped, startOfTyped } from './bill-start';
import { dayAfter, dayBefore, readTyped, typedAmount, typedSum, type TypedBill } from './typed';

export interface BillFormProps {
  code: string;
  currency: string;
  /** The bill to change; none: a new one. */
  bill: BillView | null;
  /** Kept bills in order: the next period and the names of lines come from them. */
  bills: BillView[];
  yearFrom: string;
  onDone: (saved: BillView) => void;
  onCancel: () => void;
}

/** Turns the faults of the typed bill into the form's own errors, by field. */
function resolverFor(currency: string): Resolver<TypedBill> {
  return (values) => {
    const read = readTyped(values, currency);
    if ('bill' in read) return { values, errors: {} };
    const errors: Record<string, unknown> = {};
    for (const [path, message] of Object.entries(read.faults)) place(errors, path.split('.'), message);
    return { values: {}, errors: errors as FieldErrors<TypedBill> };
  };
}

function place(into: Record<string, unknown>, [head = '', ...rest]: string[], message: string): void {
  if (rest.length === 0) into[head] = { type: 'typed', message };
  else place((into[head] ??= {}) as Record<string, unknown>, rest, message);
}

/** A bill typed from paper: period, quantities, lines, total, with running checks. */
export function BillForm({ code, currency, bill, bills, yearFrom, onDone, onCancel }: BillFormProps) {
  const start = bill ? keptAsTyped(bill, currency) : startOfTyped(bills, yearFrom);
  const form = useForm<TypedBill>({ defaultValues: start, resolver: resolverFor(currency), mode: 'onTouched' });
  const [fault, setFault] = useState<ApiError | null>(null);
  const version = useRef(bill?.version ?? 0);
  const { control, handleSubmit, register, formState } = form;

  const save = handleSubmit(async (values) => {
    const read = readTyped(values, currency);
    if (!('bill' in read)) return;
    setFault(null);
    try {
      onDone(
        bill
          ? await changeBill(code, { id: bill.id, version: version.current }, read.bill)
          : await addBill(code, read.bill),
      );
    } catch (error) {
      if (error instanceof ApiError) setFault(error);
      else throw error;
    }
  });
  return (
    <form onSubmit={(event) => void save(event)} noValidate className="bill-form">
      <PeriodRows control={control} bills={bills} bill={bill}>
        <input type="date" className="input input-small" {...register('from')} />
        <input type="date" className="input input-small" {...register('lastDay')} />
      </PeriodRows>
      <QuantityRows form={form} />
      <LineRows form={form} currency={currency} />
      <TotalRows form={form} currency={currency} />
      {fault && (
        <SaveFault
          fault={fault}
          currency={currency}
          onTheirs={(theirs) => {
            version.current = theirs.version;
            form.reset(keptAsTyped(theirs, currency));
            setFault(null);
          }}
          onMine={(theirs) => {
            version.current = theirs.version;
            void save();
          }}
        />
      )}
      <div className="actions mt-4">
        <Button type="submit" busy={formState.isSubmitting}>
          {bill ? 'Save the bill' : 'Keep this bill'}
        </Button>
        <Button kind="secondary" onClick={onCancel}>
          {bill ? 'Leave it as it was' : 'Put the form away'}
        </Button>
      </div>
    </form>
  );
}

type InputElement = ReactElement<{ id?: string; 'aria-invalid'?: true; 'aria-describedby'?: string }>;
type Form = ReturnType<typeof useForm<TypedBill>>;

function Legend({ children }: { children: string }) {
  return <h3 className="mt-4 mb-1">{children}</h3>;
}

function PeriodRows(props: {
  control: Control<TypedBill>;
  bills: BillView[];
  bill: BillView | null;
  children: [InputElement, InputElement];
}) {
  const from = useWatch({ control: props.control, name: 'from' });
  const lastDay = useWatch({ control: props.control, name: 'lastDay' });
  const { errors } = useFormState({ control: props.control });
  const others = props.bills.filter((bill) => bill.id !== props.bill?.id);
  const before = others.filter((bill) => bill.from < from).at(-1);
  const days = from && lastDay ? daysBetween(from, dayAfter(lastDay)) : NaN;
  return (
    <>
      <Legend>Period</Legend>
      <div className="form-rows">
        <Row label="First day" note={before && from ? joining(before.to, from) : ''} fault={errors.from?.message}>
          {props.children[0]}
        </Row>
        <Row label="Last day" note={days > 0 ? formatCount(days, 'day') : ''} fault={errors.lastDay?.message}>
          {props.children[1]}
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

function QuantityRows({ form }: { form: Form }) {
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

function LineRows({ form, currency }: { form: Form; currency: string }) {
  const { control, register, formState } = form;
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
                <Button kind="quiet" onClick={() => remove(index)} aria-label={`Remove line ${index + 1}`}>
                  remove
                </Button>
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

function TotalRows({ form, currency }: { form: Form; currency: string }) {
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

/** What the server said; of two changes of one bill the person may load theirs or save over it knowingly. */
function SaveFault(props: {
  fault: ApiError;
  currency: string;
  onTheirs: (theirs: BillView) => void;
  onMine: (theirs: BillView) => void;
}) {
  const { fault, currency, onTheirs, onMine } = props;
  const theirs = fault.code === 'stale' ? (fault.details.theirs as BillView | undefined) : undefined;
  const fields = Object.values(fault.fields).flat();
  return (
    <div className="mt-4">
      <Notice kind="fault" title={fault.message} problems={fields.map((message) => ({ message }))}>
        {theirs && (
          <span className="actions">
            <span>
              Theirs: {formatCount(theirs.lines.length, 'line')}, lines {formatAmount(theirs.linesMinor, currency)},
              total {theirs.totalMinor === null ? 'none' : formatAmount(theirs.totalMinor, currency)}.
            </span>
            <Button kind="quiet" onClick={() => onTheirs(theirs)}>
              Load theirs
            </Button>
            <Button kind="quiet" onClick={() => onMine(theirs)}>
              Save mine over it
            </Button>
          </span>
        )}
      </Notice>
    </div>
  );
}
