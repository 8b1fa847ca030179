import type { TestProject } from 'vitest/node';
import { startServerProcess } from './server-process';

declare module 'vitest' {
  interface ProvidedContext {
    origin: string;
    dataDir: string;
  }
}

/** One built server with the demo scenario for all tests of the project `built`. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const server = await startServerProcess();
  project.provide('origin', server.origin);
  project.provide('dataDir', server.dataDir);
  return () => server.stop();
}
