import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { simpleParser, type ParsedMail } from 'mailparser';
import type { Browser, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { openWindow, readText, signIn, startBrowser, type PersonPage } from './browser';

const origin = inject('origin');
const code = 'HS-01';
const client = 'jon@harrow-sound.example';
/** Two bills the demo lacks; each total is the sum of its two charges. */
const bills = `From,To,kWh,Max kW,Energy charge USD,Demand charge USD,Total USD
2025-11-01,2025-11-30,205000,490,12054.00,7448.00,19502.00
2025-12-01,2025-12-31,198000,481,11642.40,7311.20,18953.60
`;
/** One pixel: the smallest picture a browser shows. */
const photo = Buffer.from(
  'iVBORw0KGgoAAAANSUhEUgAAAAEAAAABCAYAAAAfFcSJAAAADUlEQVR42mNkYPhfDwAChwGA60e6kgAAAABJRU5ErkJggg==',
  'base64',
);

let browser: Browser;
let sana: PersonPage;
let jon: PersonPage;
let link = '';

beforeAll(async () => {
  browser = await startBrowser();
  sana = await openWindow(browser, origin);
  jon = await openWindow(browser, origin, { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true });
});
afterAll(async () => {
  await browser?.close();
});

const sentFile = (thing: Locator, name: string) => thing.locator('.sent-files .name').filter({ hasText: name });
const heading = (page: Page) => readText(page.getByRole('heading', { level: 1 }));

async function lastMailTo(address: string, subject: RegExp): Promise<ParsedMail> {
  const folder = path.join(inject('dataDir'), 'mail');
  const deadline = Date.now() + 15_000;
  while (Date.now() < deadline) {
    const files = readdirSync(folder).filter((file) => file.endsWith(`${address}.eml`));
    for (const file of files.sort().reverse()) {
      const mail = await simpleParser(readFileSync(path.join(folder, file)));
      if (subject.test(mail.subject ?? '')) return mail;
    }
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  throw new Error(`no mail ${subject} to ${address} was caught`);
}

describe('a request, from asking to keeping', () => {
  it('1: the consultant finds what is missing drafted, and sends it', async () => {
    const { page } = sana;
    await signIn(page, 'sana@calder-vane.example');
    await page.goto(`/engagements/${code}/bills`);
    await page.waitForLoadState('networkidle');
    await page.getByRole('link', { name: 'Ask the client for it' }).click();
    await page.waitForLoadState('networkidle');
    expect(await heading(page)).toBe('Three things are missing that Harrow Sound Cold Store may have.');
    // Of the three drafted things that of this station is chosen; the plates are added by hand.
    const boxes = page.getByRole('checkbox', { name: /^Ask for thing/ });
    expect(await boxes.evaluateAll((all) => all.map((box) => (box as HTMLInputElement).checked))).toEqual([
      true,
      false,
      false,
    ]);
    expect(await page.getByLabel('First day').inputValue()).toBe('2025-11-01');
    // May is billed in two invoices, the months from June on by the workbook.
    expect(await page.getByLabel('Last day').inputValue()).toBe('2026-04-30');
    await boxes.nth(2).check();
    await page.getByLabel('Note for the practice alone').fill('Jon is on leave from the 20th.');
    expect(await readText(page.locator('.mail-preview'))).toContain('two things');
    await page.getByRole('button', { name: 'Send the request' }).click();
    await page.waitForURL(/\/requests\/1$/);
    expect(await heading(page)).toBe('None of two things is answered yet.');
  });

  it('2: the client gets the mail and comes in by its link, on a telephone', async () => {
    const mail = await lastMailTo(client, /^Pier 4: two things are needed by/);
    expect(mail.text).not.toContain('on leave');
    link = /https?:\/\/\S+\/sign-in\?next=\S+/.exec(mail.text ?? '')?.[0] ?? '';
    const { page } = jon;
    await page.goto(link);
    await page.getByLabel('E-mail').fill(client);
    await page.getByLabel('Password', { exact: true }).fill('copper and verdigris');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await page.waitForURL(`**/client/${code}/requests/1`);
    await page.waitForLoadState('networkidle');
    expect(await heading(page)).toMatch(/^Two things are needed by /);
    expect(await page.content()).not.toContain('on leave');
    const wide = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
    expect(wide).toBeLessThanOrEqual(0);
  });

  it('3: the client sends a table and a photo, removes one again, and is done', async () => {
    const { page } = jon;
    const first = page.locator('#thing-1');
    await first
      .locator('input[type=file]')
      .first()
      .setInputFiles([
        { name: 'pier4-winter.csv', mimeType: 'text/csv', buffer: Buffer.from(bills) },
        { name: 'wrong-one.csv', mimeType: 'text/csv', buffer: Buffer.from('a,b\n1,2\n') },
      ]);
    await sentFile(first, 'wrong-one.csv').waitFor();
    await first.getByRole('button', { name: /^Remove wrong-one.csv/ }).click();
    await first.getByRole('button', { name: 'Remove it' }).click();
    await sentFile(first, 'wrong-one.csv').waitFor({ state: 'detached' });
    const second = page.locator('#thing-2');
    const camera = second.locator('input[capture]');
    expect(await camera.getAttribute('accept')).toBe('image/*');
    const program = { name: 'setup.exe', mimeType: 'application/octet-stream', buffer: Buffer.from('MZ\x90\0\x03\0') };
    await second.locator('input[type=file]').first().setInputFiles(program);
    await second.getByText('setup.exe was not sent.').waitFor();
    await camera.setInputFiles({ name: 'IMG_0412.png', mimeType: 'image/png', buffer: photo });
    await sentFile(second, 'IMG_0412.png').waitFor();
    await page.getByRole('heading', { level: 1, name: /You have answered everything/ }).waitFor();
    await page.reload();
    expect(await page.locator('.sent-files > li').count()).toBe(2);
  });

  it('4: the consultant sees both, takes the table into intake and keeps it', async () => {
    const { page } = sana;
    await page.goto('/today');
    await page.getByRole('link', { name: /Look at 2 files of the client for request 1/ }).click();
    await page.waitForURL(/\/requests\/1$/);
    await page.waitForLoadState('networkidle');
    expect(await heading(page)).toMatch(/Two of two things are answered; 2 files wait to be looked at/);
    const picture = page.getByRole('img', { name: /IMG_0412.png/ });
    await picture.scrollIntoViewIfNeeded();
    await page.waitForFunction(() => [...document.images].every((image) => image.complete));
    expect(await picture.evaluate((image) => (image as HTMLImageElement).naturalWidth)).toBe(1);
    await page.locator('#thing-1').getByRole('button', { name: 'Take into intake as bills' }).click();
    await page.waitForURL(/\/intake\/\d+/);
    await page.waitForLoadState('networkidle');
    expect(await readText(page.locator('#source'))).toContain('Jon Tallis sent it');
    const confirmAll = page.getByRole('button', { name: /^Confirm all/ });
    if (await confirmAll.isVisible()) await confirmAll.click();
    const keep = page.getByRole('button', { name: /^Keep 2 bills/ });
    await keep.waitFor();
    await keep.click();
    const kept = /intake\/(\d+)/.exec(page.url())?.[1];
    await page.getByRole('link', { name: /^See the bills/ }).click();
    // Six of the demo, the two of May joined to one, and the two sent.
    expect(await heading(page)).toMatch(/^All eight bills are kept/);
    // Undone again: the other files of tests find the demo as it was.
    const undone = await page.evaluate(async (id) => {
      const { version } = (await (await fetch(`/api/intakes/${id}`)).json()) as { version: number };
      const headers = { 'content-type': 'application/json' };
      return (await fetch(`/api/intakes/${id}/undo`, { method: 'POST', headers, body: JSON.stringify({ version }) }))
        .status;
    }, kept);
    expect(undone).toBe(200);
  });

  it('5: the photo stands beside the form of the motor, and the request is closed', async () => {
    const { page } = sana;
    await page.goto(`/engagements/${code}/requests/1`);
    await page.waitForLoadState('networkidle');
    await page.locator('#thing-2').getByRole('button', { name: 'Lay beside the next motor entered' }).click();
    await page.locator('#thing-2').getByRole('link', { name: 'Enter the motor beside it' }).click();
    await page.waitForURL(/motors\?motor=new/);
    await page.getByRole('img', { name: /IMG_0412.png/ }).waitFor();
    await page.goto(`/engagements/${code}/requests/1`);
    await page.waitForLoadState('networkidle');
    await page.getByRole('button', { name: 'Close the request' }).click();
    await page.getByRole('heading', { level: 1, name: 'Request 1 is closed.' }).waitFor();
    await jon.page.reload();
    expect(await heading(jon.page)).toBe('This request is done. Thank you.');
    expect(await jon.page.locator('input[type=file]').count()).toBe(0);
  });

  it('left nothing in anybody’s console but the refused file', () => {
    const serious = [sana, jon].flatMap(({ complaints }) => complaints).filter((one) => !/status of 422/.test(one));
    expect(serious).toEqual([]);
  });
});
