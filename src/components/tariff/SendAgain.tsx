import { useMutation } from '@tanstack/react-query';
import { sendLetterAgain } from '../../client/findings';
import { Queries } from '../../client/queries';
import { Button } from '../ui/Button';
import { Notice } from '../ui/Notice';

export interface SendAgainProps {
  code: string;
  letter: { number: number; version: number; error: string | null };
}

function Again({ code, letter }: SendAgainProps) {
  const again = useMutation({
    mutationFn: () => sendLetterAgain(code, letter.number, letter.version),
    onSuccess: () => location.reload(),
  });
  return (
    <Notice kind="fault" title={`Letter ${letter.number} is not known to have gone.`}>
      <span>
        {again.error?.message ??
          letter.error ??
          'The server stopped while it was being sent. Look whether the utility has it before you send it again.'}
      </span>
      <Button kind="secondary" size="small" busy={again.isPending} onClick={() => again.mutate()}>
        Send letter {letter.number} again
      </Button>
    </Notice>
  );
}

/** Island: a letter that did not go, or of which it is not known, and the way to send it again. */
export function SendAgain(props: SendAgainProps) {
  return (
    <Queries>
      <Again {...props} />
    </Queries>
  );
}
