import type { ScheduleSheetView } from '../../../schemas/schedule-sheet';

type Sheet = NonNullable<ScheduleSheetView['sheet']>;

interface Row {
  key: string;
  label: string;
  words: string;
  note: string | null;
  line: number | null;
}

function Words({ label, rows, onGo }: { label: string; rows: Row[]; onGo: (line: number) => void }) {
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
            <td className="line-number">
              {row.line !== null && (
                <button
                  type="button"
                  className="text-button"
                  aria-label={`line ${row.line} of the text`}
                  onClick={() => onGo(row.line!)}
                >
                  {row.line}
                </button>
              )}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

/** What a text says, read aloud; each row leads to its line. */
export function SheetWords({ sheet, onGo }: { sheet: Sheet; onGo: (line: number) => void }) {
  const charges = sheet.charges.map(({ name, label, words, group, clause, line }) => ({
    key: name,
    label,
    words,
    note: [group, clause && `clause ${clause}`].filter(Boolean).join(', '),
    line,
  }));
  const quantities = sheet.quantities.map(({ name, label, words, unit, clause, line }) => ({
    key: name,
    label,
    words: `${words}${unit ? `, ${unit}` : ''}`,
    note: clause && `clause ${clause}`,
    line,
  }));
  const rules = sheet.rules.map((rule, index) => ({ key: String(index), note: null, ...rule }));
  return (
    <>
      <h3 className="section-title">Charges</h3>
      <p className="section-lead">In the order of the bill, in {sheet.currency}.</p>
      <Words label="Charges" rows={charges} onGo={onGo} />
      <h3 className="section-title">Quantities</h3>
      <Words label="Quantities" rows={quantities} onGo={onGo} />
      <h3 className="section-title">Also said</h3>
      <Words label="Rules" rows={rules} onGo={onGo} />
    </>
  );
}
