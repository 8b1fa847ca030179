import { useState, type ReactNode } from 'react';
import { Button } from '../ui/Button';

export interface SheetHeadingProps {
  /** The finding in one sentence. */
  title: string;
  lead?: ReactNode;
  children?: ReactNode;
}

/** The head of a sheet that changes while one works on it. */
export function SheetHeading({ title, lead, children }: SheetHeadingProps) {
  return (
    <header className="sheet-head">
      <h1>{title}</h1>
      {lead && <p className="lead">{lead}</p>}
      {children && <div className="actions">{children}</div>}
    </header>
  );
}

/** Names of the three columns. */
export function ColumnNames() {
  return (
    <div className="columns column-names" aria-hidden="true">
      <div className="reference">Reference</div>
      <div className="working">Working</div>
      <div className="result">Result</div>
    </div>
  );
}

export interface SheetPartProps {
  id: string;
  number: string;
  title: string;
  lead?: ReactNode;
  reference?: ReactNode;
  result?: ReactNode;
  /** A finished part may be closed to this one line. */
  foldedTo?: string;
  children: ReactNode;
}

/** A numbered part of a sheet in its three columns; one that is finished opens and closes. */
export function SheetPart({ id, number, title, lead, reference, result, foldedTo, children }: SheetPartProps) {
  const [opened, setOpened] = useState<boolean | null>(null);
  const folded = foldedTo !== undefined && opened !== true;
  return (
    <section className="columns" id={id} aria-labelledby={`${id}-title`}>
      <div className="reference">{!folded && reference}</div>
      <div className="working">
        <div className="flex items-baseline justify-between gap-4">
          <h2 className="section-title" id={`${id}-title`}>
            <span className="number">{number}</span>
            {title}
          </h2>
          {foldedTo !== undefined && (
            <span className="text-sm">
              <Button
                kind="quiet"
                aria-expanded={!folded}
                aria-controls={`${id}-body`}
                onClick={() => setOpened(folded)}
              >
                {folded ? 'Open' : 'Close'}
              </Button>
            </span>
          )}
        </div>
        {folded ? <p className="section-lead">{foldedTo}</p> : lead && <p className="section-lead">{lead}</p>}
        <div id={`${id}-body`} hidden={folded}>
          {!folded && children}
        </div>
      </div>
      <div className={folded || !result ? 'result result-empty' : 'result'}>{!folded && result}</div>
    </section>
  );
}

export interface StepTap {
  id: string;
  label: string;
  done: boolean;
  current: boolean;
  reason: string;
}

/** The four steps, hung from a bar in ink. */
export function StepBus({ steps }: { steps: StepTap[] }) {
  return (
    <nav className="bus bus-ink" aria-label="Steps of the intake">
      <ol>
        {steps.map((step) => (
          <li key={step.id}>
            <a
              className={`tap tap-${step.done ? 'closed' : 'open'}`}
              href={`#${step.id}`}
              aria-current={step.current ? 'step' : undefined}
            >
              <i className="breaker" aria-hidden="true" />
              <b>{step.label}</b>
              <span className="reason">
                <span className="unseen">{step.done ? 'complete' : 'not complete'}: </span>
                {step.reason}
              </span>
            </a>
          </li>
        ))}
      </ol>
    </nav>
  );
}
