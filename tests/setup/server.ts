import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll } from 'vitest';
import { configureEnv } from '@/server/env';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-test-'));
configureEnv({
  NODE_ENV: 'test',
  DATA_DIR: folder,
  SESSION_SECRET: 'a-secret-of-the-tests-of-enough-length',
  LOG_LEVEL: 'silent',
});

beforeAll(async () => {
  const { migrate } = await import('@/server/db/migrations');
  await migrate();
});

afterAll(async () => {
  const { sequelize } = await import('@/server/db/connection');
  const { closePool } = await import('@/server/workers/pool');
  await closePool();
  await sequelize.close();
  rmSync(folder, { recursive: true, force: true });
});
