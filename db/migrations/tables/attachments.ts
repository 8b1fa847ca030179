import { id, instant, link, stamps, text, version, whole, type Columns } from './columns';

/** Pages of bills, PDF or photo; without a bill they wait for one. The files lie in the drawer by their SHA-256. */
export const attachmentTables: Record<string, Columns> = {
  attachments: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    bill_id: link('bills', true, 'SET NULL'),
    file_name: text(),
    bytes: whole(),
    sha256: text(),
    media_type: text(),
    page_count: whole(true),
    attached_by_id: link('users', true),
    removed_at: instant(true),
    ...version,
    ...stamps,
  },
};

export const attachmentIndexes: Record<string, string[][]> = {
  attachments: [['sha256']],
};

export const attachmentChecks: Record<string, string[]> = {
  attachments: ["media_type IN ('application/pdf','image/jpeg','image/png','image/webp')"],
};
