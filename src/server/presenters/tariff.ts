import type { ContractField, ChoiceView, LibraryEntry } from '../../schemas/tariff';
import type { Schedule, ScheduleProblem } from '../../core/tariff';
import type { TariffChoice } from '../models/TariffChoice';
import { contractFields, historyFields } from './schedule';

/** A file of the library as pages list it, without its text. */
export function presentLibraryEntry(file: {
  id: string;
  fileName: string;
  bytes: number;
  sha256: string;
  schedule: Schedule | null;
  problems: ScheduleProblem[];
}): LibraryEntry {
  const { id, fileName, bytes, sha256, schedule, problems } = file;
  return {
    id,
    fileName,
    bytes,
    sha256,
    title: schedule?.title ?? null,
    publisher: schedule?.source.publisher ?? null,
    status: schedule?.source.status ?? null,
    currency: schedule?.currency ?? null,
    timeZone: schedule?.timeZone ?? null,
    inForce: schedule?.inForce ?? null,
    problems,
    contract: schedule ? contractFields(schedule) : [],
    history: schedule ? historyFields(schedule) : [],
  };
}

/** The choice of an engagement, beside what the library says today. */
export function presentChoice(choice: TariffChoice, schedule: Schedule | null, librarySha: string | null): ChoiceView {
  const { scheduleId, sha256, contract, history, lineMatches, toleranceMinor, version } = choice;
  return {
    scheduleId,
    title: schedule?.title ?? scheduleId,
    sha256,
    contract,
    history,
    lineMatches,
    toleranceMinor,
    contractFields: schedule ? contractFields(schedule) : [],
    historyFields: schedule ? historyFields(schedule) : [],
    version,
    library: librarySha === null ? 'gone' : librarySha === sha256 ? 'same' : 'changed',
  };
}

/** Contract inputs with the schedule's own values where none were told. */
export function withDefaults(fields: ContractField[], told: Record<string, number>): Record<string, number> {
  const values = fields.map((field) => [field.name, told[field.name] ?? field.default] as const);
  return Object.fromEntries(values.filter((pair): pair is [string, number] => pair[1] !== null));
}
