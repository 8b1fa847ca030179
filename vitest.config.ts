import { defineConfig } from 'vitest/config';
import { fileURLToPath } from 'node:url';

const alias = { '@': fileURLToPath(new URL('./src', import.meta.url)) };

/**
 * Three projects: `core` is pure and fast, `server` runs services against a migrated database of its own,
 * `built` starts the built server and drives it over HTTP and in a browser (`npm run build` comes first).
 */
export default defineConfig({
  test: {
    reporters: ['default', './tests/setup/closing-line.ts'],
    projects: [
      {
        resolve: { alias },
        test: {
          name: 'core',
          include: ['tests/core/**/*.test.ts', 'tests/published/**/*.test.ts'],
          setupFiles: ['tests/setup/seed.ts'],
          testTimeout: 60_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'server',
          include: ['tests/server/**/*.test.{ts,tsx}'],
          setupFiles: ['tests/setup/server.ts'],
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
      {
        resolve: { alias },
        test: {
          name: 'built',
          include: ['tests/api/**/*.test.ts', 'tests/browser/**/*.test.ts'],
          globalSetup: ['tests/setup/built.ts'],
          fileParallelism: false,
          testTimeout: 180_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
