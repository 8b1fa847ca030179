import { date, id, instant, json, link, stamps, text, version, whole, type Columns } from './columns';

/** What clients are asked for: requests with the people they go to, their items, the files that came, the mails about them. */
export const requestTables: Record<string, Columns> = {
  data_requests: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    number: whole(),
    request_id: { ...text(), unique: true },
    state: text(),
    due_on: date(),
    note: text(true),
    internal_note: text(true),
    reminders: json(),
    made_by_id: link('users', true),
    sent_at: instant(),
    ended_at: instant(true),
    ...version,
    ...stamps,
  },
  request_people: {
    ...id,
    request_id: link('data_requests', false, 'CASCADE'),
    user_id: link('users', false, 'CASCADE'),
    state: text(),
    error: text(true),
    sent_at: instant(true),
    ...version,
    ...stamps,
  },
  request_items: {
    ...id,
    request_id: link('data_requests', false, 'CASCADE'),
    position: whole(),
    kind: text(),
    words: text(),
    period_from: date(true),
    period_to: date(true),
    motor_id: link('motors', true, 'SET NULL'),
    state: text(),
    reason: text(true),
    answer: text(true),
    answered_by_id: link('users', true),
    answered_at: instant(true),
    ...version,
    ...stamps,
  },
  request_files: {
    ...id,
    key: { ...text(), unique: true },
    item_id: link('request_items', false, 'CASCADE'),
    file_name: text(),
    bytes: whole(),
    sha256: text(),
    media_type: text(),
    uploaded_by_id: link('users', true),
    state: text(),
    intake_id: link('intakes', true, 'SET NULL'),
    motor_id: link('motors', true, 'SET NULL'),
    ...version,
    ...stamps,
  },
  request_reminders: {
    ...id,
    request_id: link('data_requests', false, 'CASCADE'),
    user_id: link('users', false, 'CASCADE'),
    due_on: date(),
    step: whole(),
    day: date(),
    state: text(),
    error: text(true),
    ...stamps,
  },
  request_digests: {
    ...id,
    request_id: link('data_requests', false, 'CASCADE'),
    until: instant(),
    state: text(),
    error: text(true),
    ...stamps,
  },
};

export const requestIndexes: Record<string, string[][]> = {
  request_files: [['sha256']],
  request_reminders: [['user_id', 'day']],
};

export const requestChecks: Record<string, string[]> = {
  data_requests: ["state IN ('open','closed','withdrawn')"],
  request_people: ["state IN ('sending','sent','failed')"],
  request_items: [
    "kind IN ('bills','intervals','nameplate','other')",
    "state IN ('asked','answered','accepted','sent-back')",
  ],
  request_files: ["state IN ('new','taking','taken','plate','set-aside','removed')"],
  request_reminders: ["state IN ('sending','sent','failed')"],
  request_digests: ["state IN ('sending','sent','failed')"],
};

/** What there can be only once: the number of a request, a person in it, a reminder of a step. */
export const requestUniques: [table: string, columns: string[], name: string][] = [
  ['data_requests', ['engagement_id', 'number'], 'requests_number'],
  ['request_people', ['request_id', 'user_id'], 'request_people_once'],
  ['request_items', ['request_id', 'position'], 'request_items_position'],
  ['request_reminders', ['request_id', 'user_id', 'due_on', 'step'], 'reminders_once'],
];
