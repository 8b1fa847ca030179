import { beforeAll, describe, expect, inject, it } from 'vitest';
import type { ClientRequestView } from '@/schemas/request';
import { signInCookie } from '../setup/sign-in';

const origin = inject('origin');
const place = `${origin}/api/engagements/KG-02/requests/1/items/3/uploads`;
const csv = 'From,To,kWh\n2026-11-01,2026-12-01,812345\n';
let mira = '';

beforeAll(async () => {
  mira = await signInCookie(origin, 'mira@kestrel-gap.example');
});

const put = (cookie: string | null, body: RequestInit['body'], query = '?fileName=november.csv', address = place) =>
  fetch(`${address}${query}`, { method: 'PUT', body, headers: { origin, ...(cookie ? { cookie } : {}) } });
const codeOf = async (response: Response) => {
  const { error } = (await response.json()) as { error?: { code: string } };
  return [response.status, error?.code];
};

describe('PUT of a file for a request', () => {
  it('asks nobody in without signing in', async () => {
    expect(await codeOf(await put(null, csv))).toEqual([401, 'sign-in']);
  });

  it('knows nothing of it for another client, of another number or place', async () => {
    const jon = await signInCookie(origin, 'jon@harrow-sound.example');
    expect(await codeOf(await put(jon, csv))).toEqual([404, 'not-found']);
    for (const address of [place.replace('items/3', 'items/9'), place.replace('requests/1', 'requests/99')])
      expect(await codeOf(await put(mira, csv, undefined, address))).toEqual([404, 'not-found']);
  });

  it('is no way in for the practice', async () => {
    const tom = await signInCookie(origin, 'tom@calder-vane.example');
    expect(await codeOf(await put(tom, csv))).toEqual([403, 'forbidden']);
  });

  it('refuses another site, a missing name, an empty file and what is not taken', async () => {
    const foreign = await fetch(`${place}?fileName=a.csv`, {
      method: 'PUT',
      body: csv,
      headers: { origin: 'https://elsewhere.example', cookie: mira },
    });
    expect(foreign.status).toBe(403);
    expect(await codeOf(await put(mira, csv, ''))).toEqual([422, 'invalid']);
    expect(await codeOf(await put(mira, ''))).toEqual([422, 'invalid']);
    expect(await codeOf(await put(mira, Buffer.from('MZ\x90\0\x03\0\0')))).toEqual([422, 'invalid']);
    expect(await codeOf(await put(mira, '<!doctype html><p>hello'))).toEqual([422, 'invalid']);
  });

  it('takes a file, shows it to its sender, and hands it out to nobody else of the client’s side', async () => {
    const response = await put(mira, csv);
    expect(response.status).toBe(201);
    const request = (await response.json()) as ClientRequestView;
    const file = request.items[2]?.files.at(-1);
    expect(file).toMatchObject({ fileName: 'november.csv', isMine: true, mayRemove: true });
    const address = `${origin}/api/engagements/KG-02/requests/1/files/${file?.key}`;
    const back = await fetch(address, { headers: { cookie: mira } });
    expect(back.headers.get('content-disposition')).toMatch(/^attachment;/);
    expect(back.headers.get('x-content-type-options')).toBe('nosniff');
    expect(await back.text()).toBe(csv);
    const jon = await signInCookie(origin, 'jon@harrow-sound.example');
    expect((await fetch(address, { headers: { cookie: jon } })).status).toBe(404);
    const removed = await fetch(address, {
      method: 'DELETE',
      body: JSON.stringify({ version: file?.version }),
      headers: { origin, cookie: mira, 'content-type': 'application/json' },
    });
    expect(removed.status).toBe(200);
    expect((await fetch(address, { headers: { cookie: mira } })).status).toBe(404);
  });
});
