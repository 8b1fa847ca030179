/** Loaded before the server: at each SIGWINCH writes the longest delay of the event loop since the last one. [ms] */
import { writeFileSync } from 'node:fs';
import { monitorEventLoopDelay } from 'node:perf_hooks';
import { isMainThread } from 'node:worker_threads';

if (isMainThread && process.env.DELAY_FILE) {
  const histogram = monitorEventLoopDelay({ resolution: 10 });
  histogram.enable();
  process.on('SIGWINCH', () => {
    writeFileSync(process.env.DELAY_FILE, String(histogram.max / 1e6));
    histogram.reset();
  });
}
