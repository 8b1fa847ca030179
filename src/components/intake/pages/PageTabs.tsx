import type { ReactNode } from 'react';
import type { AttachmentView } from '../../../schemas/attachment';
import { Button } from '../../ui/Button';
import { formatCount } from '../../ui/format';

/** Names of the files, where there are several: which one is shown. */
export function PageTabs(props: { files: AttachmentView[]; shownId: number | null; onShow(id: number): void }) {
  const { files, shownId, onShow } = props;
  if (files.length < 2) return null;
  return (
    <div className="page-tabs" role="group" aria-label="Files">
      {files.map(({ id, fileName }) => (
        <Button key={id} kind="quiet" aria-pressed={id === shownId} onClick={() => onShow(id)}>
          {fileName}
        </Button>
      ))}
    </div>
  );
}

/** What is done with the files themselves: open while the bill has none, then folded away. */
export function PagesDrawer(props: { own: number; waiting: number; children: ReactNode }) {
  const { own, waiting, children } = props;
  const here = own === 0 ? 'This bill has no pages yet' : `${formatCount(own, 'file')} of this bill`;
  const more = waiting > 0 ? `; ${formatCount(waiting, 'other waits', 'others wait')} for a bill` : '';
  return (
    <details className="page-drawer" open={own === 0}>
      <summary>{`${here}${more}: attach, move, remove`}</summary>
      {children}
    </details>
  );
}
