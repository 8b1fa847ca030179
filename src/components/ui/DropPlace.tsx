import { useState, type ReactNode, type RefObject } from 'react';

export interface DropPlaceProps {
  onFiles: (files: File[]) => void;
  /** Whether what is dragged over it is taken; all is unless said. */
  takes?: (dragged: DataTransfer) => boolean;
  className?: string;
  children: ReactNode;
}

/** A framed place that files can be dropped on. */
export function DropPlace({ onFiles, takes, className = '', children }: DropPlaceProps) {
  const [over, setOver] = useState(false);
  return (
    <div
      className={`drop-place ${over ? 'drop-place-over' : ''} ${className}`}
      onDragOver={(event) => {
        if (takes && !takes(event.dataTransfer)) return;
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={(event) => {
        event.preventDefault();
        setOver(false);
        onFiles([...event.dataTransfer.files]);
      }}
    >
      {children}
    </div>
  );
}

export interface FilePickerProps {
  picker: RefObject<HTMLInputElement | null>;
  accept: string;
  multiple?: boolean;
  /** Opens the camera where there is one. */
  capture?: 'environment';
  onFiles: (files: File[]) => void;
}

/** The browser's own chooser of files, opened by a button through `picker`. */
export function FilePicker({ picker, onFiles, ...given }: FilePickerProps) {
  return (
    <input
      ref={picker}
      type="file"
      className="unseen"
      tabIndex={-1}
      aria-hidden="true"
      {...given}
      onChange={(event) => {
        onFiles([...(event.target.files ?? [])]);
        event.target.value = '';
      }}
    />
  );
}
