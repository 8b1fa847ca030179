import { useState } from 'react';
import type { IntakePreview, IntakeView } from '../../schemas/intake';
import { Button } from '../ui/Button';
import { Field } from '../ui/Field';
import { formatCount } from '../ui/format';
import type { IntakeActions } from './IntakeSheet';

export interface RememberMapProps {
  intake: IntakeView;
  preview: IntakePreview;
  actions: IntakeActions;
}

/** Names the map and stores it, to be offered for the next file of this shape. */
export function RememberMap({ intake, preview, actions }: RememberMapProps) {
  const [open, setOpen] = useState(false);
  const [name, setName] = useState(
    () =>
      intake.readWith?.name ??
      `${intake.engagement.meter} ${preview.kind}, ${formatCount(preview.columns.length, 'column')}`,
  );
  const [fault, setFault] = useState<string | null>(null);
  if (preview.problems.length > 0) return null;
  if (!open) {
    return (
      <p>
        <Button kind="quiet" onClick={() => setOpen(true)}>
          {intake.readWith ? 'Remember this map again' : 'Remember this map'}
        </Button>
      </p>
    );
  }
  const remember = async () => {
    const refused = await actions.remember(name);
    setFault(refused);
    if (!refused) setOpen(false);
  };
  return (
    <form
      className="mt-3 grid gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        void remember();
      }}
    >
      <Field
        label="Name of the map"
        size="small"
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={fault}
        hint="The next file of this shape is offered it."
      />
      <div className="actions">
        <Button kind="secondary" size="small" type="submit" busy={actions.busy}>
          Remember it
        </Button>
        <Button kind="quiet" onClick={() => setOpen(false)}>
          Not now
        </Button>
      </div>
    </form>
  );
}
