import { useEffect, useState, type ReactNode } from 'react';
import { useFormContext } from 'react-hook-form';

/** Whether a form's errors hold anything at a dotted path. */
function faultyAt(errors: object, path: string): boolean {
  let place: unknown = errors;
  for (const name of path.split('.')) place = (place as Record<string, unknown> | undefined)?.[name];
  return place !== undefined;
}

/** A part of a form that opens on demand, and by itself where something in it is refused. */
export function Folded({ title, paths, children }: { title: string; paths: string[]; children: ReactNode }) {
  const { formState } = useFormContext();
  const isFaulty = paths.some((path) => faultyAt(formState.errors, path));
  const [open, setOpen] = useState(false);
  useEffect(() => {
    if (isFaulty) setOpen(true);
  }, [isFaulty, formState.submitCount]);
  return (
    <details className="folded" open={open} onToggle={(event) => setOpen(event.currentTarget.open)}>
      <summary>{title}</summary>
      {children}
    </details>
  );
}
