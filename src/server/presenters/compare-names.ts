import type { Schedule } from '../../core/tariff';

/** A schedule's short name: its title up to the first comma. */
const shortName = ({ title }: Schedule) => title.split(',')[0]!.trim();

/**
 * Short names of schedules side by side; one that would be there twice is told apart by its id, the same id twice as the library's text.
 */
export function namesApart(schedules: Schedule[]): string[] {
  const names = schedules.map(shortName);
  const isOnce = (all: string[], name: string) => all.filter((one) => one === name).length === 1;
  const told = names.map((name, index) => (isOnce(names, name) ? name : schedules[index]!.id));
  return told.map((name, index) => (isOnce(told, name) || index === 0 ? name : `${name}, text of the library`));
}
