import type { ExampleView } from '../../../schemas/schedule-editor';
import { formatNumber } from '../../ui/format';
import type { LedgerRow } from '../../ui/ledger';
import { LedgerTable } from '../../ui/LedgerTable';

const figure = (value: number) => formatNumber(value, { upTo: 4 });

function rowOf(example: ExampleView, index: number): LedgerRow {
  const wrong = example.figures.filter((one) => !one.fits);
  const [first] = wrong;
  const asked = example.figures.find(({ name }) => name === 'total') ?? example.figures[0];
  const words = example.problem
    ? { value: 'not priced', tone: 'fault' as const, note: example.problem }
    : first
      ? {
          value: first.found === null ? 'no such figure' : figure(first.found),
          tone: 'fault' as const,
          note: `${first.name}: ${figure(first.expected)} asked${wrong.length > 1 ? `; ${wrong.length - 1} more` : ''}`,
        }
      : { value: 'comes out', tone: 'quiet' as const };
  return {
    id: String(index),
    kind: example.fits ? 'plain' : 'refused',
    cells: {
      title: { value: example.title, note: example.source ?? undefined },
      asked: asked ? { value: figure(asked.expected), note: asked.name } : '',
      found: words,
      line: example.line === null ? '' : { value: String(example.line) },
    },
  };
}

/** The worked bills a text carries: priced anew at every change; one cent off refuses the text. */
export function ExamplesPanel({ examples, onGo }: { examples: ExampleView[]; onGo: (line: number) => void }) {
  if (examples.length === 0) {
    return (
      <p className="section-lead">
        None yet. A bill worked by hand or printed by the utility, under <code>examples:</code>, guards every digit of
        the text from then on.
      </p>
    );
  }
  return (
    <LedgerTable
      label="Worked bills of the text"
      columns={[
        { key: 'title', head: 'Bill', wrap: true },
        { key: 'asked', head: 'Asked', align: 'right' },
        { key: 'found', head: 'Your text', align: 'right', wrap: true },
      ]}
      rows={examples.map(rowOf)}
      renderActions={(row) => {
        const line = examples[Number(row.id)]?.line;
        return line == null ? null : (
          <button type="button" className="text-button" onClick={() => onGo(line)}>
            line {line}
          </button>
        );
      }}
    />
  );
}
