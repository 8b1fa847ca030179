import { useState } from 'react';
import { changeRate, removeRate, setRate } from '../../client/people';
import type { RateView } from '../../schemas/rate';
import { Button } from '../ui/Button';
import { Field, NumberField, SelectField } from '../ui/Field';
import { currencyDecimals, formatAmount, formatDate } from '../ui/format';
import { typedNumber } from '../ui/typed-number';
import { ActFault, useAct } from './act';

export interface RateTableProps {
  userId: number;
  rates: RateView[];
  engagements: { id: number; code: string }[];
  currency: string;
  today: string;
}

function RateRow({ rate }: { rate: RateView }) {
  const [perHour, setPerHour] = useState(String(rate.perHourMinor / 10 ** currencyDecimals(rate.currency)));
  const [from, setFrom] = useState(rate.from);
  const [opened, setOpened] = useState(false);
  const change = useAct(rate.version, (version, input: { perHour: number; from: string }) =>
    changeRate(rate.id, { ...input, version }),
  );
  const remove = useAct(rate.version, (version, _input: null) => removeRate(rate.id, version));
  return (
    <>
      <tr>
        <th scope="row">{formatAmount(rate.perHourMinor, rate.currency)}</th>
        <td className="left">{rate.code ?? 'all others'}</td>
        <td className="left">
          {formatDate(rate.from)} {rate.until ? `to ${formatDate(rate.until)}` : 'on'}
        </td>
        <td>
          <Button kind="quiet" aria-expanded={opened} onClick={() => setOpened(!opened)}>
            Correct
          </Button>
        </td>
      </tr>
      {opened && (
        <tr>
          <td colSpan={4} className="left wrap">
            <div className="panel-form">
              <NumberField
                label="Rate"
                unit={`${rate.currency}/h`}
                value={perHour}
                error={change.fields.perHour?.[0]}
                onChange={(event) => setPerHour(event.target.value)}
              />
              <Field
                label="From"
                type="date"
                value={from}
                error={change.fields.from?.[0]}
                onChange={(event) => setFrom(event.target.value)}
              />
              <Button
                kind="secondary"
                busy={change.busy}
                onClick={() => change.send({ perHour: typedNumber(perHour) ?? NaN, from })}
              >
                Save the rate
              </Button>
              <Button kind="quiet" busy={remove.busy} onClick={() => remove.send(null)}>
                Remove it; hours of its time fall to the rate before
              </Button>
            </div>
            <ActFault act={change} what="This rate" />
            <ActFault act={remove} what="This rate" />
          </td>
        </tr>
      )}
    </>
  );
}

/** The billing rates of a person, newest first, and the form of a new one. */
export function RateTable({ userId, rates, engagements, currency, today }: RateTableProps) {
  const [draft, setDraft] = useState({ perHour: '', from: today, engagementId: '' });
  const add = useAct(0, (_version, input: typeof draft) =>
    setRate({
      userId,
      engagementId: input.engagementId === '' ? null : Number(input.engagementId),
      perHour: typedNumber(input.perHour) ?? NaN,
      from: input.from,
    }),
  );
  const set = (name: keyof typeof draft) => (event: { target: { value: string } }) =>
    setDraft({ ...draft, [name]: event.target.value });
  return (
    <div>
      <h3>Rates</h3>
      <table className="ledger panel-table">
        <thead>
          <tr>
            <th scope="col">
              Rate<span className="unit">{currency}/h</span>
            </th>
            <th scope="col" className="left">
              For
            </th>
            <th scope="col" className="left">
              In force
            </th>
            <th scope="col">
              <span className="unseen">Actions</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {rates.map((rate) => (
            <RateRow key={rate.id} rate={rate} />
          ))}
          {rates.length === 0 && (
            <tr>
              <td colSpan={4} className="left warn">
                None yet: hours are logged but worth nothing.
              </td>
            </tr>
          )}
        </tbody>
      </table>
      <div className="panel-form">
        <NumberField
          label="New rate"
          unit={`${currency}/h`}
          value={draft.perHour}
          error={add.fields.perHour?.[0]}
          onChange={set('perHour')}
        />
        <Field label="From" type="date" value={draft.from} error={add.fields.from?.[0]} onChange={set('from')} />
        <SelectField
          label="For"
          value={draft.engagementId}
          error={add.fields.engagementId?.[0]}
          onChange={set('engagementId')}
          options={[
            { value: '', label: 'all without their own' },
            ...engagements.map(({ id, code }) => ({ value: String(id), label: code })),
          ]}
        />
        <Button kind="secondary" busy={add.busy} onClick={() => add.send(draft)}>
          Set the rate
        </Button>
      </div>
      <ActFault act={add} what="This rate" />
    </div>
  );
}
