import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

/** A program that runs beside the server: the file to run and what Node needs to run it. */
export interface WorkerProgram {
  file: string;
  execArgv: string[];
}

/**
 * Finds a worker's program. In the build it is an entry of its own beside the server's, and this module may have been
 * inlined anywhere below, so the folders are walked upwards; in development and tests the TypeScript source runs.
 *
 * @param name  file name without ending, as in `src/server/workers`
 */
export function locateWorker(name: string): WorkerProgram {
  let folder = new URL('.', import.meta.url);
  for (let up = 0; up < 6; up++) {
    const built = fileURLToPath(new URL(`${name}.worker.mjs`, folder));
    if (existsSync(built)) return { file: built, execArgv: [] };
    folder = new URL('..', folder);
  }
  const source = fileURLToPath(new URL(`./${name}.ts`, import.meta.url));
  if (existsSync(source)) return { file: source, execArgv: ['--import', 'tsx'] };
  throw new Error(`The program of the worker "${name}" was not found. Run npm run build.`);
}
