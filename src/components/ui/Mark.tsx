export type MarkKind = 'hollow' | 'half' | 'filled' | 'circle' | 'diamond' | 'triangle';

export interface MarkProps {
  kind: MarkKind;
  /** Word beside the mark; a mark never stands alone. Leave out only where the word follows in the text. */
  word?: string;
  tone?: 'ink' | 'quiet' | 'caution' | 'fault' | 'lagging' | 'leading';
}

const tones = { ink: '', quiet: 'quiet', caution: 'warn', fault: 'fault', lagging: 'lagging', leading: 'leading' };

/** Square hollow, half, filled = not begun, begun, done; circle = with others; diamond = overdue, fault; triangle = caution. */
export function Mark({ kind, word, tone = 'ink' }: MarkProps) {
  const mark = <i className={`mark mark-${kind} ${word ? '' : tones[tone]}`} aria-hidden="true" />;
  if (!word) return mark;
  return (
    <span className={`marked ${tones[tone]}`}>
      {mark}
      {word}
    </span>
  );
}
