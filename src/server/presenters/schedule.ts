import type { Schedule } from '../../core/tariff';
import { formatList } from '../../components/ui/format';
import type { ContractField, HistoryField } from '../../schemas/tariff';

/** Words made of a name where the file gives no label: contractKva -> "Contract kva". */
export function wordsOfName(name: string): string {
  const words = name.replace(/([a-z0-9])([A-Z])/g, '$1 $2').toLowerCase();
  return words.charAt(0).toUpperCase() + words.slice(1);
}

const kindOf = (unit: string): ContractField['kind'] => (unit === 'flag' || unit === 'date' ? unit : 'number');

/** Contract inputs over all texts of a schedule, each once, the latest text's wording. */
export function contractFields(schedule: Schedule): ContractField[] {
  const fields = new Map<string, ContractField>();
  for (const text of schedule.texts) {
    for (const { name, label, unit, default: usual, range, clause } of text.contract) {
      fields.set(name, {
        name,
        label: label ?? wordsOfName(name),
        unit,
        kind: kindOf(unit),
        default: usual ?? null,
        range: range ?? null,
        clause: clause ?? null,
      });
    }
  }
  return [...fields.values()];
}

/** What the schedule looks back at beyond the year's bills, with the most months. */
export function historyFields(schedule: Schedule): HistoryField[] {
  const fields = new Map<string, HistoryField>();
  for (const text of schedule.texts) {
    const quantities = new Map(text.quantities.map((quantity) => [quantity.name, quantity]));
    for (const { definition } of text.quantities) {
      if (definition.kind !== 'past') continue;
      const months = definition.over.kind === 'last' ? definition.over.count : 11;
      for (const name of definition.expression.names) {
        const quantity = quantities.get(name);
        if (!quantity) continue;
        const most = Math.max(months, fields.get(name)?.months ?? 0);
        fields.set(name, { name, label: quantity.label ?? wordsOfName(name), unit: quantity.unit, months: most });
      }
    }
  }
  return [...fields.values()];
}

/** How a bill across two texts, seasons or rider months is divided, in one sentence without its point. */
export function straddleWords({ division, ruledBy }: Pick<Schedule, 'division' | 'ruledBy'>): string {
  const names = { text: 'text', season: 'season', month: 'rider month' };
  const parts = Object.entries(names) as [keyof typeof names, string][];
  const shared = parts.flatMap(([what, name]) => (ruledBy[what] === null ? [name] : []));
  const ruled = (['start', 'end'] as const).flatMap((day) => {
    const by = parts.flatMap(([what, name]) => (ruledBy[what] === day ? [name] : []));
    const verb = by.length === 1 ? 'holds' : 'hold';
    return by.length > 0
      ? [`${formatList(by)} of the ${day === 'start' ? 'first' : 'last'} day ${verb} for the whole bill`]
      : [];
  });
  const how = division === 'intervals' ? 'by the intervals each covers' : 'by days';
  const words = [
    ...ruled,
    ...(shared.length > 0 ? [`${formatList(shared.map((name) => `${name}s`))} are shared ${how}`] : []),
  ];
  return words.join('; ');
}
