import { SequelizeStorage, Umzug } from 'umzug';
import type { QueryInterface } from 'sequelize';
import { sequelize } from './connection';

/** A migration: changes of the schema and their undoing. */
export interface Migration {
  up(database: QueryInterface): Promise<void>;
  down(database: QueryInterface): Promise<void>;
}

const files = import.meta.glob<Migration>('../../../db/migrations/*.ts', { eager: true });

/** The ledger of schema changes. */
export function migrator() {
  const names = Object.keys(files).sort();
  return new Umzug({
    migrations: names.map((file) => {
      const migration = files[file] as Migration;
      return {
        name: file.replace(/^.*\/|\.ts$/g, ''),
        up: () => migration.up(sequelize.getQueryInterface()),
        down: () => migration.down(sequelize.getQueryInterface()),
      };
    }),
    storage: new SequelizeStorage({ sequelize, tableName: 'schema_migrations' }),
    logger: undefined,
  });
}

/** Brings the schema up to date. */
export async function migrate(): Promise<void> {
  await migrator().up();
}
