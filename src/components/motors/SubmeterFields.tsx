import { useMutation } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { useFormContext } from 'react-hook-form';
import { ApiError } from '../../client/api';
import { removeSubmeter, sendSubmeter } from '../../client/shaft-load';
import type { IntakeProblem } from '../../core/intake';
import type { ShaftLoadView } from '../../schemas/shaft-load';
import { Button } from '../ui/Button';
import { DropPlace, FilePicker } from '../ui/DropPlace';
import { NumberField, SelectField } from '../ui/Field';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { Progress } from '../ui/Progress';
import { typedNumber } from '../ui/typed-number';
import type { LoadDraft } from './load-draft';
import { fileTable } from './load-words';

export interface SubmeterFieldsProps {
  view: ShaftLoadView;
  timeZone: string;
  onChange: (view: ShaftLoadView) => void;
}

interface Sending {
  file: File;
  sent: number;
  stop: AbortController;
}

function useSending(motorId: number, onChange: (view: ShaftLoadView) => void) {
  const [sending, setSending] = useState<Sending | null>(null);
  const send = useMutation({
    mutationFn: ({ file, factor }: { file: File; factor: number }) => {
      const stop = new AbortController();
      const onProgress = (share: number) => setSending({ file, sent: share * file.size, stop });
      onProgress(0);
      return sendSubmeter(motorId, file, factor, onProgress, stop.signal);
    },
    onSuccess: onChange,
    onSettled: () => setSending(null),
  });
  return { sending, send };
}

function Fault({ error }: { error: Error }) {
  if (!(error instanceof ApiError)) return <Notice kind="fault" title="The file could not be sent. Try again." />;
  if (error.code === 'stopped') return <Notice title={error.message} />;
  const problems = (error.details.problems ?? []) as IntakeProblem[];
  const remedies = Object.values(error.fields).flat();
  return (
    <Notice kind="fault" title="The file was not taken in." problems={problems}>
      {problems.length === 0 ? (
        <span>{[error.message, ...remedies].join(' ')}</span>
      ) : (
        <span>A table of two columns is the simplest: the beginning of each interval, and kW.</span>
      )}
    </Notice>
  );
}

function SendingFile({ file, sent, stop }: Sending) {
  if (sent >= file.size) {
    return (
      <div className="progress" role="status">
        <div className="progress-line">
          <span>Reading {file.name}</span>
        </div>
      </div>
    );
  }
  const [done, total] = [Math.round(sent / 1000), Math.max(1, Math.round(file.size / 1000))];
  return <Progress title={`Sending ${file.name}`} done={done} total={total} units="kB" onStop={() => stop.abort()} />;
}

/** Files of the motor's submeter: sent here, read at once, taken back one by one. */
export function SubmeterFields({ view, timeZone, onChange }: SubmeterFieldsProps) {
  const picker = useRef<HTMLInputElement>(null);
  const [factor, setFactor] = useState('1');
  const { register } = useFormContext<LoadDraft>();
  const { sending, send } = useSending(view.motorId, onChange);
  const remove = useMutation({ mutationFn: (id: number) => removeSubmeter(view.motorId, id), onSuccess: onChange });
  const notes = view.files.flatMap(({ fileName, notes: said }) =>
    said.map((message) => ({ where: fileName, message })),
  );
  const times = typedNumber(factor);
  const factorFault = times !== undefined && times > 0 ? undefined : 'Write a number above 0.';
  const take = ([file]: File[]) => {
    if (file && !sending && !factorFault) send.mutate({ file, factor: times! });
  };
  return (
    <div className="load-source">
      <p className="section-lead">
        Active power of this motor alone, kW or kWh by interval. The shaft load is the input less the losses at the
        field of today. Where two files have a reading for one time, the later file stands.
      </p>
      <DropPlace onFiles={take}>
        <FilePicker picker={picker} accept=".csv,.txt,.tsv,.xlsx,.xls,.ods,.xml,.zip" onFiles={take} />
        {sending ? (
          <SendingFile {...sending} />
        ) : (
          <div className="load-send">
            <NumberField
              label="Multiplier"
              size="small"
              value={factor}
              onChange={(event) => setFactor(event.target.value)}
              error={factorFault}
              hint="Of the meter, where its figures lack it; 0.001 for W"
            />
            <div className="actions">
              <Button kind="secondary" onClick={() => picker.current?.click()}>
                Bring in the submeter’s file
              </Button>
              <span>or drop it here</span>
            </div>
          </div>
        )}
        {send.error && <Fault error={send.error} />}
      </DropPlace>
      {view.files.length > 0 && (
        <LedgerTable
          {...fileTable(view.files, timeZone)}
          label="Files of the submeter"
          roomy
          stack
          renderActions={(row) => (
            <Button kind="quiet" busy={remove.isPending} onClick={() => remove.mutate(Number(row.id))}>
              Take back
            </Button>
          )}
        />
      )}
      {remove.error && <Notice kind="fault" title={remove.error.message} />}
      {notes.length > 0 && <Notice title="Assumed in reading:" problems={notes} />}
      <div className="form-grid">
        <SelectField
          label="Where readings are missing"
          {...register('whenMissing')}
          options={[
            { value: 'calendar', label: 'the shift calendar holds' },
            { value: 'standstill', label: 'the motor stands still' },
          ]}
        />
      </div>
    </div>
  );
}
