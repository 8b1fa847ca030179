import type { Schedule } from '../../core/tariff';
import { noLine } from '../../schemas/tariff';
import { LineMemory } from '../models/LineMemory';
import type { TariffChoice } from '../models/TariffChoice';
import type { Actor } from '../policies/actor';
import { listEngagements } from './engagements';

/** The utility a schedule is of: its publisher, whatever the case; where it names none the schedule stands for it. */
const utilityOf = ({ source, id }: Schedule) => (source.publisher ?? id).trim().toLowerCase();

/** Matches as an engagement begins with them: what earlier ones with the utility told, as far as the schedule has the line. */
export async function rememberedMatches(
  schedule: Schedule,
  engagementId: number,
): Promise<Pick<TariffChoice, 'lineMatches' | 'remembered'>> {
  const told = await LineMemory.findAll({ where: { utility: utilityOf(schedule) }, order: ['label'] });
  const known = told.filter(({ lineId }) => lineId === noLine || schedule.lineOrder.includes(lineId));
  const elsewhere = known.filter((memory) => memory.engagementId !== engagementId);
  return {
    lineMatches: Object.fromEntries(known.map(({ label, lineId }) => [label, lineId])),
    remembered: Object.fromEntries(elsewhere.map((memory) => [memory.label, memory.engagementId])),
  };
}

/** Remembers what a label means for a utility; null forgets what this engagement told. Call it inside inTx. */
export async function remember(
  schedule: Schedule,
  engagementId: number,
  { label, lineId }: { label: string; lineId: string | null },
): Promise<void> {
  const utility = utilityOf(schedule);
  const memory = await LineMemory.findOne({ where: { utility, label } });
  if (lineId === null) {
    if (memory?.engagementId === engagementId) await memory.destroy();
  } else if (memory) await memory.update({ lineId, engagementId });
  else await LineMemory.create({ utility, label, lineId, engagementId });
}

/** Where the remembered matches of a choice come from, in words; an engagement the person may not know of goes unnamed. */
export async function originsOf(actor: Actor, choice: TariffChoice): Promise<Record<string, string>> {
  const { remembered } = choice;
  if (Object.keys(remembered).length === 0) return {};
  const visible = new Map((await listEngagements(actor)).map(({ engagement }) => [engagement.id, engagement.code]));
  const words = ([label, id]: [string, number]) => {
    const code = visible.get(id);
    return [label, code ? `remembered from ${code}` : 'remembered'] as const;
  };
  return Object.fromEntries(Object.entries(remembered).map(words));
}
