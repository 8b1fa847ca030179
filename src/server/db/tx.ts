import { Mutex } from 'async-mutex';
import { currentTransaction, sequelize } from './connection';

const shared = globalThis as typeof globalThis & { counterlagGate?: Mutex };
const gate = (shared.counterlagGate ??= new Mutex());

/**
 * Runs work in one transaction, one at a time in this process: waiting SQLite transactions block the thread pool
 * their holder needs. Nested calls join the outer one. Keep the work short: no hashing, mail, parsing or HTTP inside.
 */
export function inTx<Result>(work: () => Promise<Result>): Promise<Result> {
  if (currentTransaction()) return work();
  return gate.runExclusive(() => sequelize.transaction(work));
}
