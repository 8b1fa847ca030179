import type { EditionContent } from '../../schemas/edition';
import { capital, formatDate, formatNumber, formatPercent, formatSpelled } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';
import type { LeafContext } from './AnswerLeaf';
import { Leaf, LeafRow } from './Leaf';

function sourcesTable({ sources }: EditionContent): LedgerData {
  return {
    columns: [
      { key: 'file', head: 'File' },
      { key: 'holds', head: 'Holds' },
      { key: 'kept', head: 'Kept' },
      { key: 'sum', head: 'SHA-256, first half', quiet: true },
    ],
    rows: sources.map((source) => ({
      id: source.sha256,
      cells: {
        file: source.fileName,
        holds: source.kind === 'bills' ? 'bills' : 'meter readings',
        kept: formatDate(source.keptAt),
        sum: source.sha256.slice(0, 32),
      },
    })),
  };
}

const method = [
  'Each bill is worked out from the meter’s readings, line by line, by the rules of the schedule; the difference between the standing plant and the plan is the saving.',
  'Motors by the two-axis equations with armature resistance kept; field current linear through the rated point unless an open-circuit curve was given.',
  'Losses of stator, field and exciter are worked out for every interval and stand in the energy that is priced.',
  'Lagging and leading registers are kept apart in every interval; nothing is netted.',
];

/** How it was worked out, and from which files. */
export function MethodLeaf({ content, taps, foot, page }: LeafContext & { page: number }) {
  const { readings, notes, bills } = content;
  const present = readings.intervals - readings.missing;
  return (
    <Leaf
      page={page}
      taps={taps}
      foot={foot}
      finding={`${capital(formatSpelled(bills.length))} bills and ${formatNumber(present)} readings stand behind every figure; the files are named below.`}
    >
      <LeafRow
        first
        number={`${page}.1`}
        title="Method"
        result={
          <ResultSums
            title="Readings"
            rows={[
              { label: `Of ${readings.stepMinutes} minutes`, value: formatNumber(readings.intervals) },
              { label: 'Missing', value: formatNumber(readings.missing) },
              { label: 'Estimated', value: formatNumber(readings.estimated) },
              {
                label: 'Present',
                value: formatPercent(present / Math.max(1, readings.intervals), 2),
                kind: 'total',
              },
            ]}
          />
        }
      >
        <ul className="stacked">
          {method.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ul>
      </LeafRow>
      <LeafRow number={`${page}.2`} title="Sources" reference={<p>Originals kept byte for byte</p>}>
        <LedgerTable label="Sources" {...sourcesTable(content)} />
      </LeafRow>
      {notes.length > 0 && (
        <LeafRow number={`${page}.3`} title="Notes of the pricing">
          <ul className="stacked">
            {notes.map((note) => (
              <li key={note}>{note}</li>
            ))}
          </ul>
        </LeafRow>
      )}
    </Leaf>
  );
}
