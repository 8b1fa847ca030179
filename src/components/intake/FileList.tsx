import { useState } from 'react';
import { ApiError } from '../../client/api';
import { intakePage, keepIntake, originalPath, undoIntake } from '../../client/intake';
import type { IntakeRow } from '../../schemas/intake';
import { Button } from '../ui/Button';
import { formatBytes, formatDateTime } from '../ui/format';
import type { LedgerColumn, LedgerRow } from '../ui/ledger';
import { LedgerTable } from '../ui/LedgerTable';
import type { MarkProps } from '../ui/Mark';
import { Notice } from '../ui/Notice';

export interface FileListProps {
  code: string;
  files: IntakeRow[];
  timeZone: string;
  /** What undoing a file takes away, in words: "35,008 readings of Nov 2025 to Oct 2026". */
  goes: Record<number, string>;
}

const states: Record<IntakeRow['state'], MarkProps> = {
  reading: { kind: 'half', word: 'being read' },
  read: { kind: 'half', word: 'to check' },
  refused: { kind: 'diamond', word: 'cannot be read', tone: 'fault' },
  kept: { kind: 'filled', word: 'kept' },
  undone: { kind: 'hollow', word: 'undone', tone: 'quiet' },
  'given-up': { kind: 'hollow', word: 'given up', tone: 'quiet' },
};

const columns: LedgerColumn[] = [
  { key: 'file', head: 'File' },
  { key: 'size', head: 'Size', align: 'right', quiet: true },
  { key: 'state', head: 'State' },
  { key: 'when', head: 'Brought in', quiet: true },
  { key: 'digest', head: 'SHA-256, begins', quiet: true },
];

function rowOf(code: string, file: IntakeRow, timeZone: string): LedgerRow {
  const when = formatDateTime(file.broughtAt, timeZone);
  return {
    id: String(file.id),
    kind: file.state === 'refused' ? 'refused' : file.state === 'read' ? 'asks' : 'plain',
    cells: {
      file: { value: file.fileName, href: intakePage(code, file.id) },
      size: formatBytes(file.bytes),
      state: { value: null, mark: states[file.state] },
      when: file.broughtBy ? `${when}, ${file.broughtBy}` : when,
      digest: file.sha256.slice(0, 12),
    },
  };
}

/** The files of a station with their states; a kept one can be undone, an undone one kept again. */
export function FileList({ code, files, timeZone, goes }: FileListProps) {
  const [asked, setAsked] = useState<IntakeRow | null>(null);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<string | null>(null);
  const carryOut = async (work: Promise<unknown>) => {
    setBusy(true);
    setFault(null);
    try {
      await work;
      window.location.reload();
    } catch (error) {
      setBusy(false);
      setFault(error instanceof ApiError ? error.message : 'This failed on our side. Load the page again.');
    }
  };
  const find = (row: LedgerRow) => files.find((file) => String(file.id) === row.id);
  const actions = (row: LedgerRow) => {
    const file = find(row);
    if (!file) return null;
    return (
      <span className="actions-tight">
        <a className="text-link" href={originalPath(file.id)} download={file.fileName}>
          Original
        </a>
        {file.state === 'kept' && (
          <Button kind="quiet" onClick={() => setAsked(file)}>
            Undo
          </Button>
        )}
        {file.state === 'undone' && (
          <Button kind="quiet" busy={busy} onClick={() => void carryOut(keepIntake(file))}>
            Keep again
          </Button>
        )}
      </span>
    );
  };
  return (
    <div className="stacked">
      <LedgerTable
        label="Files of this station"
        columns={columns}
        rows={files.map((file) => rowOf(code, file, timeZone))}
        renderActions={actions}
        roomy
        stack
      />
      {asked && (
        <Notice title={`Undo ${asked.fileName}?`}>
          <span>
            This takes away {goes[asked.id] ?? 'everything it brought in'}. The file itself stays and can be kept again.
          </span>
          <span className="actions">
            <Button kind="secondary" size="small" busy={busy} onClick={() => void carryOut(undoIntake(asked))}>
              Undo it
            </Button>
            <Button kind="quiet" onClick={() => setAsked(null)}>
              Leave it kept
            </Button>
          </span>
        </Notice>
      )}
      {fault && <Notice kind="fault" title={fault} />}
    </div>
  );
}
