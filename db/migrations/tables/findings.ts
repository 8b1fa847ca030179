import { date, flag, id, instant, json, link, stamps, text, version, whole, type Columns } from './columns';

/** What is remembered of a utility's labels, findings with their history, and the letters that put them to the utility. */
export const findingTables: Record<string, Columns> = {
  line_memories: {
    ...id,
    utility: text(),
    label: text(),
    line_id: text(),
    engagement_id: link('engagements', false, 'CASCADE'),
    ...stamps,
  },
  utility_letters: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    number: whole(),
    request_id: { ...text(), unique: true },
    way: text(),
    state: text(),
    error: text(true),
    content: json(),
    html: text(),
    digest: text(),
    made_by_id: link('users', true),
    sent_at: instant(true),
    ...version,
    ...stamps,
  },
  findings: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    period_from: date(),
    period_to: date(),
    line_key: text(),
    family: text(),
    title: text(),
    line_label: text(true),
    amount_minor: whole(),
    found: flag(true),
    state: text(),
    since: date(),
    decided_minor: whole(true),
    refunded_minor: whole(true),
    refunded_on: date(true),
    letter_id: link('utility_letters', true, 'SET NULL'),
    ...version,
    ...stamps,
  },
  finding_changes: {
    ...id,
    finding_id: link('findings', false, 'CASCADE'),
    by_id: link('users', true),
    from_state: text(true),
    to_state: text(true),
    amount_minor: whole(true),
    day: date(),
    note: text(true),
    ...stamps,
  },
};

export const findingIndexes: Record<string, string[][]> = {
  findings: [['engagement_id', 'period_from']],
  utility_letters: [['engagement_id', 'number']],
};

export const findingChecks: Record<string, string[]> = {
  findings: [
    "state IN ('open','raised','agreed','refunded','dropped')",
    "family IN ('line','printed-line','arithmetic','energy','total')",
    'period_from < period_to',
  ],
  utility_letters: ["state IN ('sending','sent','failed')", "way IN ('mail','post')"],
};
