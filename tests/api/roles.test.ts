import path from 'node:path';
import sqlite3 from 'sqlite3';
import { beforeAll, describe, expect, inject, it } from 'vitest';
import { allRoutes } from '../setup/routes';
import { signInCookie } from '../setup/sign-in';
import { roleTable, type Outcome } from './role-table';

const origin = inject('origin');
const people = [
  ['nobody', null],
  ['client of another firm', 'jon@harrow-sound.example'],
  ['client', 'mira@kestrel-gap.example'],
  ['consultant not a member', 'sana@calder-vane.example'],
  ['consultant', 'tom@calder-vane.example'],
  ['partner', 'ilse@calder-vane.example'],
] as const;

const cookies = new Map<string, string | null>();
const ids = new Map<string, string>();

function firstValue(database: sqlite3.Database, sql: string): Promise<string> {
  return new Promise((resolve, reject) => {
    database.get(sql, (error, row: { value: number | string } | undefined) => {
      if (error || !row) reject(error ?? new Error(`nothing found by: ${sql}`));
      else resolve(String(row.value));
    });
  });
}

/** A row of the first client's engagement for each kind of address. */
const rowSql: Record<string, string> = {
  attachments:
    "SELECT a.id value FROM attachments a JOIN engagements e ON e.id = a.engagement_id WHERE e.code = 'KG-02'",
  bills: "SELECT b.id value FROM bills b JOIN engagements e ON e.id = b.engagement_id WHERE e.code = 'KG-02'",
  clients: "SELECT client_id value FROM engagements WHERE code = 'KG-02'",
  editions: 'SELECT id value FROM editions',
  findings: 'SELECT id value FROM findings',
  hours: "SELECT h.id value FROM hour_entries h JOIN users u ON u.id = h.user_id WHERE u.email LIKE 'tom@%'",
  intake:
    "SELECT i.id value FROM intakes i JOIN engagements e ON e.id = i.engagement_id WHERE e.code = 'KG-02' AND i.kind = 'intervals'",
  jobs: 'SELECT id value FROM jobs',
  members: "SELECT id value FROM users WHERE email LIKE 'sana@%'",
  meters: "SELECT meter_id value FROM engagements WHERE code = 'KG-02'",
  letters: 'SELECT number value FROM utility_letters',
  motors: 'SELECT id value FROM motors',
  people: "SELECT id value FROM users WHERE email LIKE 'sana@%'",
  plans: 'SELECT id value FROM plans',
  requests:
    "SELECT r.number value FROM data_requests r JOIN engagements e ON e.id = r.engagement_id WHERE e.code = 'KG-02'",
  files:
    "SELECT f.key value FROM request_files f JOIN request_items i ON i.id = f.item_id JOIN data_requests r ON r.id = i.request_id JOIN engagements e ON e.id = r.engagement_id WHERE e.code = 'KG-02'",
  rates: "SELECT r.id value FROM rates r JOIN users u ON u.id = r.user_id WHERE u.email LIKE 'sana@%'",
};

beforeAll(async () => {
  for (const [who, email] of people) cookies.set(who, email && (await signInCookie(origin, email)));
  const database = new sqlite3.Database(path.join(inject('dataDir'), 'counterlag.sqlite'), sqlite3.OPEN_READONLY);
  for (const [kind, sql] of Object.entries(rowSql)) ids.set(kind, await firstValue(database, sql));
  ids.set('intakes', ids.get('intake') ?? '');
  ids.set('schedules', 'ostrander-lp4');
  ids.set('forms', 'kvarh-share-of-kwh');
  ids.set('reports', '1');
  ids.set('report', '1');
});

function addressOf(pattern: string): string {
  return pattern
    .replace('[code]', 'KG-02')
    .replace(/(\w+)\/\[(id|number)\]/, (_, kind: string) => `${kind}/${ids.get(kind) ?? `no-id-for-${kind}`}`)
    .replace('[position]', '1')
    .replace('[key]', ids.get('files') ?? 'no-key')
    .replace('[token]', 'a-token-nobody-was-given');
}

async function ask(route: string, cookie: string | null): Promise<Response> {
  const [method, pattern] = route.split(' ') as [string, string];
  const upload = pattern.endsWith('/uploads') || (route.startsWith('PUT') && pattern.endsWith('/attachments'));
  const address = `${origin}${addressOf(pattern)}${upload ? '?kind=bills&fileName=probe.txt' : ''}`;
  const isForm = method === 'POST' && !pattern.startsWith('/api/');
  const body =
    method === 'GET' ? undefined : isForm ? new URLSearchParams({ probe: '1' }) : upload ? 'probe' : '{"probe":1}';
  const headers: Record<string, string> = { origin, ...(cookie ? { cookie } : {}) };
  if (body && !isForm) headers['content-type'] = 'application/json';
  const response = await fetch(address, { method, headers, body, redirect: 'manual' });
  await response.body?.cancel();
  return response;
}

/** What an answer means for access. */
function outcomeOf(response: Response): Outcome {
  const { status } = response;
  const sentToSignIn = status === 303 && (response.headers.get('location') ?? '').startsWith('/sign-in');
  if (status === 401 || sentToSignIn) return 'sign in';
  if (status === 403) return 'forbidden';
  if (status === 404) return 'not found';
  return status >= 500 ? 'broken' : 'reached';
}

describe('every route and role', () => {
  it('has a row for every route, and no row without one', () => {
    expect(Object.keys(roleTable).sort()).toEqual(allRoutes());
  });

  // Signing out ends the session the other rows need, so it comes last.
  const routes = Object.keys(roleTable).sort(
    (a, b) => Number(a.endsWith('/sign-out')) - Number(b.endsWith('/sign-out')),
  );
  it.each(routes)('%s', async (route) => {
    const found: Record<string, Outcome> = {};
    for (const [who] of people) found[who] = outcomeOf(await ask(route, cookies.get(who) ?? null));
    const expected = Object.fromEntries(people.map(([who], index) => [who, roleTable[route]?.[index]]));
    expect(found).toEqual(expected);
  });
});
