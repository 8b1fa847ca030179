import { useMutation } from '@tanstack/react-query';
import { useState } from 'react';
import { addMember, removeMember } from '../../client/engagements';
import { Button } from '../ui/Button';
import { SelectField } from '../ui/Field';
import { Notice } from '../ui/Notice';

export interface Member {
  userId: number;
  name: string;
  role: string;
}

export interface MembersProps {
  code: string;
  members: Member[];
  /** People of the practice who do not work here yet. */
  others: Member[];
  me: number;
}

const reload = () => location.reload();

function MemberRow({ code, member, me }: { code: string; member: Member; me: number }) {
  const [asked, setAsked] = useState(false);
  const remove = useMutation({ mutationFn: () => removeMember(code, member.userId), onSuccess: reload });
  const isMe = member.userId === me;
  return (
    <li className="member">
      <span>
        <b>{member.name}</b>, {member.role}
        {isMe && ' (you)'}
      </span>
      {asked ? (
        <span className="flex flex-wrap gap-x-4">
          <span className="quiet">
            {isMe && member.role !== 'partner' ? 'You will not be able to open it any more.' : 'The hours stay.'}
          </span>
          <Button kind="quiet" busy={remove.isPending} onClick={() => remove.mutate()}>
            Take {isMe ? 'me' : member.name} off {code}
          </Button>
          <Button kind="quiet" onClick={() => setAsked(false)}>
            Leave it
          </Button>
        </span>
      ) : (
        <Button kind="quiet" onClick={() => setAsked(true)}>
          Take off
        </Button>
      )}
      {remove.error && <Notice kind="fault" title={remove.error.message} />}
    </li>
  );
}

/** Who works on the engagement: consultants open it only while they stand here. */
export function Members({ code, members, others, me }: MembersProps) {
  const [chosen, setChosen] = useState('');
  const add = useMutation({ mutationFn: () => addMember(code, Number(chosen)), onSuccess: reload });
  return (
    <>
      <ul className="members">
        {members.map((member) => (
          <MemberRow key={member.userId} {...{ code, member, me }} />
        ))}
        {members.length === 0 && <li className="member quiet">Nobody yet; partners see it all the same.</li>}
      </ul>
      {others.length > 0 && (
        <div className="member-add">
          <SelectField
            label="Let somebody work on it"
            placeholder="Choose a person"
            options={others.map(({ userId, name, role }) => ({ value: String(userId), label: `${name}, ${role}` }))}
            value={chosen}
            onChange={(event) => setChosen(event.target.value)}
          />
          <Button kind="secondary" busy={add.isPending} waiting={chosen === '' && ' '} onClick={() => add.mutate()}>
            Add
          </Button>
        </div>
      )}
      {add.error && <Notice kind="fault" title={add.error.message} />}
    </>
  );
}
