import { useEffect, useRef, useState } from 'react';
import { ApiError } from '../../client/api';
import { tryMonth } from '../../client/try-out';
import type { TryView } from '../../schemas/try-out';
import { ColumnNames, SheetHeading, SheetPart } from '../intake/Sheet';
import { Button, ButtonLink } from '../ui/Button';
import { FindingSlip } from '../ui/FindingSlip';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { ResultSums } from '../ui/ResultSums';
import { draftFaults, queryOf, tryInputOf, type TryDraft } from './draft';
import { billTable, tryRows } from './tables';
import { ContractRows, MeasuredRows, PeriodRows, QuickRows } from './TryForm';

export interface TryOutProps {
  /** Endpoint that prices the month. */
  path: string;
  /** What is tried, and where it can be read. */
  subject: { title: string; href: string };
  today: string;
  start: TryDraft;
  view: TryView;
}

const pauseMs = 250;

/** Prices as one types: after a short pause, the newest answer only. The address keeps what was typed. */
function useTrying(props: TryOutProps) {
  const [draft, setDraft] = useState(props.start);
  const [view, setView] = useState(props.view);
  const [trouble, setTrouble] = useState<string | null>(null);
  const turn = useRef(0);
  const isFirst = useRef(true);
  const { path } = props;
  const faults = draftFaults(draft);
  const isUsable = Object.keys(faults).length === 0;
  useEffect(() => {
    if (isFirst.current) {
      isFirst.current = false;
      return;
    }
    const own = ++turn.current;
    const timer = setTimeout(() => {
      history.replaceState(null, '', `${location.pathname}?${queryOf(draft)}`);
      if (!isUsable) return;
      tryMonth(path, tryInputOf(draft)).then(
        (answer) => {
          if (own !== turn.current) return;
          setView(answer);
          setTrouble(null);
        },
        (error: unknown) => {
          if (own === turn.current) setTrouble(troubleOf(error));
        },
      );
    }, pauseMs);
    return () => clearTimeout(timer);
  }, [draft, path, isUsable]);
  const change = (changes: TryDraft) => setDraft((former) => ({ ...former, ...changes }));
  return { draft, view, trouble, change, faults: { ...(isUsable ? view.faults : {}), ...faults }, isUsable };
}

function troubleOf(error: unknown): string {
  if (!(error instanceof ApiError)) throw error;
  if (error.status !== 401) return error.message;
  return 'You are no longer signed in. The address of this page keeps what you typed: sign in again and come back to it.';
}

function CopyText({ text }: { text: string }) {
  const [isCopied, setCopied] = useState(false);
  const area = useRef<HTMLTextAreaElement>(null);
  useEffect(() => setCopied(false), [text]);
  const copy = async () => {
    area.current?.select();
    await navigator.clipboard.writeText(text).then(
      () => setCopied(true),
      () => setCopied(false),
    );
  };
  return (
    <div className="try-text">
      <textarea
        ref={area}
        className="input"
        aria-label="The result as text"
        readOnly
        rows={Math.min(40, text.split('\n').length + 3)}
        value={text}
      />
      <div className="actions actions-inline mt-3">
        <Button kind="secondary" onClick={() => void copy()}>
          Copy the text
        </Button>
        <span className="hint" role="status">
          {isCopied ? 'Copied.' : ''}
        </span>
      </div>
    </div>
  );
}

function Result({ view }: { view: TryView }) {
  if (!view.bill) return <p>The sums stand here as soon as there is a bill.</p>;
  return (
    <>
      <ResultSums rows={tryRows(view)} />
      {view.noTarget && <p>{view.noTarget}</p>}
      {view.bill.notes.map((note) => (
        <FindingSlip key={note} title="Note of the pricing">
          {note}
        </FindingSlip>
      ))}
      <FindingSlip title="Not a setting" caution>
        What a motor can deliver is limited by its stator, its field and the voltage of the plant. Settings are worked
        out at the station Motors, then reviewed and made by qualified persons.
      </FindingSlip>
    </>
  );
}

/** Island: one month told in short, priced on a schedule as one types, beside the same month with the field raised. */
export function TryOut(props: TryOutProps) {
  const { draft, view, trouble, change, faults, isUsable } = useTrying(props);
  const form = { draft, view, faults, today: props.today, onChange: change };
  const { bill } = view;
  const isStale = !isUsable || Object.keys(faults).length > 0;
  return (
    <>
      <SheetHeading
        title={isStale ? 'One entry needs a change before this month can be priced.' : view.headline}
        lead={`A month tried on ${props.subject.title}. Nothing is kept; the address of the page holds what you type.`}
      >
        <ButtonLink kind="secondary" href={props.subject.href}>
          Read the schedule
        </ButtonLink>
      </SheetHeading>
      <ColumnNames />
      <SheetPart
        id="told"
        number="1"
        title="What the bill says"
        reference={<p>The month decides season, riders and clock changes</p>}
        result={<Result view={view} />}
      >
        {trouble && <Notice kind="fault" title="Not priced.">{` ${trouble}`}</Notice>}
        {faults.form && <Notice kind="fault" title="Not priced.">{` ${faults.form}`}</Notice>}
        <PeriodRows {...form} />
        <QuickRows {...form} />
        {view.contract.length > 0 && <h3 className="section-title mt-5">Of the contract</h3>}
        <ContractRows {...form} />
      </SheetPart>
      {view.measured.length > 0 && (
        <SheetPart
          id="measured"
          number="2"
          title="What the schedule measures"
          lead="Dashed: assumed from the figures above. Type over what you know; empty a field to go back."
          reference={
            <>
              <p>Energy goes by the hours of the windows, each window has the same peak, kvarh go with kWh</p>
              <p>
                Raised power factor: what was typed keeps its part at unity and shrinks above it as the assumption does
              </p>
            </>
          }
        >
          <MeasuredRows fields={[...view.measured, ...view.lookBacks]} {...form} />
        </SheetPart>
      )}
      {bill && !isStale && (
        <SheetPart
          id="bill"
          number="3"
          title="The bill, line by line"
          lead={`Amounts in ${view.currency}. Press Enter on an amount to see how it came about.`}
          reference={
            <p>
              Earlier months not typed count as being like this one, in each column by itself: ratchets have settled
            </p>
          }
        >
          <LedgerTable {...billTable(view, bill)} label="The bill, line by line" stack />
        </SheetPart>
      )}
      {view.summary && !isStale && (
        <SheetPart id="text" number="4" title="To paste into a mail">
          <CopyText text={view.summary} />
        </SheetPart>
      )}
    </>
  );
}
