import { searchFound, type JobProgress } from '../../schemas/job';
import type { SearchInput, SearchView } from '../../schemas/search';
import { Job } from '../models/Job';
import type { Actor } from '../policies/actor';
import { calculateSearch } from '../workers/pool';
import type { OpenEngagement } from './engagements';
import { runningJobs, startJob } from './jobs';
import { planBasis } from './plan-basis';

const kind = 'search';
const reportEveryMs = 150;

/**
 * Begins the search for the best field currents. One runs for an engagement at a time.
 *
 * @throws {ServiceError} 409 where one runs already, or where readings, bills, tariff or motors are missing
 */
export async function startSearch(actor: Actor, opened: OpenEngagement, input: SearchInput): Promise<JobProgress> {
  const engagementId = opened.engagement.id;
  const { task: basis, fingerprint } = await planBasis(opened);
  const alone = 'A search of this engagement is running already. Wait for it, or stop it first.';
  return startJob(actor, { engagementId, kind, unit: 'settings', alone }, async ({ report, signal }) => {
    let toldAtMs = 0;
    return calculateSearch(
      { basis, stepA: input.stepA, fingerprint },
      ({ done, planned }) => {
        const nowMs = Date.now();
        if (nowMs - toldAtMs < reportEveryMs && done < planned) return;
        toldAtMs = nowMs;
        report(done, planned);
      },
      signal,
    );
  });
}

/** The search a page opens with: the one that runs, else the newest that ended well with what it found. */
export async function latestSearch(opened: OpenEngagement): Promise<{ id: number; found: SearchView | null } | null> {
  const where = { engagementId: opened.engagement.id, kind };
  const done = await Job.findOne({ where: { ...where, state: 'done' }, order: [['id', 'DESC']] });
  const found = searchFound(done);
  const [running] = await runningJobs(opened.engagement.id, kind);
  const id = running?.id ?? done?.id;
  return id === undefined ? null : { id, found };
}
