import { id, json, link, stamps, version, type Columns } from './columns';

/** How the bus of an engagement's plant is supplied, one row each. */
export const supplyTables: Record<string, Columns> = {
  supplies: {
    ...id,
    engagement_id: { ...link('engagements', false, 'CASCADE'), unique: true },
    entries: json(),
    ...version,
    ...stamps,
  },
};
