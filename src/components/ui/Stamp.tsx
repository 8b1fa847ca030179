export interface StampProps {
  /** "Released", "Not released", "Paid". */
  title: string;
  /** Name, licence, date; or what is missing. */
  detail: string;
  /** Drawn in madder. */
  refused?: boolean;
}

/** Double-ruled box. Never tilted, never faded. */
export function Stamp({ title, detail, refused = false }: StampProps) {
  return (
    <span className={refused ? 'stamp stamp-refused' : 'stamp'}>
      <b>{title}</b>
      {detail}
    </span>
  );
}
