import { inTx } from '../db/tx';
import { invalid } from '../errors';
import { HourEntry } from '../models/HourEntry';
import { Membership } from '../models/Membership';
import { User } from '../models/User';
import type { OpenEngagement } from './engagements';

/** Somebody who works on an engagement. */
export interface MemberView {
  userId: number;
  name: string;
  role: string;
}

/** Those who work on an opened engagement. */
export const membersOf = ({ members }: OpenEngagement): MemberView[] =>
  members.map(({ id, name, role }) => ({ userId: id, name, role }));

/** People of the practice who do not work on it yet. */
export async function othersOf({ members }: OpenEngagement): Promise<MemberView[]> {
  const known = new Set(members.map((member) => member.id));
  const where = { role: ['partner', 'consultant'], disabledAt: null };
  const staff = await User.findAll({ where, order: ['name'] });
  return staff.filter(({ id }) => !known.has(id)).map(({ id, name, role }) => ({ userId: id, name, role }));
}

/** Lets a person of the practice work on the engagement; twice is once. @throws {ServiceError} 422 */
export async function addMember(opened: OpenEngagement, userId: number): Promise<MemberView> {
  const user = await User.findByPk(userId);
  if (!user || user.role === 'client' || user.disabledAt) {
    throw invalid('Choose a person of the practice.', { userId: ['Choose a person of the practice.'] });
  }
  const where = { engagementId: opened.engagement.id, userId };
  await inTx(async () => {
    if (!(await Membership.findOne({ where }))) await Membership.create(where);
  });
  return { userId, name: user.name, role: user.role };
}

/** Takes a person off the engagement; their hours stay. */
export async function removeMember(opened: OpenEngagement, userId: number): Promise<{ hours: number }> {
  const where = { engagementId: opened.engagement.id, userId };
  await inTx(async () => {
    await (await Membership.findOne({ where }))?.destroy();
  });
  return { hours: await HourEntry.count({ where }) };
}
