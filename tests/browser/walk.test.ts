import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { simpleParser, type ParsedMail } from 'mailparser';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { kestrelBillsFile, kestrelMeterFile } from '../../db/seeders/demo/kestrel-year';
import { earlierAdjustedKw, kestrel, kestrelMotors } from '../../db/seeders/demo/scenario';
import type { MotorInput } from '../../src/schemas/motor';
import { openWindow, readText, signIn, startBrowser, type PersonPage } from './browser';

const origin = inject('origin');
const code = 'FP-01';
const station = (name: string) => `/engagements/${code}/${name}`;
const reader = { name: 'Rhea Stannard', email: 'rhea@fennimore-pulp.example', password: 'four paper machines run' };

let browser: Browser;
let tom: PersonPage;
let ilse: PersonPage;
let rhea: PersonPage;

/** The finding at the head of the page. */
const heading = (page: Page) => readText(page.getByRole('heading', { level: 1 }));

async function pick(page: Page, label: string, words: RegExp): Promise<void> {
  const select = page.getByLabel(label, { exact: true });
  const options = await select.locator('option').allInnerTexts();
  const found = options.find((option) => words.test(option));
  if (found === undefined) throw new Error(`${label} offers ${options.join(', ')}`);
  await select.selectOption({ label: found });
}

/** Brings a file in, looks at the four steps, confirms what is unsure, and keeps it. */
async function bringIn(page: Page, from: string, file: { fileName: string; bytes: Uint8Array }): Promise<void> {
  await page.goto(station(from));
  await page.waitForLoadState('networkidle');
  const upload = { name: file.fileName, mimeType: 'application/octet-stream', buffer: Buffer.from(file.bytes) };
  await page.locator('input[type=file]').setInputFiles(upload);
  await page.waitForURL(/\/intake\/\d+/);
  await page.waitForLoadState('networkidle');
  for (const step of ['Read', 'Match', 'Check', 'Keep'])
    expect(await page.getByRole('heading', { name: step }).count()).toBeGreaterThan(0);
  const confirmAll = page.getByRole('button', { name: /^Confirm all/ });
  if (await confirmAll.isVisible()) await confirmAll.click();
  const keep = page.getByRole('button', { name: /^Keep [\d,]+ (readings|bills)/ });
  await page.waitForFunction(() =>
    [...document.querySelectorAll('button')].some(
      (one) => /^Keep [\d,]+ /.test(one.textContent ?? '') && one.ariaDisabled !== 'true',
    ),
  );
  await keep.click();
  await page.getByRole('link', { name: /^See the/ }).waitFor();
}

async function enterMotor(page: Page, motor: MotorInput): Promise<void> {
  const { plate, calendar } = motor;
  await page.goto(station('motors'));
  await page
    .getByRole('link', { name: /Add (a|the first) motor/ })
    .first()
    .click();
  await page.waitForLoadState('networkidle');
  const numbers: [string, number | undefined][] = [
    ['Rated output', plate.output],
    ['Rated voltage', plate.voltageV],
    ['Rated armature current', plate.currentA],
    ['Rated power factor, leading', plate.powerFactor],
    ['Efficiency', plate.efficiencyPercent],
    ['Frequency', plate.frequencyHz],
    ['Speed', plate.speedRpm],
    ['Rated field current', plate.fieldCurrentA],
    ['Rated field voltage', plate.fieldVoltageV],
    ['Xd', plate.xdPu],
    ['Reserve', plate.limits.reservePercent],
    ['Field current today', motor.fieldTodayA],
    ['From', calendar.rules[0]?.fromHour],
    ['To', calendar.rules[0]?.toHour],
    ['Shaft load', calendar.rules[0]?.load],
  ];
  await page.getByLabel('Name', { exact: true }).fill(motor.name);
  await page.getByLabel('Drives').fill(motor.drives ?? '');
  for (const [label, value] of numbers)
    if (value !== undefined) await page.getByLabel(label, { exact: true }).first().fill(String(value));
  for (const day of ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'] as const) {
    await page
      .getByLabel(day, { exact: true })
      .first()
      .setChecked(calendar.rules[0]?.days.includes(day) ?? false);
  }
  await page.getByRole('button', { name: 'Add the motor' }).click();
  await page.waitForURL(/motors#motor-\d+/);
}

async function lastMailTo(address: string): Promise<ParsedMail> {
  const folder = path.join(inject('dataDir'), 'mail');
  const deadline = Date.now() + 15_000;
  while (Date.now() < deadline) {
    const [newest] = readdirSync(folder)
      .filter((file) => file.endsWith(`${address}.eml`))
      .sort()
      .reverse();
    if (newest) return simpleParser(readFileSync(path.join(folder, newest)));
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
  throw new Error(`no mail to ${address} was caught`);
}

beforeAll(async () => {
  browser = await startBrowser();
  [tom, ilse, rhea] = await Promise.all([
    openWindow(browser, origin),
    openWindow(browser, origin),
    openWindow(browser, origin),
  ]);
});

afterAll(async () => {
  await browser?.close();
});

describe('the whole job, as the three people', () => {
  it('1: the consultant signs in, sees Today and begins an engagement', async () => {
    const { page } = tom;
    await signIn(page, 'tom@calder-vane.example');
    expect(new URL(page.url()).pathname).toBe('/today');
    expect(await page.getByText('KG-02').count()).toBeGreaterThan(0);
    await page.getByRole('link', { name: 'New engagement' }).click();
    await page.waitForLoadState('networkidle');
    await pick(page, 'Client', /new client/i);
    await page.getByLabel('Name of the client').fill('Fennimore Pulp');
    await page.getByLabel('Currency').fill('USD');
    await page.getByLabel('Name of the site').fill('Mill B');
    await page.getByLabel('Time zone').fill(kestrel.timeZone);
    await page.getByLabel('Jurisdiction').fill('US-WI');
    await page.getByLabel('Number of the meter').fill('OV 7731-008');
    await page.getByLabel('First day of the year').fill(kestrel.yearFrom);
    await page.getByLabel('Code').fill(code);
    await page.getByRole('button', { name: 'Begin the engagement' }).click();
    await page.waitForURL(new RegExp(`/engagements/${code}`));
    const taps = await page
      .getByRole('navigation', { name: `Stations of ${code}` })
      .getByRole('link')
      .allInnerTexts();
    expect(taps.map((tap) => tap.split('\n')[0])).toEqual([
      'Bills',
      'Intervals',
      'Tariff',
      'Motors',
      'Plans',
      'Report',
      'Proof',
      'Hours',
    ]);
  });

  it('2: a year of readings and twelve bills come in, and can be undone', async () => {
    const { page } = tom;
    const meter = kestrelMeterFile();
    await bringIn(page, 'intervals', meter);
    await page.goto(station('intervals'));
    expect(await heading(page)).toMatch(/One year of 15-minute readings, all of it present/);
    expect(await page.getByText('4,531').count()).toBeGreaterThan(0);
    const scheduleText = readFileSync(`tariffs/${kestrel.scheduleId}.yaml`, 'utf8');
    await bringIn(page, 'bills', await kestrelBillsFile(scheduleText, meter));
    await page.getByRole('button', { name: /^Undo/ }).click();
    await page.getByRole('button', { name: /^Undo/ }).last().click();
    await page.getByRole('button', { name: /^Keep 12 bills again/ }).click();
    await page.getByRole('link', { name: /^See the bills/ }).click();
    expect(await heading(page)).toMatch(/twelve bills/i);
  });

  it('3: every bill is priced beside what was billed, and any line says why', async () => {
    const { page } = tom;
    await page.goto(station('tariff'));
    await page.waitForLoadState('networkidle');
    await pick(page, 'Schedule', /LP-4/);
    await page.getByLabel('Contract demand').fill(String(kestrel.contract.contractKw));
    await page.getByLabel(/^Adjusted demand of earlier months/).fill(earlierAdjustedKw.join(' '));
    await page.getByRole('button', { name: /price/i }).last().click();
    await page.waitForFunction(() => /over-billed/.test(document.querySelector('h1')?.textContent ?? ''));
    expect(await heading(page)).toMatch(/over-billed [\d,.]+ USD in two of twelve bills; the other ten agree/);
    await page.waitForLoadState('networkidle');
    const demand = page.locator('table.ledger button.why-figure').nth(1);
    await demand.click();
    await page.getByText(/^Why /).first().waitFor();
    await page.keyboard.press('Escape');
    expect(await page.locator('.why-row').count()).toBe(0);
  });

  it('4: two motors are entered from their plates, and what is missing is marked assumed', async () => {
    const { page } = tom;
    for (const motor of kestrelMotors) await enterMotor(page, motor);
    expect(await heading(page)).toMatch(
      /M-1 can deliver [\d,]+ kvar at its usual load, M-2 another \d+; today both absorb/,
    );
    expect(await page.locator('.assumed').count()).toBeGreaterThan(3);
    await page.waitForLoadState('networkidle');
    expect(await page.locator('svg[role=img]').count()).toBeGreaterThanOrEqual(4);
  });

  it('5: a search finds the fields, a plan is made of them and chosen', async () => {
    const { page } = tom;
    await page.goto(station('plans'));
    await page.waitForLoadState('networkidle');
    await page.getByRole('button', { name: /Find the best field currents/ }).click();
    await page.getByRole('link', { name: 'Make it a plan' }).click({ timeout: 60_000 });
    await page.waitForLoadState('networkidle');
    await page.getByLabel('Name', { exact: true }).fill('Plan A');
    await page.getByLabel('Work at the motors, once').fill('61,500');
    await page.getByLabel('Upkeep a year').fill('1,800');
    await page.getByText('What the client may move').click();
    await page.getByLabel('Operating hours from', { exact: true }).fill('60');
    await page.getByLabel('Operating hours to', { exact: true }).fill('120');
    await page
      .getByRole('button', { name: /Keep|Price|Save/ })
      .first()
      .click();
    await page.getByRole('button', { name: /Choose Plan A/ }).click();
    await page.getByRole('heading', { level: 1, name: /Plan A saves/ }).waitFor();
    expect(await page.locator('h1').textContent()).toMatch(/Plan A saves [\d,]+\sUSD a year/);
  });

  it('6: the report is frozen as edition 1 and mailed to the client', async () => {
    await signIn(ilse.page, 'ilse@calder-vane.example');
    await ilse.page.goto('/people');
    await ilse.page.waitForLoadState('networkidle');
    await pick(ilse.page, 'As', /person of a client/);
    await pick(ilse.page, 'Client', /Fennimore Pulp/);
    await ilse.page.getByLabel('Name', { exact: true }).fill(reader.name);
    await ilse.page.getByLabel('E-mail', { exact: true }).fill(reader.email);
    await ilse.page.getByLabel('read released editions').check();
    await ilse.page.getByRole('button', { name: 'Make the account and invite' }).click();
    await ilse.page.getByText(/invitation is on its way/).waitFor();

    const { page } = tom;
    await page.goto(station('report'));
    await page.waitForLoadState('networkidle');
    await page.getByRole('button', { name: 'Make edition 1' }).click();
    await page.waitForURL(/\/report\/1$/, { timeout: 60_000 });
    expect(await page.locator('article.leaf').count()).toBe(6);
    expect(await page.locator('article.leaf svg').count()).toBeGreaterThanOrEqual(4);
    const overflowing = await page
      .locator('article.leaf')
      .evaluateAll((leaves) =>
        leaves.filter((leaf) => leaf.scrollHeight > leaf.clientHeight + 1).map((leaf) => leaf.id),
      );
    expect(overflowing).toEqual([]);
    await page.goto(station('report'));
    await page.waitForLoadState('networkidle');
    await page.getByRole('button', { name: 'Mail edition 1' }).click();
    await page.getByText(/on its way to one person/).waitFor();
  });

  it('7: the client comes in by the link of the mail and sees the payback, and nothing of others', async () => {
    const mail = await lastMailTo(reader.email);
    expect(mail.subject).toBe('Power bills of Fennimore Pulp, Mill B: edition 1');
    const pictures = mail.attachments.filter((one) => one.contentType === 'image/png');
    expect(pictures.map((one) => one.cid).sort()).toEqual(['payback', 'payback-dark']);
    expect(pictures.every((one) => one.content.length > 10_000)).toBe(true);
    expect(mail.text).toContain('the work pays for itself in');
    const link = /https?:\/\/\S+\/invitation\/\S+/.exec(mail.text ?? '')?.[0];
    if (!link) throw new Error(`the letter holds no link:\n${mail.text}`);

    const { page } = rhea;
    await page.goto(link);
    await page.getByLabel('New password').fill(reader.password);
    await page.getByLabel('The same again').fill(reader.password);
    await page.getByRole('button', { name: /Set the password/ }).click();
    await page.waitForURL(`**/client/${code}/overview`);
    expect(await heading(page)).toMatch(/motors you already own can cut your power bills by [\d,]+ USD a year/);
    await page.waitForLoadState('networkidle');
    // The payback and what moves it.
    expect(await page.locator('.chart svg[role=img]').count()).toBe(2);
    await page.getByLabel('The plant runs', { exact: true }).fill('80');
    await page.keyboard.press('Enter');
    await page.getByRole('button', { name: 'Back to edition 1' }).waitFor();
    await page
      .getByRole('link', { name: /Bills before and after/ })
      .first()
      .click();
    expect(await page.locator('table.ledger tbody tr').count()).toBeGreaterThanOrEqual(12);
    for (const address of [
      '/client/KG-02/overview',
      `/engagements/${code}/bills`,
      '/engagements/KG-02/bills',
      '/practice',
      '/today',
    ]) {
      const response = await page.goto(address);
      expect(`${address} ${response?.status()}`).toBe(`${address} 404`);
    }
  });

  it('8: hours are logged, and the partner sees the work in progress at the agreed rates', async () => {
    const { page } = tom;
    await page.goto(station('hours'));
    await page.waitForLoadState('networkidle');
    await page.getByLabel('Time', { exact: true }).fill('1:45');
    await pick(page, 'Station', /Report/);
    await page.getByLabel('What you did').fill('Edition 1 made and mailed');
    await page.getByRole('button', { name: 'Write hours' }).click();
    await page.getByText('Edition 1 made and mailed').waitFor();
    await ilse.page.goto('/practice');
    const row = ilse.page.getByRole('row', { name: /FP-01/ });
    // By hand: 1.75 h at 145.00 USD an hour, the rate agreed in the demo, are 253.75 USD.
    expect(await row.innerText()).toContain('253.75');
  });

  it('left nothing in anybody’s console but the pages that are not there', () => {
    const serious = [tom, ilse, rhea]
      .flatMap(({ complaints }) => complaints)
      .filter((one) => !/status of 404/.test(one));
    expect(serious).toEqual([]);
  });
});
