import type { PersonView } from '../../schemas/account';
import { capital, formatDate, formatList, formatSpelled } from '../ui/format';
import type { StaffRow } from './StaffTable';

/** The finding: who is missing a rate, whose licence ends next, who has not come in. */
export function peopleHeading(staff: StaffRow[], clients: PersonView[], today: string): string {
  const working = staff.filter((person) => person.access !== 'closed');
  const count = `${capital(formatSpelled(working.length))} ${working.length === 1 ? 'person works' : 'people work'} here`;
  const unrated = working.filter((person) => !person.rates.some((rate) => rate.from <= today));
  const ends = working
    .flatMap(({ name, licence }) =>
      licence?.expires && licence.expires >= today ? [{ name, on: licence.expires }] : [],
    )
    .sort((a, b) => a.on.localeCompare(b.on))[0];
  const out = [...working, ...clients].filter((person) => person.access === 'invited');
  const parts = [
    unrated.length > 0 &&
      `${formatList(unrated.map((person) => person.name))} ${unrated.length === 1 ? 'has' : 'have'} no rate`,
    out.length > 0 && `${formatSpelled(out.length)} ${out.length === 1 ? 'has' : 'have'} not come in yet`,
    ends && `the next licence to end is that of ${ends.name}, on ${formatDate(ends.on)}`,
  ].filter(Boolean);
  return parts.length > 0 ? `${count}; ${parts.join('; ')}.` : `${count}.`;
}
