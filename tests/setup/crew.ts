import { inTx } from '@/server/db/tx';
import { Rate } from '@/server/models/Rate';
import { buildActor, buildEngagement } from './build';

/** A partner, two consultants, and the engagement both work on. */
export async function buildCrew() {
  const ilse = await buildActor({ role: 'partner', name: 'Ilse Aldaran' });
  const tom = await buildActor({ name: 'Tom Renwick' });
  const sana = await buildActor({ name: 'Sana Iwu' });
  return { ilse, tom, sana, engagement: await buildEngagement({ memberIds: [tom.id, sana.id] }) };
}

/** A billing rate in USD from a day on; for all engagements where none is named. */
export const buildRate = (userId: number, perHourMinor: number, from: string, engagementId: number | null = null) =>
  inTx(() => Rate.create({ userId, engagementId, perHourMinor, currency: 'USD', from }));
