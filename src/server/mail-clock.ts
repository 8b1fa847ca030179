import { log } from './log';
import { runReminders } from './services/reminders';
import { runDigests } from './services/request-digests';

const tickMs = 5 * 60_000;

/** One look at what is due; what fails is noted and tried at the next. */
async function tick(): Promise<void> {
  for (const run of [runDigests, runReminders]) {
    try {
      await run(Date.now());
    } catch (error) {
      log().error({ err: error }, 'mails of requests failed');
    }
  }
}

/** Looks every five minutes for mails that are due. @returns stops looking, once a tick under way has ended */
export function startMailClock(): () => Promise<void> {
  let running = Promise.resolve();
  let stopped = false;
  const timer = setInterval(() => {
    running = running.then(() => (stopped ? undefined : tick()));
  }, tickMs);
  timer.unref();
  return () => {
    stopped = true;
    clearInterval(timer);
    return running;
  };
}
