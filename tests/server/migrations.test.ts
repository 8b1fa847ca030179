import { describe, expect, it } from 'vitest';
import { sequelize } from '@/server/db/connection';
import { migrator } from '@/server/db/migrations';

const tables = async () => (await sequelize.getQueryInterface().showAllTables()).sort();

describe('migrations', () => {
  it('go up, down and up again to the same schema', async () => {
    const first = await tables();
    await migrator().down({ to: 0 });
    expect(await tables()).toEqual(['schema_migrations']);
    await migrator().up();
    expect(await tables()).toEqual(first);
    expect(first.length).toBeGreaterThan(20);
  });
});
