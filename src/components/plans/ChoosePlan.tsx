import { useMutation } from '@tanstack/react-query';
import { choosePlan } from '../../client/plans';
import { Queries } from '../../client/queries';
import { Button } from '../ui/Button';
import { Notice } from '../ui/Notice';

export interface ChoosePlanProps {
  plan: { id: number; version: number; name: string; chosen: boolean };
}

function Choose({ plan }: ChoosePlanProps) {
  const choose = useMutation({
    mutationFn: () => choosePlan(plan.id, plan.version, !plan.chosen),
    onSuccess: () => location.reload(),
  });
  return (
    <>
      <Button kind={plan.chosen ? 'secondary' : 'primary'} busy={choose.isPending} onClick={() => choose.mutate()}>
        {plan.chosen ? `Take back the choice of ${plan.name}` : `Choose ${plan.name}`}
      </Button>
      {choose.error && <Notice kind="fault" title={choose.error.message} />}
    </>
  );
}

/** Chooses a plan for the report, or takes the choice back. */
export function ChoosePlan(props: ChoosePlanProps) {
  return (
    <Queries>
      <Choose {...props} />
    </Queries>
  );
}
