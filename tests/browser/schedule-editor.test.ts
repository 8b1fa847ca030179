import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { openWindow, readText, signIn, startBrowser } from './browser';

const origin = inject('origin');
let browser: Browser;

beforeAll(async () => {
  browser = await startBrowser();
});

afterAll(async () => {
  await browser?.close();
});

const sheetOf = (id: string, formula: string) => `schedule: ${id}
title: Harbour supply
currency: USD
timeZone: America/Chicago
source: { publisher: Harbour Light, title: Sheet 7, date: 2026-01-01, status: invented }
inForce: 2025-01-01
demandWindow: 15 min
straddle: days
quantities:
  kwh: { sum: kwh }
  maxKw: { highest: kw }
  billedKw: { formula: ${formula}, unit: kW }
charges:
  energy: { per: kwh, rate: 0.05, group: energy }
  demand: { per: billedKw, rate: 10.00, group: demand }
examples:
  - title: By hand
    from: 2026-01-01
    to: 2026-02-01
    quantities: { kwh: 100000, maxKw: 600 }
    expect: { energy: 5000.00, demand: 6000.00, total: 11000.00 }
`;

/** Puts a text in place of all there is. */
async function write(page: Page, text: string): Promise<void> {
  await page.getByRole('textbox', { name: /^Text of/ }).focus();
  await page.keyboard.press('Control+a');
  await page.keyboard.insertText(text);
}

const option = (page: Page, word: string) => page.getByRole('option', { name: new RegExp(`^${word}`) });

const heading = (page: Page) => page.getByRole('heading', { level: 1 });

describe('a schedule of one\u2019s own', () => {
  it('is begun from a form, written with errors shown and put right, and kept as a new text', async () => {
    const { page, complaints } = await openWindow(browser, origin);
    await signIn(page, 'tom@calder-vane.example');
    await page.goto('/schedules/new?from=form:kvarh-share-of-kwh');
    await page.waitForLoadState('networkidle');
    await page.getByLabel('Title').fill('Harbour supply, large');
    expect(await page.getByLabel('Id', { exact: true }).inputValue()).toBe('harbour-supply-large');
    await page.getByRole('button', { name: 'Begin and write' }).click();
    await page.waitForURL('**/schedules/harbour-supply-large/edit');
    await page.getByText('Nothing is changed yet').waitFor();

    await write(page, sheetOf('harbour-supply-large', 'max(maxKW; 500)'));
    await page.getByText('nothing is called "maxKW".').first().waitFor();
    expect(await readText(heading(page))).toContain('One error stops the price: line 12');
    await page.keyboard.press('F4');
    await heading(page).getByText('can be kept as revision 2').waitFor();

    // The bill worked by hand guards the text: a wrong digit is refused before it is kept.
    await write(page, sheetOf('harbour-supply-large', 'max(maxKw; 650)'));
    await heading(page).getByText('misses a worked bill').waitFor();
    await write(page, sheetOf('harbour-supply-large', 'max(maxKw; 550)'));
    await heading(page).getByText('can be kept as revision 2').waitFor();

    await page.getByText(/Draft kept/).waitFor();
    await page.reload();
    await heading(page).getByText('can be kept as revision 2').waitFor();
    await page.getByLabel('What changed, for the history').fill('Sheet 7 in place of the form');
    await page.getByRole('button', { name: 'Keep revision 2' }).click();
    await page.waitForURL('**/schedules/harbour-supply-large');
    expect(await readText(heading(page))).toBe('Harbour supply');

    await page.goto('/schedules/harbour-supply-large/history');
    const texts = await readText(page.getByRole('table', { name: 'Texts of harbour-supply-large' }));
    expect(texts).toContain('Sheet 7 in place of the form');
    expect(texts).toContain('Begun from the form kvarh-share-of-kwh');
    const difference = await readText(page.getByRole('region', { name: 'Differences of revisions 1 and 2' }));
    expect(difference.replace(/\s+/g, ' ')).toContain('formula: max(maxKw; 550), unit: kW');
    expect(complaints).toEqual([]);
    await page.context().close();
  });

  it('is completed from the words of the language', async () => {
    const { page } = await openWindow(browser, origin);
    await signIn(page, 'tom@calder-vane.example');
    await page.goto('/schedules/guide');
    await page.waitForLoadState('networkidle');
    await page.getByRole('textbox', { name: 'Example: The smallest schedule' }).focus();
    await page.keyboard.press('Control+End');
    await page.keyboard.insertText('\nwindows:\n  peak: { da');
    await page.keyboard.press('Control+Space');
    await option(page, 'days').waitFor();
    // The list takes no key in its first moments, lest a word be taken that nobody has read.
    await page.waitForTimeout(200);
    await page.keyboard.press('Enter');
    await page.keyboard.insertText('wee');
    await page.keyboard.press('Control+Space');
    await option(page, 'weekdays').waitFor();
    await page.context().close();
  });
});
