import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { hasShared, sharedFile } from '../setup/shared';
import { openWindow, readText, signIn, startBrowser } from './browser';

const origin = inject('origin');
const code = 'TB-01';
let browser: Browser;
let page: Page;

beforeAll(async () => {
  browser = await startBrowser();
  ({ page } = await openWindow(browser, origin));
  await signIn(page, 'tom@calder-vane.example');
});

afterAll(async () => {
  await browser?.close();
});

async function beginEngagement(): Promise<void> {
  await page.goto('/engagements/new');
  await page.waitForLoadState('networkidle');
  await page.getByLabel('Client', { exact: true }).selectOption({ label: 'A new client' });
  await page.getByLabel('Name of the client').fill('Teller Basin Steel');
  await page.getByLabel('Currency').fill('KRW');
  await page.getByLabel('Name of the site').fill('Works 1');
  await page.getByLabel('Time zone').fill('Asia/Seoul');
  await page.getByLabel('Number of the meter').fill('TB 100');
  await page.getByLabel('First day of the year').fill('2018-01-01');
  await page.getByLabel('Code').fill(code);
  await page.getByRole('button', { name: 'Begin the engagement' }).click();
  await page.waitForURL(new RegExp(`/engagements/${code}`));
}

const checked = () => readText(page.locator('#check'));

// Figures: "Steel Industry Energy Consumption", UCI Machine Learning Repository, dataset 851 (CC BY 4.0), as the README
// beside the file states them from a separate program.
describe.skipIf(!hasShared)('the steel plant’s year, brought in as a person does (needs ../shared)', () => {
  it('is matched by itself, checked with its totals and peak, and can be corrected', async () => {
    await beginEngagement();
    await page.goto(`/engagements/${code}/intervals`);
    await page.waitForLoadState('networkidle');
    await page.locator('input[type=file]').setInputFiles(sharedFile('data', 'steel-plant', 'steel-plant-2018.csv'));
    await page.waitForURL(/\/intake\/\d+/);
    await page.waitForLoadState('networkidle');
    expect(await page.getByLabel('Usage_kWh, taken as').inputValue()).toBe('active');
    expect(await page.getByLabel('CO2(tCO2), taken as').inputValue()).toBe('ignore');
    const check = await checked();
    for (const figure of ['35,040', '959,637', '456,760', '135,638', '628.72 kW']) expect(check).toContain(figure);
    expect(check).toMatch(/22 Nov 2018, 09:30/);

    await page.getByLabel('Usage_kWh, taken as').selectOption('ignore');
    await page.locator('#check').getByText('not in the file').waitFor();
    await page.getByLabel('Usage_kWh, taken as').selectOption('active');
    await page.waitForFunction(() => /959,637/.test(document.querySelector('#check')?.textContent ?? ''));
  });

  it('is kept whole', async () => {
    const confirm = page.getByRole('button', { name: /^Confirm/ });
    while ((await confirm.count()) > 0 && (await confirm.first().isVisible())) {
      await confirm.first().click();
      await page.waitForLoadState('networkidle');
    }
    await page.getByRole('button', { name: 'Keep 35,040 readings' }).click();
    await page.getByRole('link', { name: /^See the readings/ }).click();
    await page.waitForLoadState('networkidle');
    expect(await readText(page.getByRole('heading', { level: 1 }))).toMatch(
      /One year of 15-minute readings, all of it present/,
    );
    expect(await readText(page.locator('main'))).toMatch(/959,637/);
  });
});
