import type { DifferenceLine, DifferenceView } from '../../schemas/schedule-editor';

const signs = { same: '', added: '+', removed: '−', gap: '' };
const words = { same: '', added: 'put in: ', removed: 'taken out: ', gap: '' };

function Line({ line }: { line: DifferenceLine }) {
  if (line.kind === 'gap') {
    return (
      <div className="gap" aria-hidden="true">
        ...
      </div>
    );
  }
  return (
    <div className={`line ${line.kind}`}>
      <span className="number">{line.before}</span>
      <span className="number">{line.after}</span>
      <span className="sign" aria-hidden="true">
        {signs[line.kind]}
      </span>
      <code>
        <span className="unseen">{words[line.kind]}</span>
        {line.pieces.map((piece, index) =>
          piece.changed ? <mark key={index}>{piece.text}</mark> : <span key={index}>{piece.text}</span>,
        )}
      </code>
    </div>
  );
}

/** What changed between two kept texts, line by line. */
export function Difference({ difference }: { difference: DifferenceView }) {
  const { before, after, lines } = difference;
  return (
    <div
      className="schedule-text difference"
      role="region"
      aria-label={`Differences of revisions ${before} and ${after}`}
      tabIndex={0}
    >
      {lines.map((line, index) => (
        <Line key={index} line={line} />
      ))}
    </div>
  );
}
