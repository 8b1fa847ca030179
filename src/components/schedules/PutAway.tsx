import { putAway } from '../../client/schedules';
import { Queries } from '../../client/queries';
import { ActFault, useAct } from '../people/act';
import { Button } from '../ui/Button';

export interface PutAwayProps {
  id: string;
  isAway: boolean;
  version: number;
}

/** Island: takes a schedule out of the lists, or brings it back; nothing that stands on it changes. */
export function PutAway(props: PutAwayProps) {
  return (
    <Queries>
      <Act {...props} />
    </Queries>
  );
}

function Act({ id, isAway, version }: PutAwayProps) {
  const act = useAct<boolean>(version, (seen, away) => putAway(id, { putAway: away, version: seen }));
  return (
    <article className="slip">
      <h3>{isAway ? 'Put away' : 'No longer needed?'}</h3>
      <p>
        {isAway
          ? 'It stands in no list; engagements that chose it keep their text.'
          : 'Put away, it leaves the lists; engagements that chose it keep their text, and it can be brought back.'}
      </p>
      <Button kind="quiet" busy={act.busy} onClick={() => act.send(!isAway)}>
        {isAway ? 'Bring it back' : 'Put it away'}
      </Button>
      <ActFault act={act} what={`The schedule ${id}`} />
    </article>
  );
}
