import { Readable } from 'node:stream';
import { toConfirm, type IntakeView } from '@/schemas/intake';
import { storeOriginal } from '@/server/drawer';
import type { Actor } from '@/server/policies/actor';
import { authorizeIntake, matchIntake, receiveFile } from '@/server/services/intake';
import { keepIntake } from '@/server/services/intake-keep';
import { buildActor, buildEngagement } from './build';

/** A quarter-hour. [ms] */
export const stepMs = 15 * 60_000;
/** All of time, for asking what is kept at all. */
export const always: [number, number] = [-8.64e15, 8.64e15];

/** Quarter-hours in UTC from a day on; the reading of interval i is i + 0.1 kWh, lagging half of it, or blank. */
export function intervalCsv(day: string, count: number, blank: number[] = []): string {
  const start = Date.parse(`${day}T00:00:00Z`);
  const rows = Array.from({ length: count }, (_, index) => {
    const stamp = new Date(start + index * stepMs).toISOString().replace('T', ' ').slice(0, 16);
    return blank.includes(index) ? `${stamp},,` : `${stamp},${index + 0.1},${(index + 0.1) / 2}`;
  });
  return ['Interval start,Active energy kWh,Reactive lagging kvarh', ...rows].join('\n');
}

/** Two bills, November and December 2025. */
export const billCsv = `From,To,kWh,Max kW,Energy charge USD,Demand charge USD,Total USD
2025-11-01,2025-11-30,2508159,5092,135718.09,33607.20,169325.29
2025-12-01,2025-12-31,2389204,4996,129919.56,32973.60,162893.16
`;

/** A consultant and an engagement of theirs. */
export async function scene(timeZone = 'UTC') {
  const consultant = await buildActor();
  const engagement = await buildEngagement({ memberIds: [consultant.id], timeZone });
  return { consultant, engagement, code: engagement.code };
}

/** Brings a file in. */
export async function bring(
  actor: Actor,
  code: string,
  kind: 'intervals' | 'bills',
  fileName: string,
  content: string | Buffer,
) {
  const opened = await authorizeIntake(actor, code);
  const file = await storeOriginal(Readable.from([Buffer.from(content)]));
  return receiveFile(actor, opened, { kind, fileName, ...file });
}

/** Gives the word for whatever is not sure. */
export async function confirmAll(actor: Actor, view: IntakeView): Promise<IntakeView> {
  const { preview, timeZone, version } = view;
  if (!preview) throw new Error('no preview to confirm');
  const left = toConfirm(preview, view.confirmed);
  if (left.count === 0) return view;
  const confirmed = [
    ...left.columns.map((column) => `column:${column.index}`),
    ...left.guesses.map((guess) => `guess:${guess.key}`),
  ];
  return matchIntake(actor, view.id, { version, timeZone, columnMap: preview.columnMap, confirmed });
}

/** Brings a file in, gives the word for it and keeps it. */
export async function bringAndKeep(
  actor: Actor,
  code: string,
  kind: 'intervals' | 'bills',
  fileName: string,
  content: string,
) {
  const ready = await confirmAll(actor, await bring(actor, code, kind, fileName, content));
  return keepIntake(actor, ready.id, ready.version);
}
