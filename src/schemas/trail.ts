import { z } from 'zod';
import { isCalendarDate } from '../core/load';

const day = z.string().refine(isCalendarDate).nullable().catch(null).default(null);
const whole = z.coerce.number().int().min(0).nullable().catch(null);
/** An empty field of the form filters nothing. */
const filled = (value: unknown) => (value === '' ? undefined : value);

/** What of the trail is asked for; 0 as `who` is the system itself. */
export const trailFilterInput = z.object({
  who: z.preprocess((value) => filled(value) ?? null, whole),
  subject: z.string().max(60).catch('').default(''),
  row: z.preprocess((value) => filled(value) ?? null, whole),
  action: z.enum(['create', 'update', 'delete', '']).catch('').default(''),
  from: day,
  to: day,
  page: z.coerce.number().int().min(1).catch(1).default(1),
});
export type TrailFilter = z.output<typeof trailFilterInput>;

/** One changed field. */
export interface TrailField {
  name: string;
  before: string | null;
  after: string | null;
}

/** One change of one row. */
export interface TrailRowView {
  id: number;
  at: string;
  who: string;
  ip: string | null;
  action: 'create' | 'update' | 'delete';
  subject: string;
  subjectId: number | null;
  fields: TrailField[];
}

/** A page of the trail. */
export interface TrailView {
  rows: TrailRowView[];
  count: number;
  page: number;
  pages: number;
  filter: TrailFilter;
  subjects: string[];
  people: { id: number; name: string }[];
}
