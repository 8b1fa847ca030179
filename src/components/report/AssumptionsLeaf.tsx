import type { EditionContent } from '../../schemas/edition';
import { Caution } from '../ui/Caution';
import { capital, formatNumber, formatQuantity, formatSpelled } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import type { LeafContext } from './AnswerLeaf';
import { Leaf, LeafRow } from './Leaf';

/** How far the kvar in hand move at the two ends of the range: "34 less, 29 more". */
function effectWords(ends: readonly number[]): string {
  const moved = ends.map((end) => Math.round(end)).filter((end) => end !== 0);
  const words = moved.map((end) => `${formatNumber(Math.abs(end))} ${end < 0 ? 'less' : 'more'}`);
  return [...new Set(words)].join(', ') || 'nothing';
}

function assumedTable({ assumed }: EditionContent): LedgerData {
  return {
    columns: [
      { key: 'value', head: 'Assumed value' },
      { key: 'motor', head: 'Motor' },
      { key: 'figure', head: 'Taken as', align: 'right' },
      { key: 'range', head: 'Typical range', align: 'right', quiet: true },
      { key: 'effect', head: 'Moves the most by', unit: 'kvar', align: 'right' },
    ],
    rows: assumed.map((one) => ({
      id: `${one.motorId}-${one.field}`,
      cells: {
        value: one.label,
        motor: one.motorName,
        figure: { value: formatQuantity(one.value, one.unit, { upTo: 3 }).trim(), assumed: true },
        range: one.range ? one.range.map((end) => formatNumber(end, { upTo: 3 })).join(' to ') : 'not given',
        effect: one.kvarEffect ? effectWords(one.kvarEffect) : 'not known',
      },
    })),
  };
}

/** What was assumed, and the cautions in full. */
export function AssumptionsLeaf({ content, taps, foot, page }: LeafContext & { page: number }) {
  const { assumed } = content;
  const finding =
    assumed.length === 0
      ? 'Nothing was assumed: every machine value comes from a nameplate or a data sheet.'
      : `${capital(formatSpelled(assumed.length))} machine ${assumed.length === 1 ? 'value is' : 'values are'} assumed, not read from a plate; each is named here with what it moves.`;
  return (
    <Leaf page={page} taps={taps} foot={foot} finding={finding}>
      <LeafRow
        first
        number={`${page}.1`}
        title="Assumed data"
        reference={<p>Typical values of the trade for size and speed</p>}
      >
        {assumed.length > 0 ? <LedgerTable label="Assumed data" {...assumedTable(content)} /> : <p>None.</p>}
      </LeafRow>
      <LeafRow reference={<p>Standing wherever a setting is shown</p>}>
        <Caution title="Cautions" />
      </LeafRow>
    </Leaf>
  );
}
