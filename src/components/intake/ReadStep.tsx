import { originalPath } from '../../client/intake';
import type { IntakePreview, IntakeView } from '../../schemas/intake';
import { formatNumber } from '../ui/format';
import { ResultSums, type SumRow } from '../ui/ResultSums';
import { dialectWords } from './decisions';
import { intervalName } from './interval-words';
import { SheetPart } from './Sheet';

const mostColumns = 12;
const looksNumeric = /^[-+\u2212]?[\d.,'\s]*\d%?$/;

/** Spreadsheet letters of a column: 0 is A, 26 is AA. */
function letters(index: number): string {
  const rest = Math.floor(index / 26);
  return (rest > 0 ? letters(rest - 1) : '') + String.fromCharCode(65 + (index % 26));
}

/** The first rows as they stand in the file. */
export function ReadStep({ intake, preview, folded }: { intake: IntakeView; preview: IntakePreview; folded: boolean }) {
  const { headerRow, firstRow, lastRow } = preview;
  const head = headerRow === null ? 'No row of names' : `Names in row ${formatNumber(headerRow)}`;
  const what = preview.kind === 'bills' ? 'bills' : 'readings';
  const byFormat = preview.format === 'espi' || preview.format === 'nem12';
  const rows = `${head}, ${what} from row ${formatNumber(firstRow)} to row ${formatNumber(lastRow)}.`;
  const lead = byFormat ? 'The first rows as they stand; the format itself says what each means.' : rows;
  return (
    <SheetPart
      id="read"
      number="1"
      title="Read"
      lead={lead}
      foldedTo={folded ? lead : undefined}
      reference={
        <>
          {dialectWords(preview).map((line) => (
            <p key={line}>{line}</p>
          ))}
          <p>
            <a className="text-link" href={originalPath(intake.id)} download={intake.fileName}>
              Download the original
            </a>
          </p>
          <p title={intake.sha256}>SHA-256 begins {intake.sha256.slice(0, 12)}</p>
        </>
      }
      result={<ResultSums rows={countRows(preview)} />}
    >
      <FirstRows preview={preview} />
    </SheetPart>
  );
}

function countRows(preview: IntakePreview): SumRow[] {
  const { report, rowsInFile } = preview;
  const rows: SumRow[] = [{ label: 'Rows in the file', value: formatNumber(rowsInFile) }];
  if (!report) return rows;
  rows.push({
    label: 'Heading and left out',
    value: `\u2212 ${formatNumber(Math.max(0, rowsInFile - report.rowsRead))}`,
  });
  rows.push({ label: 'Rows used', value: formatNumber(report.rowsRead), kind: 'total' });
  if (preview.kind === 'intervals') {
    rows.push({
      label: `${intervalName(report.stepMinutes ?? 15)} in the span`,
      value: formatNumber(report.intervals),
    });
    rows.push({ label: 'Missing', value: formatNumber(report.missing) });
  }
  return rows;
}

function FirstRows({ preview }: { preview: IntakePreview }) {
  const width = Math.max(1, ...preview.rows.map((row) => row.cells.length));
  const shown = Math.min(width, mostColumns);
  const columns = Array.from({ length: shown }, (_, index) => index);
  return (
    <div className="first-rows" role="region" aria-label="First rows of the file" tabIndex={0}>
      <table>
        <thead>
          <tr>
            <td />
            {columns.map((index) => (
              <th key={index} scope="col">
                {letters(index)}
              </th>
            ))}
            {width > shown && <th scope="col">and {formatNumber(width - shown)} more</th>}
          </tr>
        </thead>
        <tbody>
          {preview.rows.map((row) => (
            <tr key={row.number} className={rowClass(row.isHeader, row.number, preview.firstRow)}>
              <th scope="row">{row.number}</th>
              {isAlone(row.cells) ? (
                <td colSpan={shown}>{row.cells[0]}</td>
              ) : (
                columns.map((index) => <Cell key={index} text={row.cells[index] ?? ''} isName={row.isHeader} />)
              )}
              {width > shown && <td className="quiet">…</td>}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** A line of a preamble: words in the first cell only. */
const isAlone = ([first, ...others]: string[]) => first !== undefined && others.every((cell) => cell === '');

function Cell({ text, isName }: { text: string; isName: boolean }) {
  return <td className={!isName && looksNumeric.test(text) ? 'figure' : undefined}>{text}</td>;
}

const rowClass = (isHeader: boolean, number: number, firstRow: number) =>
  isHeader ? 'names' : number < firstRow ? 'preamble' : undefined;
