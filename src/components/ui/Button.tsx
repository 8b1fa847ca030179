import { useId, type AnchorHTMLAttributes, type ButtonHTMLAttributes, type ReactNode } from 'react';

interface ButtonLook {
  /** One primary button a screen. `quiet` is an underlined word. */
  kind?: 'primary' | 'secondary' | 'quiet';
  size?: 'small' | 'normal' | 'large';
  full?: boolean;
  children?: ReactNode;
}

export type ButtonProps = ButtonLook &
  Omit<ButtonHTMLAttributes<HTMLButtonElement>, 'disabled'> & {
    /** Why it cannot be pressed yet: the button stays focusable, dashed, with these words beside it. */
    waiting?: string | false | null;
    /** While the request runs. */
    busy?: boolean;
  };

export type ButtonLinkProps = ButtonLook & AnchorHTMLAttributes<HTMLAnchorElement>;

function look({ kind = 'primary', size = 'normal', full = false }: ButtonLook, waiting = false): string {
  if (kind === 'quiet') return 'text-button';
  return [
    'button',
    kind === 'secondary' && 'button-secondary',
    size !== 'normal' && `button-${size}`,
    full && 'button-full',
    waiting && 'button-waiting',
  ]
    .filter(Boolean)
    .join(' ');
}

/** A button that does something. One that leads somewhere is a `ButtonLink`. */
export function Button({ kind, size, full, waiting, busy, children, onClick, type = 'button', ...rest }: ButtonProps) {
  const reasonId = useId();
  const held = Boolean(waiting) || busy === true;
  return (
    <>
      <button
        {...rest}
        type={held && type === 'submit' ? 'button' : type}
        className={look({ kind, size, full }, held)}
        aria-disabled={held || undefined}
        aria-busy={busy || undefined}
        aria-describedby={waiting ? reasonId : rest['aria-describedby']}
        onClick={held ? undefined : onClick}
      >
        {children}
      </button>
      {waiting && (
        <span className="button-reason" id={reasonId}>
          {waiting}
        </span>
      )}
    </>
  );
}

/** A link in the form of a button. */
export function ButtonLink({ kind, size, full, children, ...rest }: ButtonLinkProps) {
  return (
    <a {...rest} className={kind === 'quiet' ? 'text-link' : look({ kind, size, full })}>
      {children}
    </a>
  );
}
