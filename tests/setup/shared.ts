import { existsSync } from 'node:fs';
import path from 'node:path';

/** Folder with design data and published cases that lies beside the checkout; absent on other machines. */
export const sharedFolder = path.resolve(process.cwd(), '..', 'shared');

/** Whether the folder beside the checkout is there. Tests that need it skip with a message where it is not. */
export const hasShared = existsSync(sharedFolder);

/** Absolute path of a file in the folder beside the checkout. */
export function sharedFile(...parts: string[]): string {
  return path.join(sharedFolder, ...parts);
}
