import type { ScheduleProblem } from '../../../core/tariff';
import type { CheckView, EditorView, MonthView } from '../../../schemas/schedule-editor';
import { FindingSlip } from '../../ui/FindingSlip';
import { formatAmount } from '../../ui/format';
import { ResultSums, type SumRow } from '../../ui/ResultSums';

export interface EditorResultProps {
  editor: EditorView;
  view: CheckView | null;
  problems: ScheduleProblem[];
  keptName: string;
}

/** The result column: the month's sums, errors, notes, who else is writing. */
export function EditorResult({ editor, view, problems, keptName }: EditorResultProps) {
  const sums = view?.month ? sumsOf(view.month, keptName) : [];
  return (
    <div className="result">
      {sums.length > 0 && <ResultSums title={view?.month?.name} rows={sums} />}
      {problems.map((problem, index) => (
        <FindingSlip
          key={index}
          letter={String(index + 1)}
          title={`Line ${problem.line}, column ${problem.column}`}
        >{`${problem.message} ${problem.remedy}`}</FindingSlip>
      ))}
      {view?.sheet?.notes.map((note, index) => (
        <FindingSlip key={index} title="Note of the reader" caution>
          {note.where && <b>{note.where}: </b>}
          {note.message}
        </FindingSlip>
      ))}
      {editor.othersWriting.length > 0 && (
        <FindingSlip title="Others are writing on it too">
          {editor.othersWriting.join(', ')}. Whoever keeps second is shown what the first one kept.
        </FindingSlip>
      )}
    </div>
  );
}

function sumsOf({ keptMinor, yoursMinor, billedMinor, currency }: MonthView, keptName: string): SumRow[] {
  const amount = (minor: number) => formatAmount(minor, currency);
  return [
    ...(keptMinor === null ? [] : [{ label: keptName, value: amount(keptMinor) }]),
    ...(billedMinor === null ? [] : [{ label: 'As billed', value: amount(billedMinor) }]),
    {
      label: `Your text, ${currency}`,
      value: yoursMinor === null ? 'waits' : amount(yoursMinor),
      kind: 'total' as const,
      tone: yoursMinor === null ? ('fault' as const) : undefined,
    },
  ];
}
