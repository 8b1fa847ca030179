import { readdirSync } from 'node:fs';
import { request } from 'node:http';
import path from 'node:path';
import { beforeAll, describe, expect, inject, it } from 'vitest';
import { signInCookie } from '../setup/sign-in';

const origin = inject('origin');
const foreign = 'https://elsewhere.example';
let tom: string;

beforeAll(async () => {
  tom = await signInCookie(origin, 'tom@calder-vane.example');
});

const errorOf = async (response: Response) =>
  ((await response.json()) as { error: { code: string; message: string; fields?: Record<string, string[]> } }).error;

function post(address: string, body: string, headers: Record<string, string> = {}): Promise<Response> {
  const json = { origin, cookie: tom, 'content-type': 'application/json', ...headers };
  return fetch(`${origin}${address}`, { method: 'POST', headers: json, body, redirect: 'manual' });
}

describe('origin', () => {
  it.each([
    ['JSON', '/api/engagements/KG-02/hours', 'application/json'],
    ['a form', '/sign-out', 'application/x-www-form-urlencoded'],
    ['plain text', '/api/engagements/KG-02/hours', 'text/plain'],
  ])('refuses %s that comes from another site', async (_, address, type) => {
    const response = await post(address, '{}', { origin: foreign, 'content-type': type });
    expect(response.status).toBe(403);
    expect((await errorOf(response)).code).toBe('origin');
  });

  it('refuses a change that names no origin', async () => {
    const { origin: _origin, ...headers } = { origin, cookie: tom, 'content-type': 'application/json' };
    const response = await fetch(`${origin}/api/engagements/KG-02/hours`, { method: 'POST', headers, body: '{}' });
    expect(response.status).toBe(403);
  });

  it('refuses an upload from another site and keeps nothing of it', async () => {
    const drawer = path.join(inject('dataDir'), 'originals');
    const before = readdirSync(drawer).length;
    const address = `${origin}/api/engagements/KG-02/uploads?kind=bills&fileName=x.csv`;
    const response = await fetch(address, {
      method: 'PUT',
      headers: { origin: foreign, cookie: tom },
      body: 'a,b\n1,2\n',
    });
    expect(response.status).toBe(403);
    expect(readdirSync(drawer).length).toBe(before);
  });
});

describe('session', () => {
  it('gets a new id at sign-in, and a cookie scripts cannot read', async () => {
    const body = new URLSearchParams({ email: 'tom@calder-vane.example', password: 'copper and verdigris' });
    const response = await fetch(`${origin}/sign-in`, {
      method: 'POST',
      body,
      headers: { origin, cookie: tom },
      redirect: 'manual',
    });
    const cookie = response.headers.getSetCookie().find((one) => one.startsWith('counterlag.sid=')) ?? '';
    expect(cookie.split(';')[0]).not.toBe(tom);
    expect(cookie).toMatch(/HttpOnly/);
    expect(cookie).toMatch(/SameSite=Lax/);
    tom = cookie.split(';')[0] as string;
  });

  it('sends nobody away to another site after sign-in', async () => {
    for (const next of ['//elsewhere.example', 'https://elsewhere.example/', '/\\elsewhere.example']) {
      const body = new URLSearchParams({ email: 'tom@calder-vane.example', password: 'copper and verdigris', next });
      const response = await fetch(`${origin}/sign-in?next=${encodeURIComponent(next)}`, {
        method: 'POST',
        body,
        headers: { origin },
        redirect: 'manual',
      });
      const goal = new URL(response.headers.get('location') ?? '', origin);
      expect(`${next} leads to ${goal.origin}`).toBe(`${next} leads to ${origin}`);
    }
  });

  it('gives no cookie to people who only look', async () => {
    const response = await fetch(`${origin}/sign-in`);
    expect(response.headers.getSetCookie()).toEqual([]);
  });

  it('locks an account after eight wrong passwords, in the same words for one that does not exist', async () => {
    const tries = async (email: string) => {
      const words: string[] = [];
      for (let count = 0; count < 9; count++) {
        const body = new URLSearchParams({ email, password: `wrong ${count}` });
        const response = await fetch(`${origin}/sign-in`, {
          method: 'POST',
          body,
          headers: { origin },
          redirect: 'manual',
        });
        const html = (await response.text()).replaceAll(email, 'the e-mail');
        words.push(/(This password does not fit[^<]*|Too many wrong[^<]*)/.exec(html)?.[1] ?? 'no words');
      }
      return words;
    };
    const known = await tries('noor@calder-vane.example');
    expect(known[0]).toMatch(/does not fit/);
    expect(known[8]).toMatch(/Too many wrong passwords/);
    expect(await tries('nobody@calder-vane.example')).toEqual(known);
  });
});

describe('limits', () => {
  it('refuses a form of more than 1 MiB before it is read', async () => {
    const response = await post('/api/engagements/KG-02/hours', JSON.stringify({ note: 'x'.repeat(1_200_000) }));
    expect(response.status).toBe(413);
    expect((await errorOf(response)).message).toMatch(/larger than 1 MiB/);
  });

  it('refuses a body that does not say its length', async () => {
    const status = await new Promise<number | undefined>((resolve, reject) => {
      const headers = { origin, cookie: tom, 'content-type': 'application/json', 'transfer-encoding': 'chunked' };
      const call = request(`${origin}/api/engagements/KG-02/hours`, { method: 'POST', headers }, (answer) => {
        answer.resume();
        resolve(answer.statusCode);
      });
      call.on('error', reject);
      call.end('{}');
    });
    expect(status).toBe(411);
  });

  it('names what is wrong with a body that is no JSON', async () => {
    const response = await post('/api/engagements/KG-02/hours', '{not json');
    expect(response.status).toBe(422);
    expect((await errorOf(response)).message).toMatch(/could not be read as JSON/);
  });
});

describe('pages', () => {
  it.each(['/sign-in', '/404', '/nothing-here'])(
    '%s carries a content policy that lets in no foreign or inline script',
    async (address) => {
      const policy =
        (await fetch(`${origin}${address}`, { headers: { cookie: tom } })).headers.get('content-security-policy') ?? '';
      expect(policy).toMatch(/default-src 'self'/);
      expect(policy).toMatch(/frame-ancestors 'none'/);
      expect(policy).toMatch(/object-src 'none'/);
      const scripts = /script-src ([^;]*)/.exec(policy)?.[1] ?? '';
      expect(scripts).toMatch(/'self'/);
      expect(scripts).not.toMatch(/unsafe-inline|unsafe-eval|https?:/);
      expect(policy.match(/frame-ancestors/g)).toHaveLength(1);
    },
  );

  it('of people are kept in no cache and say no more of the server than they must', async () => {
    const response = await fetch(`${origin}/today`, { headers: { cookie: tom } });
    expect(response.headers.get('cache-control')).toMatch(/no-store/);
    expect(response.headers.get('x-powered-by')).toBeNull();
    expect(response.headers.get('x-content-type-options')).toBe('nosniff');
  });

  it('answer an unknown address with the page of what is not there', async () => {
    const response = await fetch(`${origin}/no/such/page`, { headers: { cookie: tom } });
    expect(response.status).toBe(404);
    expect(response.headers.get('content-type')).toMatch(/text\/html/);
  });
});

describe('an address with a NUL sign', () => {
  it.each([
    ['/engagements/%00/bills', 404],
    ['/trail?subject=%00', 404],
    ['/api/engagements/KG-02%00/motors', 404],
  ])('%s is one with nothing behind it', async (address, status) => {
    const response = await fetch(`${origin}${address}`, { headers: { cookie: tom }, redirect: 'manual' });
    expect(response.status).toBe(status);
    expect(await response.text()).toContain('nothing at this address');
  });

  it('keeps nothing of an upload sent there', async () => {
    const drawer = path.join(inject('dataDir'), 'originals');
    const before = readdirSync(drawer).length;
    const address = `${origin}/api/engagements/KG-02/uploads?kind=bills&fileName=%00.csv`;
    const response = await fetch(address, { method: 'PUT', headers: { origin, cookie: tom }, body: 'a,b\n1,2\n' });
    expect(response.status).toBe(404);
    expect(readdirSync(drawer).length).toBe(before);
  });
});
