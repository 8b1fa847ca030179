import { DataTypes, type QueryInterface } from 'sequelize';
import {
  bytes,
  date,
  flag,
  id,
  instant,
  json,
  link,
  real,
  stamps,
  text,
  version,
  whole,
  type Columns,
} from './tables/columns';
import { attachmentChecks, attachmentIndexes, attachmentTables } from './tables/attachments';
import { billChecks, billTables } from './tables/bills';
import { gapFillChecks, gapFillTables } from './tables/gap-fills';
import { findingChecks, findingIndexes, findingTables } from './tables/findings';
import { intakeChecks, intakeIndexes, intakeTables } from './tables/intakes';
import { motorLoadChecks, motorLoadTables } from './tables/motor-loads';
import { requestChecks, requestIndexes, requestTables, requestUniques } from './tables/requests';
import { supplyTables } from './tables/supplies';

/** Columns of the tables, in the order in which the tables can be made. */
const tables: Record<string, Columns> = {
  practices: { ...id, name: text(), legal_name: text(), phone: text(), currency: text(), ...version, ...stamps },
  clients: { ...id, name: text(), city: text(true), contact: text(true), currency: text(), ...version, ...stamps },
  users: {
    ...id,
    email: { ...text(), unique: true },
    name: text(),
    role: text(),
    client_id: link('clients', true),
    password_hash: text(true),
    rights: json(),
    licence_jurisdiction: text(true),
    licence_number: text(true),
    licence_expires: date(true),
    licence_checked_by_id: link('users', true),
    disabled_at: instant(true),
    session_epoch: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 0 },
    ...version,
    ...stamps,
  },
  sessions: {
    sid: { type: DataTypes.STRING(64), primaryKey: true },
    expires: instant(true),
    data: text(true),
    ...stamps,
  },
  tokens: {
    ...id,
    user_id: link('users', false, 'CASCADE'),
    kind: text(),
    hash: { ...text(), unique: true },
    target: text(true),
    expires_at: instant(),
    used_at: instant(true),
    ...stamps,
  },
  sites: {
    ...id,
    client_id: link('clients'),
    name: text(),
    place: text(true),
    time_zone: text(),
    jurisdiction: text(true),
    ...version,
    ...stamps,
  },
  meters: { ...id, site_id: link('sites'), label: text(), service_voltage_kv: real(true), ...version, ...stamps },
  engagements: {
    ...id,
    code: { ...text(), unique: true },
    title: text(),
    client_id: link('clients'),
    site_id: link('sites'),
    meter_id: link('meters'),
    year_from: date(),
    year_to: date(),
    currency: text(),
    budget_hours: real(true),
    closed_at: instant(true),
    ...version,
    ...stamps,
  },
  engagement_meters: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    meter_id: link('meters'),
    ...stamps,
  },
  memberships: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    user_id: link('users', false, 'CASCADE'),
    ...stamps,
  },
  ...intakeTables,
  ...gapFillTables,
  ...billTables,
  ...attachmentTables,
  tariff_choices: {
    ...id,
    engagement_id: { ...link('engagements', false, 'CASCADE'), unique: true },
    schedule_id: text(),
    schedule_text: text(),
    sha256: text(),
    contract: json(),
    history: json(true),
    line_matches: json(),
    remembered: json(),
    tolerance_minor: whole(),
    ...version,
    ...stamps,
  },
  schedules: {
    ...id,
    slug: { ...text(), unique: true },
    made_from: text(true),
    made_by_id: link('users', true),
    put_away_at: instant(true),
    ...version,
    ...stamps,
  },
  schedule_revisions: {
    ...id,
    schedule_id: link('schedules', false, 'CASCADE'),
    number: whole(),
    text: text(),
    sha256: text(),
    note: text(true),
    made_by_id: link('users', true),
    ...stamps,
  },
  schedule_drafts: {
    ...id,
    schedule_slug: text(),
    user_id: link('users', false, 'CASCADE'),
    text: text(),
    base_number: whole(),
    ...stamps,
  },
  ...findingTables,
  motors: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    meter_id: link('meters'),
    position: whole(),
    name: text(),
    drives: text(true),
    plate: json(),
    calendar: json(),
    field_today_a: real(),
    ...version,
    ...stamps,
  },
  ...motorLoadTables,
  ...requestTables,
  plans: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    name: text(),
    spans: json(),
    actions: json(),
    work_cost_minor: whole(),
    yearly_upkeep_minor: whole(),
    economics: json(),
    chosen: flag(false),
    search: json(true),
    ...version,
    ...stamps,
  },
  ...supplyTables,
  jobs: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    kind: text(),
    subject_id: whole(true),
    state: text(),
    done: whole(),
    planned: whole(true),
    unit: text(true),
    result: json(true),
    error: text(true),
    started_by_id: link('users', true),
    ended_at: instant(true),
    ...stamps,
  },
  editions: {
    ...id,
    engagement_id: link('engagements', false, 'CASCADE'),
    plan_id: link('plans', true, 'SET NULL'),
    number: whole(),
    content: json(),
    digest: text(),
    made_by_id: link('users', true),
    shown_at: instant(true),
    ...stamps,
  },
  edition_images: {
    ...id,
    edition_id: link('editions', false, 'CASCADE'),
    name: text(),
    media_type: text(),
    body: bytes(),
    ...stamps,
  },
  letters: {
    ...id,
    engagement_id: link('engagements', true, 'CASCADE'),
    edition_id: link('editions', true, 'CASCADE'),
    user_id: link('users', true),
    kind: text(),
    recipient: text(),
    subject: text(),
    message_id: text(true),
    state: text(),
    error: text(true),
    sent_at: instant(true),
    ...stamps,
  },
  rates: {
    ...id,
    user_id: link('users', false, 'CASCADE'),
    engagement_id: link('engagements', true, 'CASCADE'),
    per_hour_minor: whole(),
    currency: text(),
    from: date(),
    ...version,
    ...stamps,
  },
  hour_entries: {
    ...id,
    engagement_id: link('engagements'),
    user_id: link('users'),
    day: date(),
    minutes: whole(),
    station: text(),
    note: text(),
    billable: flag(true),
    ...version,
    ...stamps,
  },
  trail_rows: {
    ...id,
    at: instant(),
    actor_id: whole(true),
    ip: text(true),
    action: text(),
    subject: text(),
    subject_id: whole(true),
    before: json(true),
    after: json(true),
  },
};

/** Indexes beside those of the foreign keys: each of these leads an index, its own or one of these. */
const indexes: Record<string, string[][]> = {
  sessions: [['expires']],
  ...intakeIndexes,
  ...attachmentIndexes,
  ...findingIndexes,
  ...requestIndexes,
  hour_entries: [['user_id', 'day']],
  trail_rows: [['subject', 'subject_id'], ['actor_id'], ['at']],
};

/** Closed sets that the database itself holds to. SQLite takes a CHECK only when the table is made. */
const checks: Record<string, string[]> = {
  users: ["role IN ('partner','consultant','client')", "(role = 'client') = (client_id IS NOT NULL)"],
  tokens: ["kind IN ('invitation','reset')"],
  ...intakeChecks,
  ...gapFillChecks,
  jobs: ["state IN ('running','done','failed','cancelled')"],
  letters: ["state IN ('sent','failed')"],
  ...billChecks,
  ...attachmentChecks,
  ...findingChecks,
  ...motorLoadChecks,
  ...requestChecks,
  hour_entries: ['minutes > 0', 'minutes <= 1440'],
  engagements: ['year_from < year_to'],
};

async function addChecks(database: QueryInterface, table: string): Promise<void> {
  for (const condition of checks[table] ?? []) {
    for (const event of ['INSERT', 'UPDATE']) {
      const name = `${table}_${event.toLowerCase()}_${checks[table]?.indexOf(condition)}`;
      const onNew = condition.replace(
        /\b(role|source|when_missing|client_id|kind|state|method|family|way|media_type|period_from|period_to|minutes|year_from|year_to)\b/g,
        'NEW.$1',
      );
      await database.sequelize.query(
        `CREATE TRIGGER ${name} BEFORE ${event} ON ${table} WHEN NOT (${onNew})
         BEGIN SELECT RAISE(ABORT, '${table}: ${condition.replaceAll("'", "''")}'); END`,
      );
    }
  }
}

/** Foreign keys that lead no other index yet. */
function keysToIndex(table: string, columns: Columns): string[] {
  const led = new Set(indexes[table]?.map(([first]) => first));
  return Object.keys(columns).filter((name) => {
    const { references, unique } = columns[name] ?? {};
    return references && !unique && !led.has(name);
  });
}

/** Makes the schema. */
export async function up(database: QueryInterface): Promise<void> {
  for (const [name, columns] of Object.entries(tables)) {
    await database.createTable(name, columns);
    const keys = keysToIndex(name, columns).map((column) => [column]);
    for (const fields of [...keys, ...(indexes[name] ?? [])]) await database.addIndex(name, fields);
    await addChecks(database, name);
  }
  await database.addIndex('engagement_meters', ['engagement_id', 'meter_id'], { unique: true, name: 'meters_once' });
  await database.addIndex('memberships', ['engagement_id', 'user_id'], { unique: true, name: 'memberships_once' });
  await database.addIndex('line_memories', ['utility', 'label'], { unique: true, name: 'line_memories_once' });
  await database.addIndex('findings', ['engagement_id', 'period_from', 'period_to', 'line_key', 'family'], {
    unique: true,
    name: 'findings_once',
  });
  await database.addIndex('editions', ['engagement_id', 'number'], { unique: true, name: 'editions_number' });
  await database.addIndex('schedule_revisions', ['schedule_id', 'number'], { unique: true, name: 'revisions_number' });
  await database.addIndex('schedule_drafts', ['schedule_slug', 'user_id'], { unique: true, name: 'drafts_once' });
  for (const [table, columns, name] of requestUniques) await database.addIndex(table, columns, { unique: true, name });
}

/** Takes it away again. */
export async function down(database: QueryInterface): Promise<void> {
  for (const name of Object.keys(tables).reverse()) await database.dropTable(name);
}
