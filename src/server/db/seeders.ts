import { SequelizeStorage, Umzug } from 'umzug';
import { sequelize } from './connection';

/** A seeder works through services like a person would, so that what it makes is true in every part. */
export interface Seeder {
  up(): Promise<void>;
}

const files = import.meta.glob<Seeder>('../../../db/seeders/*.ts', { eager: true });

/** The ledger of seeded data, apart from that of the schema. */
export function seeder() {
  return new Umzug({
    migrations: Object.keys(files)
      .sort()
      .map((file) => ({
        name: file.replace(/^.*\/|\.ts$/g, ''),
        up: () => (files[file] as Seeder).up(),
      })),
    storage: new SequelizeStorage({ sequelize, tableName: 'data_seeds' }),
    logger: undefined,
  });
}
