import { writeSync } from 'node:fs';
import type { LoadSeries } from '../../src/core/load';
import { ReadingBlock } from '../../src/server/models/ReadingBlock';
import type { Actor } from '../../src/server/policies/actor';
import { openIntake } from '../../src/server/services/intake-guard';
import { keepLoad } from '../../src/server/services/keep-intervals';

/**
 * A program that keeps a year of quarter-hours and tells its parent where it stands, so that it can be killed there:
 * `ready`, then on a line of its input it keeps, `first` behind the first block written, `done` behind the commit.
 */
const say = (word: string) => writeSync(1, `${word}\n`);

function year(): LoadSeries {
  const count = 35_040;
  return {
    startMs: Date.UTC(2026, 0, 1),
    stepMinutes: 15,
    kwh: Float64Array.from({ length: count }, (_, index) => 100 + (index % 96)),
    kvarhLagging: new Float64Array(count).fill(50),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
}

async function main(): Promise<void> {
  const rights = { view: false, record: false, decide: false, pay: false };
  const partner: Actor = { id: 1, email: '', name: '', role: 'partner', clientId: null, rights };
  const open = await openIntake(partner, Number(process.argv[2]));
  let written = 0;
  ReadingBlock.addHook('afterCreate', () => {
    written += 1;
    if (written === 1) say('first');
  });
  const load = year();
  say('ready');
  await new Promise((resolve) => process.stdin.once('data', resolve));
  await keepLoad(open, load);
  say('done');
  process.exit(0);
}

await main();
