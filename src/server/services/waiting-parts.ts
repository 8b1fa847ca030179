import { dayNumber } from '../../core/load';
import type { WaitingView } from '../../schemas/today';
import type { OpenEngagement } from './engagements';

/** What an engagement waits for, and the stations at which that is told. */
export interface Told {
  rows: WaitingView[];
  stations: string[];
}

/** Client, site and code of an engagement. */
export const whereOf = ({ client, site, engagement }: OpenEngagement) =>
  `${client.name}, ${site.name}, ${engagement.code}`;

/** Days from one date to another, none before it. */
export const daysBetween = (from: string, to: string) => Math.max(0, dayNumber(to) - dayNumber(from));
