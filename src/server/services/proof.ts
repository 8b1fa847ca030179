import { addDays } from '../../core/load';
import { Edition } from '../models/Edition';
import type { OpenEngagement } from './engagements';

/** What the client was shown last, bill by bill. Major units. */
export interface PromisedYear {
  number: number;
  madeOn: string;
  currency: string;
  saving: number;
  before: number;
  after: number;
  bills: { lastDay: string; before: number; after: number }[];
}

/** The promise later bills are held against; null where the client was shown no edition. */
export async function promiseOf({ engagement }: OpenEngagement): Promise<PromisedYear | null> {
  const editions = await Edition.findAll({ where: { engagementId: engagement.id }, order: [['number', 'DESC']] });
  const shown = editions.find((edition) => edition.shownAt !== null);
  if (!shown) return null;
  const { number, madeOn, currency, plan, standing, bills } = shown.content;
  return {
    number,
    madeOn,
    currency,
    saving: plan.saving,
    before: standing.yearTotal,
    after: plan.yearTotal,
    bills: bills.map(({ to, before, after }) => ({ lastDay: addDays(to, -1), before, after })),
  };
}
