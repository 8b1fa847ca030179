import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { readSchedule, type Schedule } from '@/core/tariff';

const folder = path.resolve('tariffs', 'forms');

/** Ids of the files of `tariffs/forms`. */
export const formIds = readdirSync(folder)
  .filter((name) => name.endsWith('.yaml'))
  .map((name) => name.replace(/\.yaml$/, ''));

/** Text of a form's file. */
export function formText(id: string): string {
  return readFileSync(path.join(folder, `${id}.yaml`), 'utf8');
}

/** A form, read. */
export function readForm(id: string): Schedule {
  return readSchedule(formText(id));
}
