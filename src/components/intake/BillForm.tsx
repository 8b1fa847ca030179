import { useRef, useState, type ReactNode } from 'react';
import { FormProvider, useForm, useWatch, type Resolver } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { useDraft } from '../../client/drafts';
import { addBill, changeBill } from '../../client/intake';
import type { BillView } from '../../schemas/bill';
import { Button } from '../ui/Button';
import { Notice } from '../ui/Notice';
import { nestErrors } from '../ui/form-errors';
import { BillFieldTargetContext } from './bill-field-target';
import { keptAsTyped, startOfTyped } from './bill-start';
import { LineRows, TotalRows } from './BillFormLines';
import { HeadRows, QuantityRows } from './BillFormRows';
import { BillSaveFault } from './BillSaveFault';
import { readTyped, type TypedBill } from './typed';
import { useFieldTarget } from './use-bill-field-target';
import { useMetered } from './use-metered';

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
  /** What stands left of the form, such as the pages of the bill; it can write into fields through `useBillFieldTarget`. */
  beside?: ReactNode;
}

/** Turns the faults of the typed bill into the form's own errors, by field. */
function resolverFor(currency: string): Resolver<TypedBill> {
  return (values) => {
    const read = readTyped(values, currency);
    if ('bill' in read) return { values, errors: {} };
    const messages = Object.entries(read.faults).map(([path, message]) => [path, [message]]);
    return { values: {}, errors: nestErrors<TypedBill>(Object.fromEntries(messages)) };
  };
}

/** A bill typed from paper: period, quantities, lines, total, with running checks. */
export function BillForm({ code, currency, bill, bills, yearFrom, onDone, onCancel, beside }: BillFormProps) {
  const start = bill ? keptAsTyped(bill, currency) : startOfTyped(bills, yearFrom);
  const form = useForm<TypedBill>({ defaultValues: start, resolver: resolverFor(currency), mode: 'onTouched' });
  const others = bills.filter((other) => other.id !== bill?.id);
  const [fault, setFault] = useState<ApiError | null>(null);
  const version = useRef(bill?.version ?? 0);
  const kept = useDraft<TypedBill>(`bill:${code}:${bill?.id ?? 'new'}`, form);
  const { handleSubmit, formState } = form;
  const [from, lastDay] = useWatch({ control: form.control, name: ['from', 'lastDay'] });
  const metered = useMetered(code, from, lastDay);
  const { target, handlers } = useFieldTarget(form);

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
      if (kept.rescue(error)) return;
      if (error instanceof ApiError) setFault(error);
      else throw error;
    }
  });
  const typed = (
    <form onSubmit={(event) => void save(event)} noValidate className="bill-form" {...handlers}>
      {kept.restored && <Notice title="This is what you typed before you had to sign in again. It is not saved yet." />}
      <HeadRows form={form} others={others} />
      <QuantityRows form={form} metered={metered} />
      <LineRows form={form} currency={currency} others={others} />
      <TotalRows form={form} currency={currency} others={others} />
      {fault && (
        <BillSaveFault
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
  return (
    <BillFieldTargetContext.Provider value={target}>
      {beside ? (
        <div className="bill-pair">
          <FormProvider {...form}>{beside}</FormProvider>
          {typed}
        </div>
      ) : (
        typed
      )}
    </BillFieldTargetContext.Provider>
  );
}
