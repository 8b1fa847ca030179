import type { Schedule } from './model';

/** Whether a bill on a schedule may hang on the bills before it: ratchets, means of months, streaks. */
export function looksBack(schedule: Schedule): boolean {
  return schedule.texts.some(({ quantities }) => quantities.some(({ definition }) => definition.kind === 'past'));
}
