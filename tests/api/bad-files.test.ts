import { createHash } from 'node:crypto';
import { existsSync, readdirSync } from 'node:fs';
import path from 'node:path';
import { beforeAll, describe, expect, inject, it } from 'vitest';
import { kestrelMeterFile } from '../../db/seeders/demo/kestrel-year';
import { harrowBills } from '../../db/seeders/demo/harrow';
import { signInCookie } from '../setup/sign-in';

const origin = inject('origin');
let sana: string;

beforeAll(async () => {
  sana = await signInCookie(origin, 'sana@calder-vane.example');
});

interface Problem {
  message: string;
  where: string;
  remedy: string;
}

interface Answer {
  status: number;
  body: {
    id: number;
    version: number;
    state: string;
    sha256: string;
    problems: Problem[];
    preview: { problems: Problem[] } | null;
    error?: { message: string };
  };
}

async function send(kind: 'intervals' | 'bills', fileName: string, bytes: Uint8Array): Promise<Answer> {
  const address = `${origin}/api/engagements/HS-01/uploads?kind=${kind}&fileName=${encodeURIComponent(fileName)}`;
  const response = await fetch(address, { method: 'PUT', headers: { origin, cookie: sana }, body: Buffer.from(bytes) });
  return { status: response.status, body: (await response.json()) as Answer['body'] };
}

async function step(id: number, verb: string, version: number) {
  const headers = { origin, cookie: sana, 'content-type': 'application/json' };
  const response = await fetch(`${origin}/api/intakes/${id}/${verb}`, {
    method: 'POST',
    headers,
    body: JSON.stringify({ version }),
  });
  return { status: response.status, body: (await response.json()) as Answer['body'] };
}

const png = Uint8Array.from([
  0x89,
  0x50,
  0x4e,
  0x47,
  0x0d,
  0x0a,
  0x1a,
  0x0a,
  ...Array.from({ length: 400 }, (_, index) => index % 251),
]);
const text = (words: string) => new TextEncoder().encode(words);

describe('files that cannot be used', () => {
  it('an empty one is refused and leaves nothing in the drawer', async () => {
    const drawer = path.join(inject('dataDir'), 'originals');
    const before = readdirSync(drawer).length;
    const { status, body } = await send('intervals', 'empty.csv', new Uint8Array());
    expect(status).toBe(422);
    expect(body.error?.message).toMatch(/empty: it has no bytes/);
    expect(readdirSync(drawer).length).toBe(before);
  });

  it.each([
    ['a picture', 'intervals', 'photo.csv', png],
    ['a spreadsheet cut short', 'bills', 'bills.xlsx', harrowBills().bytes.slice(0, 3000)],
    ['a letter', 'bills', 'letter.txt', text('Dear client,\nplease find enclosed nothing at all.\n')],
    ['readings where bills are asked', 'bills', 'readings.csv', kestrelMeterFile().bytes.slice(0, 20_000)],
  ] as const)('%s cannot be kept, and says what, where and what to do', async (_, kind, fileName, bytes) => {
    const { status, body } = await send(kind, fileName, bytes);
    expect(status).toBe(201);
    // What a corrected map might still read stays open for correction; what cannot be opened at all is refused.
    expect(body.state).toBe(body.preview ? 'read' : 'refused');
    const problems = [...body.problems, ...(body.preview?.problems ?? [])];
    for (const problem of problems) {
      expect(problem.message).not.toBe('');
      expect(problem.where).not.toBe('');
      expect(problem.remedy).not.toBe('');
    }
    expect(problems.length).toBeGreaterThan(0);
    expect(body.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    expect(existsSync(path.join(inject('dataDir'), 'originals', body.sha256))).toBe(true);
    expect((await step(body.id, 'keep', body.version)).status).toBeGreaterThanOrEqual(409);
  });

  it('bills that overlap kept ones are refused, naming both periods, and nothing of them is kept', async () => {
    const { bytes } = harrowBills();
    const again = await send('bills', 'again.xlsx', bytes);
    expect(again.body.state).toBe('read');
    const kept = await step(again.body.id, 'keep', again.body.version);
    expect(kept.status).toBe(409);
    expect(kept.body.error?.message).toMatch(/Jun 2026|2026-06/);
  });

  it('a name that climbs out of the folder stays a name', async () => {
    const { status, body } = await send('intervals', '../../../outside.csv', text('nothing\n'));
    expect(status).toBe(201);
    expect(body.sha256).toMatch(/^[0-9a-f]{64}$/);
    expect(existsSync(path.resolve(inject('dataDir'), '..', 'outside.csv'))).toBe(false);
  });
});
