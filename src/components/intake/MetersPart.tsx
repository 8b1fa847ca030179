import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { addMeter, removeMeter } from '../../client/engagements';
import type { MeterOfYear, MetersOfYear } from '../../schemas/intervals';
import { Button } from '../ui/Button';
import { Field, SelectField } from '../ui/Field';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { metersLedger } from './meters-ledger';
import { reload } from './reload';
import { SheetPart } from './Sheet';

export interface MetersPartProps extends MetersOfYear {
  code: string;
  number: string;
  /** The meter the rest of the page shows. */
  shown: number;
}

/** The meters whose bill is audited: one, or several that the utility adds up. */
export function MetersPart(props: MetersPartProps) {
  const { number, meters, together, shown, code } = props;
  const several = meters.length > 1;
  return (
    <SheetPart
      id="meters"
      number={number}
      title={several ? 'Meters billed together' : 'Meters'}
      lead={
        several
          ? 'Their readings are added, interval by interval and register by register, before anything is measured. The rest of the page shows the meter marked.'
          : 'The bills are those of one meter. Where the utility adds several of the site before it bills, add them here.'
      }
      reference={several && <p>The schedule must say “meters: summed”; else the year is not priced.</p>}
    >
      <div className="stacked">
        {several && <LedgerTable {...metersLedger(code, meters, together, shown)} label="Meters billed together" />}
        {meters.slice(1).map((meter) => (
          <TakeOff key={meter.id} code={code} meter={meter} />
        ))}
        <AddMeter {...props} />
      </div>
    </SheetPart>
  );
}

function TakeOff({ code, meter }: { code: string; meter: MeterOfYear }) {
  const [asked, setAsked] = useState(false);
  const remove = useMutation({ mutationFn: () => removeMeter(code, meter.id), onSuccess: () => reload(false) });
  return (
    <p className="mt-2 flex flex-wrap gap-x-4 text-sm">
      {asked ? (
        <>
          <span>{`${meter.label} is no longer added. It stays at the site with what is kept of it.`}</span>
          <Button kind="quiet" busy={remove.isPending} onClick={() => remove.mutate()}>
            Take {meter.label} off
          </Button>
          <Button kind="quiet" onClick={() => setAsked(false)}>
            Leave it
          </Button>
        </>
      ) : (
        <Button kind="quiet" onClick={() => setAsked(true)}>
          Take {meter.label} off
        </Button>
      )}
      {remove.error && <Notice kind="fault" title={remove.error.message} />}
    </p>
  );
}

function AddMeter({ code, others }: MetersPartProps) {
  const [open, setOpen] = useState(false);
  const [chosen, setChosen] = useState(others[0] ? String(others[0].id) : 'new');
  const [label, setLabel] = useState('');
  const add = useMutation({
    mutationFn: () =>
      addMeter(
        code,
        chosen === 'new' ? { kind: 'new', label, serviceVoltageKv: null } : { kind: 'known', id: Number(chosen) },
      ),
    onSuccess: () => reload(false),
  });
  if (!open) {
    return (
      <p className="mt-2 text-sm">
        <Button kind="quiet" onClick={() => setOpen(true)}>
          Add a meter
        </Button>
      </p>
    );
  }
  return (
    <div className="member-add">
      <SelectField
        label="Meter"
        options={[
          ...others.map((meter) => ({ value: String(meter.id), label: meter.label })),
          { value: 'new', label: 'A new meter' },
        ]}
        value={chosen}
        onChange={(event) => setChosen(event.target.value)}
      />
      {chosen === 'new' && (
        <Field
          label="Number of the meter"
          hint="As on the bill"
          value={label}
          onChange={(event) => setLabel(event.target.value)}
        />
      )}
      <Button kind="secondary" busy={add.isPending} onClick={() => add.mutate()}>
        Add it
      </Button>
      {add.error && <Notice kind="fault" title={add.error.message} />}
    </div>
  );
}
