import { useEffect, useLayoutEffect, useRef, useState, type ReactNode, type RefObject } from 'react';
import { Mark } from './Mark';
import type { WhyContent, WhyStep } from './why';

const stepClass = (kind: WhyStep['kind']) =>
  ({ plain: '', picked: 'picked-step', equals: 'equals', fault: 'equals fault' })[kind ?? 'plain'];

export interface WhyPanelProps {
  content: WhyContent;
  /** The pressed figure: the copper line runs from it, Escape gives focus back to it. */
  origin?: RefObject<HTMLElement | null>;
  /** What set the figure, drawn: look-back, peak interval. */
  picture?: ReactNode;
  onClose: () => void;
  id?: string;
}

/** Distance from the panel's right edge to the middle of the figure, kept when the window changes. */
function useFeed(panel: RefObject<HTMLElement | null>, origin?: RefObject<HTMLElement | null>): number | null {
  const [feedPx, setFeedPx] = useState<number | null>(null);
  useLayoutEffect(() => {
    const measure = () => {
      if (!panel.current || !origin?.current) return;
      const box = panel.current.getBoundingClientRect();
      const figure = origin.current.getBoundingClientRect();
      setFeedPx(Math.max(0, Math.round(box.right - (figure.left + figure.right) / 2)));
    };
    measure();
    window.addEventListener('resize', measure);
    return () => window.removeEventListener('resize', measure);
  }, [panel, origin]);
  return feedPx;
}

function Steps({ steps }: { steps: WhyStep[] }) {
  return (
    <table className="formula">
      <tbody>
        {steps.map((step, index) => (
          <tr key={index} className={stepClass(step.kind)}>
            <th scope="row">
              {step.label}
              {step.source && <span className="source">{step.source}</span>}
            </th>
            <td>{step.working}</td>
            <td>{step.result}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function Causes({ causes }: { causes: NonNullable<WhyContent['causes']> }) {
  return (
    <div>
      <h3>Causes tried</h3>
      <ul className="causes">
        {causes.map((cause) => (
          <li key={cause.label}>
            <Mark kind={cause.fits ? 'filled' : 'hollow'} />
            <span>{cause.label}</span>
            {cause.fits ? <b>{cause.off}</b> : <span className="quiet">{cause.off}</span>}
          </li>
        ))}
      </ul>
    </div>
  );
}

/** The reasoning behind one figure, opened under its row. Escape closes it and returns focus to the figure. */
export function WhyPanel({ content, origin, picture, onClose, id }: WhyPanelProps) {
  const panel = useRef<HTMLDivElement>(null);
  const feedPx = useFeed(panel, origin);
  useEffect(() => {
    const listen = (event: KeyboardEvent) => {
      if (event.key !== 'Escape') return;
      onClose();
      origin?.current?.focus();
    };
    document.addEventListener('keydown', listen);
    return () => document.removeEventListener('keydown', listen);
  }, [onClose, origin]);
  const style = feedPx === null ? undefined : ({ '--feed': `${feedPx}px` } as React.CSSProperties);
  return (
    <div className="why-panel" ref={panel} id={id} role="region" aria-label={content.title} style={style}>
      <div>
        <h3>{content.title}</h3>
        <Steps steps={content.steps} />
        {(content.clause || content.causes) && (
          <div className="why-proof">
            {content.clause && (
              <blockquote>
                “{content.clause.text}”<cite>{content.clause.cite}</cite>
              </blockquote>
            )}
            {content.causes && <Causes causes={content.causes} />}
          </div>
        )}
        {content.source && (
          <p className="hint mt-3">
            Source: {content.source}{' '}
            {content.sourceHref && (
              <a className="text-link" href={content.sourceHref}>
                Open the rows
              </a>
            )}
          </p>
        )}
      </div>
      {picture && <div className="why-picture">{picture}</div>}
    </div>
  );
}
