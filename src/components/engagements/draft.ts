import type { EngagementChoices, EngagementForm } from '../../schemas/engagement';
import { typedNumber } from '../ui/typed-number';

/** The form of a new engagement as text; `pick` is an id or "new". */
export interface EngagementDraft {
  requestId: string;
  code: string;
  title: string;
  client: { pick: string; name: string; city: string; currency: string };
  site: { pick: string; name: string; place: string; timeZone: string; jurisdiction: string };
  meter: { pick: string; label: string; serviceVoltageKv: string };
  yearFrom: string;
  budgetHours: string;
  memberIds: string[];
}

const decimal = (text: string) => typedNumber(text) ?? null;

/** What the schema reads from the draft. */
export function toInput(draft: EngagementDraft): EngagementForm {
  const { client, site, meter, budgetHours, memberIds, ...rest } = draft;
  return {
    ...rest,
    client:
      client.pick === 'new'
        ? { kind: 'new', name: client.name, city: client.city, currency: client.currency }
        : { kind: 'known', id: Number(client.pick) },
    site:
      site.pick === 'new'
        ? { kind: 'new', name: site.name, place: site.place, timeZone: site.timeZone, jurisdiction: site.jurisdiction }
        : { kind: 'known', id: Number(site.pick) },
    meter:
      meter.pick === 'new'
        ? { kind: 'new', label: meter.label, serviceVoltageKv: decimal(meter.serviceVoltageKv) }
        : { kind: 'known', id: Number(meter.pick) },
    budgetHours: decimal(budgetHours),
    memberIds: memberIds.map(Number),
  };
}

/** An empty form: a year that ended last month, oneself as member. */
export function emptyDraft(choices: EngagementChoices, today: string): EngagementDraft {
  const first = choices.clients[0];
  return {
    requestId: '',
    code: first?.code ?? '',
    title: 'Power-bill audit',
    client: { pick: first ? String(first.id) : 'new', name: '', city: '', currency: choices.currency },
    site: { pick: firstId(first?.sites), name: '', place: '', timeZone: '', jurisdiction: '' },
    meter: { pick: firstId(first?.sites[0]?.meters), label: '', serviceVoltageKv: '' },
    yearFrom: `${Number(today.slice(0, 4)) - 1}${today.slice(4, 7)}-01`,
    budgetHours: '',
    memberIds: [String(choices.me)],
  };
}

/** The first of a list as a pick, or "new" where the list is empty. */
export const firstId = (rows: { id: number }[] | undefined) => (rows?.[0] ? String(rows[0].id) : 'new');
