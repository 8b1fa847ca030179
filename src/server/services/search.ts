import { searchFound, type JobProgress } from '../../schemas/job';
import { wholeYear } from '../../schemas/plan-spans';
import type { SearchInput, SearchView } from '../../schemas/search';
import { Job } from '../models/Job';
import type { Actor } from '../policies/actor';
import { calculateSearch } from '../workers/pool';
import type { OpenEngagement } from './engagements';
import { invalid } from '../errors';
import { runningJobs, startJob } from './jobs';
import { planBasis } from './plan-basis';
import { spanRules } from './plan-spans';
import { spanYearOf } from './plan-year';

const kind = 'search';
const reportEveryMs = 150;

/**
 * Begins the search for the best settings. One runs for an engagement at a time.
 *
 * @throws {ServiceError} 409 where one runs already, or where readings, bills, tariff or motors are missing;
 *   422 for a motor the plant has not
 */
export async function startSearch(actor: Actor, opened: OpenEngagement, input: SearchInput): Promise<JobProgress> {
  const engagementId = opened.engagement.id;
  const plans = await planBasis(opened);
  const { task: basis, fingerprint } = plans;
  const unknown = input.motorIds?.find((id) => !basis.motors.some((motor) => motor.id === id));
  if (unknown !== undefined) {
    throw invalid('The search names a motor that is not one of the plant’s.', {
      motorIds: ['This motor is not one of the plant’s. Load the page again.'],
    });
  }
  const spans = spanRules(input.spans ?? wholeYear, spanYearOf(plans));
  const alone = 'A search of this engagement is running already. Wait for it, or stop it first.';
  return startJob(actor, { engagementId, kind, unit: 'settings', alone }, async ({ report, signal }) => {
    let toldAtMs = 0;
    return calculateSearch(
      { basis, asked: input, spanRules: spans, fingerprint },
      ({ done, planned, unit }) => {
        const nowMs = Date.now();
        if (nowMs - toldAtMs < reportEveryMs && done < planned) return;
        toldAtMs = nowMs;
        report(done, planned, unit ?? 'settings');
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
