import type { IntakeReport } from '../../core/intake';
import { LedgerTable } from '../ui/LedgerTable';

/** Every assumption and repair of the reader, in words. */
export function Notes({ report }: { report: IntakeReport }) {
  if (report.notes.length === 0) return null;
  return (
    <LedgerTable
      label="What was assumed or repaired in reading"
      columns={[
        { key: 'message', head: 'Assumed or repaired in reading', wrap: true },
        { key: 'where', head: 'Where', quiet: true, wrap: true },
      ]}
      rows={report.notes.map((note, index) => ({
        id: String(index),
        cells: { message: note.message, where: note.where ?? '' },
      }))}
    />
  );
}
