import type { ScheduleSheetView } from '../../schemas/schedule-sheet';
import { formatNumber } from '../ui/format';

type Sheet = NonNullable<ScheduleSheetView['sheet']>;
/** Goes to a line of the text; left out: a link to it. */
type GoTo = (line: number) => void;

interface Row {
  key: string;
  label: string;
  words: string;
  note?: string | null;
  line: number | null;
}

const number = (value: number) => formatNumber(value, { upTo: 4 });

function chargeRows({ charges }: Sheet): Row[] {
  return charges.map(({ name, label, words, group, clause, line }) => ({
    key: name,
    label,
    words,
    note: [group, clause && `clause ${clause}`].filter(Boolean).join(', '),
    line,
  }));
}

function quantityRows({ quantities }: Sheet): Row[] {
  return quantities.map(({ name, label, words, unit, clause, line }) => ({
    key: name,
    label,
    words: `${words}${unit ? `, ${unit}` : ''}`,
    note: clause && `clause ${clause}`,
    line,
  }));
}

function contractRows({ contract }: Sheet): Row[] {
  return contract.map(({ name, label, unit, range, default: usual, clause }) => ({
    key: name,
    label,
    words: [
      unit,
      range && `${number(range[0])} to ${number(range[1])}`,
      usual !== null && `${number(usual)} unless told`,
    ]
      .filter(Boolean)
      .join(', '),
    note: clause && `clause ${clause}`,
    line: null,
  }));
}

function LineLink({ line, onGo }: { line: number; onGo?: GoTo }) {
  const name = `line ${line} of the text`;
  if (!onGo) {
    return (
      <a className="text-link" href={`#line-${line}`} aria-label={name}>
        {line}
      </a>
    );
  }
  return (
    <button type="button" className="text-button" aria-label={name} onClick={() => onGo(line)}>
      {line}
    </button>
  );
}

function Words({ label, rows, onGo }: { label: string; rows: Row[]; onGo?: GoTo }) {
  return (
    <table className="words-table" aria-label={label}>
      <tbody>
        {rows.map((row) => (
          <tr key={row.key}>
            <th scope="row">{row.label}</th>
            <td>
              {row.words}
              {row.note && <span className="quiet"> ({row.note})</span>}
            </td>
            <td className="line-number">{row.line !== null && <LineLink line={row.line} onGo={onGo} />}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** What a text says, read aloud; each row leads to its line. */
export function ScheduleWords({ sheet, onGo }: { sheet: Sheet; onGo?: GoTo }) {
  const rules = sheet.rules.map((rule, index) => ({ key: String(index), ...rule }));
  return (
    <>
      <h3 className="section-title">Charges</h3>
      <p className="section-lead">In the order of the bill, in {sheet.currency}.</p>
      <Words label="Charges" rows={chargeRows(sheet)} onGo={onGo} />
      <h3 className="section-title">Quantities</h3>
      <p className="section-lead">Each is measured, or worked out from those above it.</p>
      <Words label="Quantities" rows={quantityRows(sheet)} onGo={onGo} />
      {sheet.contract.length > 0 && (
        <>
          <h3 className="section-title">What the contract supplies</h3>
          <Words label="Contract inputs" rows={contractRows(sheet)} onGo={onGo} />
        </>
      )}
      <h3 className="section-title">Also said</h3>
      <Words label="Rules" rows={rules} onGo={onGo} />
    </>
  );
}
