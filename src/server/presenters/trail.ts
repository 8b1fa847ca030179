import type { TrailField, TrailRowView } from '../../schemas/trail';
import type { Trail } from '../models/Trail';
import { wordsOfName } from './schedule';

function shown(value: unknown): string | null {
  if (value === null || value === undefined) return null;
  return typeof value === 'string' ? value : JSON.stringify(value);
}

/** A column's name as people read it: "amountMinor" is "amount in minor units". */
function wordsOfField(name: string): string {
  return wordsOfName(name.replace(/Minor$/, 'InMinorUnits')).toLowerCase();
}

function fieldsOf({ before, after }: Trail): TrailField[] {
  const names = [...new Set([...Object.keys(before ?? {}), ...Object.keys(after ?? {})])];
  return names
    .filter((name) => name !== 'id' && name !== 'version')
    .map((name) => ({ name: wordsOfField(name), before: shown(before?.[name]), after: shown(after?.[name]) }))
    .filter((field) => field.before !== null || field.after !== null);
}

/** A row of the trail: who changed what, with both values of every field. */
export function presentTrail(row: Trail, names: Map<number, string>): TrailRowView {
  const { id, action, subject, subjectId, ip, actorId } = row;
  const who = actorId === null ? 'the system' : (names.get(actorId) ?? `person ${actorId}`);
  return { id, at: row.at.toISOString(), who, ip, action, subject, subjectId, fields: fieldsOf(row) };
}
