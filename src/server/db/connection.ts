import { AsyncLocalStorage } from 'node:async_hooks';
import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { Sequelize } from 'sequelize';
import sqlite3 from 'sqlite3';
import { getEnv } from '../env';

const pragmas = 'PRAGMA busy_timeout=5000; PRAGMA journal_mode=WAL; PRAGMA synchronous=NORMAL; PRAGMA foreign_keys=ON;';

type Opened = (error: Error | null) => void;

/** Every connection Sequelize opens gets the pragmas: it offers no hook for SQLite and opens one per transaction. */
class PragmaDatabase extends sqlite3.Database {
  constructor(file: string, mode: number, opened: Opened) {
    super(file, mode, (error: Error | null) => {
      if (error) opened.call(this, error);
      else this.exec(pragmas, (failed) => opened.call(this, failed));
    });
  }
}

/** The little of a continuation-local namespace that Sequelize asks for, on AsyncLocalStorage. */
class TransactionNamespace {
  private readonly storage = new AsyncLocalStorage<Map<string, unknown>>();
  get(key: string): unknown {
    return this.storage.getStore()?.get(key);
  }
  set(key: string, value: unknown): void {
    this.storage.getStore()?.set(key, value);
  }
  run(work: (context: unknown) => unknown): unknown {
    const context = new Map(this.storage.getStore());
    return this.storage.run(context, () => work(context));
  }
  bind<Work>(work: Work): Work {
    return work;
  }
}

const shared = globalThis as typeof globalThis & {
  counterlagDatabase?: { sequelize: Sequelize; namespace: TransactionNamespace };
};

/** One connection object for the process, kept over reloads in development. */
function open() {
  const folder = path.resolve(getEnv().DATA_DIR);
  mkdirSync(folder, { recursive: true });
  const namespace = new TransactionNamespace();
  Sequelize.useCLS(namespace);
  const sequelize = new Sequelize({
    dialect: 'sqlite',
    dialectModule: { ...sqlite3, Database: PragmaDatabase },
    storage: path.join(folder, 'counterlag.sqlite'),
    logging: false,
    typeValidation: true,
    transactionType: 'IMMEDIATE' as never,
    define: { underscored: true },
  });
  return { sequelize, namespace };
}

shared.counterlagDatabase ??= open();

export const { sequelize } = shared.counterlagDatabase;

/** The transaction the current work runs in, if any. */
export function currentTransaction(): unknown {
  return shared.counterlagDatabase?.namespace.get('transaction');
}
