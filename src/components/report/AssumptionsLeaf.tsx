import type { EditionContent } from '../../schemas/edition';
import { Caution } from '../ui/Caution';
import { formatCount, formatNumber, formatQuantity } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
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

/** What was assumed, and the cautions in full. */
export function AssumptionsLeaf({ content, taps, foot, page }: LeafContext & { page: number }) {
  const { assumed } = content;
  const finding =
    assumed.length === 0
      ? 'Nothing was assumed: every machine value comes from a nameplate or a data sheet.'
      : `${formatCount(assumed.length, 'machine value')} ${assumed.length === 1 ? 'is' : 'are'} assumed, not read from a plate; each is named here with what it moves.`;
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
