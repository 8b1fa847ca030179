import type { EditionContent } from '../../schemas/edition';
import { Caution } from '../ui/Caution';
import { formatCount, formatDate, formatNumber, formatPercent, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import { ResultSums } from '../ui/ResultSums';
import type { LeafContext } from './AnswerLeaf';
import { Leaf, LeafRow } from './Leaf';

function assumedTable({ assumed }: EditionContent): LedgerData {
  return {
    columns: [
      { key: 'value', head: 'Assumed value' },
      { key: 'motor', head: 'Motor' },
      { key: 'figure', head: 'Taken as', align: 'right' },
      { key: 'range', head: 'Typical range', align: 'right', quiet: true },
      { key: 'effect', head: 'Moves kvar by', align: 'right' },
    ],
    rows: assumed.map((one) => ({
      id: `${one.motorId}-${one.field}`,
      cells: {
        value: one.label,
        motor: one.motorName,
        figure: { value: formatQuantity(one.value, one.unit, { upTo: 3 }).trim(), assumed: true },
        range: one.range ? one.range.map((end) => formatNumber(end, { upTo: 3 })).join(' to ') : 'not given',
        effect: one.kvarEffect
          ? one.kvarEffect.map((end) => formatNumber(end, { signed: true })).join(', ')
          : 'not known',
      },
    })),
  };
}

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

/** Page 5: what was assumed, how it was worked out, from which files. */
export function AssumptionsLeaf({ content, taps, foot }: LeafContext) {
  const { assumed, readings, notes } = content;
  const finding =
    assumed.length === 0
      ? 'Nothing was assumed: every machine value comes from a nameplate or a data sheet.'
      : `${formatCount(assumed.length, 'machine value')} ${assumed.length === 1 ? 'is' : 'are'} assumed, not read from a plate; each is named here with what it moves.`;
  return (
    <Leaf page={5} taps={taps} foot={foot} finding={finding}>
      <LeafRow
        first
        number="5.1"
        title="Assumed data"
        reference={<p>Typical values of the trade for size and speed</p>}
      >
        {assumed.length > 0 ? <LedgerTable label="Assumed data" {...assumedTable(content)} /> : <p>None.</p>}
      </LeafRow>
      <LeafRow reference={<p>Standing wherever a setting is shown</p>}>
        <Caution title="Cautions" />
      </LeafRow>
      <LeafRow
        number="5.2"
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
                value: formatPercent(1 - readings.missing / Math.max(1, readings.intervals), 2),
                kind: 'total',
              },
            ]}
          />
        }
      >
        <ol className="numbered">
          {method.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ol>
        {notes.slice(0, 4).map((note) => (
          <p key={note} className="hint mt-2">
            {note}
          </p>
        ))}
      </LeafRow>
      <LeafRow number="5.3" title="Sources" reference={<p>Originals kept byte for byte</p>}>
        <LedgerTable label="Sources" {...sourcesTable(content)} />
      </LeafRow>
    </Leaf>
  );
}
