import type { ReactNode } from 'react';

export interface LeafTap {
  label: string;
  href: string;
}

export interface LeafProps {
  page: number;
  taps: LeafTap[];
  finding: string;
  context?: string;
  foot: string[];
  children: ReactNode;
}

/** One A4 page of a report; its markup is that of the interface's leaf, as React, so that an edition can freeze it. */
export function Leaf({ page, taps, finding, context, foot, children }: LeafProps) {
  const Heading = page === 1 ? 'h1' : 'h2';
  return (
    <article className="leaf" id={`page-${page}`} aria-label={`Page ${page} of ${taps.length}`}>
      <div className="leaf-edge" aria-hidden="true" />
      <ol className="leaf-taps">
        {taps.map((tap, index) => (
          <li key={tap.href} className={index + 1 === page ? 'here' : undefined}>
            <a href={tap.href} aria-current={index + 1 === page ? 'page' : undefined}>
              {index + 1} {tap.label}
            </a>
          </li>
        ))}
      </ol>
      {context && <p className="hint mt-2">{context}</p>}
      <Heading className={page === 1 ? 'leaf-finding' : 'leaf-finding leaf-finding-small'}>{finding}</Heading>
      {children}
      <footer className="leaf-foot">
        {foot.map((line) => (
          <span key={line}>{line}</span>
        ))}
        <span>
          page {page} of {taps.length}
        </span>
      </footer>
    </article>
  );
}

export interface LeafRowProps {
  number?: string;
  title?: string;
  lead?: string;
  reference?: ReactNode;
  result?: ReactNode;
  first?: boolean;
  children: ReactNode;
}

/** A row of a leaf: reference, working, result. Without a result the working part takes its width. */
export function LeafRow({ number, title, lead, reference, result, first = false, children }: LeafRowProps) {
  const classes = ['leaf-row', !result && 'leaf-row-wide', first && 'leaf-row-first'].filter(Boolean).join(' ');
  return (
    <section className={classes}>
      <div className="reference">{reference}</div>
      <div className="working">
        {title && (
          <h3 className="section-title">
            {number && <span className="number">{number}</span>}
            {title}
          </h3>
        )}
        {lead && <p className="section-lead">{lead}</p>}
        {children}
      </div>
      {result && <div className="result">{result}</div>}
    </section>
  );
}
