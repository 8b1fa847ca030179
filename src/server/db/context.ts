import { AsyncLocalStorage } from 'node:async_hooks';

/** Who is acting, for the trail; null is the system itself (boot, seeding, jobs say whose they are). */
export interface ActingContext {
  actorId: number | null;
  ip: string | null;
}

const storage = new AsyncLocalStorage<ActingContext>();

/** Runs work in the name of a person. */
export function actAs<Result>(context: ActingContext, work: () => Result): Result {
  return storage.run(context, work);
}

/** In whose name the current work runs. */
export function currentActor(): ActingContext {
  return storage.getStore() ?? { actorId: null, ip: null };
}
