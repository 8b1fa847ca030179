import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Browser, Page } from 'playwright-core';
import { openWindow, readText, signIn, startBrowser } from './browser';

const origin = inject('origin');
const plans = '/engagements/KG-02/plans';
const name = 'By season with a bank';
let browser: Browser;
let page: Page;
let complaints: string[];

beforeAll(async () => {
  browser = await startBrowser();
  ({ page, complaints } = await openWindow(browser, origin));
  await signIn(page, 'tom@calder-vane.example');
}, 60_000);
afterAll(() => browser.close());

/** The form of a plan; the search beneath it asks for some of the same. */
const form = () => page.locator('#form');

/** Cells of a row of the comparison by the words its heading begins with. */
async function cellsOf(heading: string): Promise<string[]> {
  const table = page.getByRole('table', { name: 'Standing and plans' });
  const row = table.getByRole('row').filter({ has: page.getByRole('rowheader', { name: heading }) });
  return (await row.first().getByRole('cell').allInnerTexts()).map((text) => text.replaceAll('\u00a0', ' '));
}

describe('a plan by season with a switched, detuned bank', () => {
  it('is written in the form, which tells of a limit while it is typed', async () => {
    await page.goto(`${plans}?plan=new#form`, { waitUntil: 'networkidle' });
    await form().getByLabel('Name', { exact: true }).fill(name);
    await form().getByLabel('Settings', { exact: true }).selectOption('months');
    const summer = form().getByLabel('M-1, Summer', { exact: true });
    await summer.fill('400');
    await page.getByText(/beyond the field limit of M-1/).waitFor();
    await summer.fill('130');
    await page.getByText(/beyond the field limit of M-1/).waitFor({ state: 'detached' });
    await form().getByLabel('M-1, Winter', { exact: true }).fill('120');
    await form().getByRole('button', { name: 'Add a bank' }).click();
    await form().getByLabel('Steps', { exact: true }).fill('2');
    await form().getByLabel('Size of a step').fill('300');
    await form().getByLabel('Controller holds').fill('0.95');
    await form().getByLabel('Detuning reactors').fill('7');
    await form().getByLabel('Bank and its fitting, once').fill('80,000');
    await form().getByLabel('Work at the motors, once').fill('20,000');
    await page.getByRole('button', { name: 'Price this plan' }).click();
    await page.waitForURL((url) => url.pathname === plans && !url.search);
  }, 90_000);

  it('stands beside standing and the other plans, its parts named and its costs added up', async () => {
    await page.waitForLoadState('networkidle');
    const table = page.getByRole('table', { name: 'Standing and plans' });
    const heads = (await table.getByRole('columnheader').allInnerTexts()).map((text) => text.split('\n')[0]);
    expect(heads).toEqual(expect.arrayContaining(['Standing', 'Plan A', 'Plan B', 'Plan C', name]));
    expect((await cellsOf('M-1 set to')).at(-1)).toBe('130 A in summer, 120 A in winter');
    expect((await cellsOf('Capacitors')).at(-1)).toMatch(/^600\s+2 × 300, switched to 0.95, detuned 7 %$/);
    expect((await cellsOf('Work, once')).at(-1)).toMatch(/^100,000\s+work at the motors 20,000, capacitors 80,000$/);
    const years = (await cellsOf('Bills of the year')).slice(1).map((text) => Number(text.replaceAll(',', '')));
    const saved = (await cellsOf('Saved a year')).slice(2).map((text) => Number(text.replaceAll(/[^\d]/g, '')));
    // Standing less each plan, to the unit the row is written in.
    saved.forEach((amount, index) => expect(Math.abs(years[0]! - years[index + 1]! - amount)).toBeLessThanOrEqual(0.5));
    expect(await readText(page.locator('.caution').last())).toContain('harmonic study');
  });

  it('is copied into a form of its own name, and taken back', async () => {
    await page.getByRole('link', { name: `Copy ${name}` }).click();
    await page.waitForLoadState('networkidle');
    expect(await form().getByLabel('Name', { exact: true }).inputValue()).not.toBe(name);
    expect(await form().getByLabel('M-1, Summer', { exact: true }).inputValue()).toBe('130');
    expect(await form().getByLabel('Size of a step').inputValue()).toBe('300');
    await page.goto(plans, { waitUntil: 'networkidle' });
    await page.getByRole('link', { name: `Edit ${name}` }).click();
    await page.waitForLoadState('networkidle');
    await page.getByRole('button', { name: `Remove ${name}` }).click();
    await page.getByRole('button', { name: `Remove ${name}` }).click();
    await page.waitForURL((url) => url.pathname === plans && !url.search);
    await page.waitForLoadState('networkidle');
    expect(await page.getByRole('link', { name: `Edit ${name}` }).count()).toBe(0);
    expect(complaints).toEqual([]);
  }, 90_000);
});
