import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Browser, Page } from 'playwright-core';
import { demoAccounts } from '@/server/demo-accounts';
import { openWindow, signIn, startBrowser } from './browser';

const origin = inject('origin');
const tom = 'tom@calder-vane.example';
let browser: Browser;
beforeAll(async () => {
  browser = await startBrowser();
}, 60_000);
afterAll(() => browser.close());

/** Signs in again on the page that a form led to, and comes back. */
async function signInAgain(page: Page): Promise<void> {
  await page.waitForURL(/\/sign-in\?next=/);
  await page.getByLabel('E-mail').fill(tom);
  await page.getByLabel('Password', { exact: true }).fill(demoAccounts.password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}

const restored = 'This is what you typed before you had to sign in again. It is not saved yet.';

describe('a session that ends while a form is open', () => {
  it('costs no word of a plan: what was typed is there after signing in again', async () => {
    const { page } = await openWindow(browser, origin);
    await signIn(page, tom);
    await page.goto('/engagements/KG-02/plans?plan=new', { waitUntil: 'networkidle' });
    await page.getByLabel('Name').fill('Typed for nothing');
    await page.getByLabel('Work at the motors, once').fill('12345');
    await page.context().clearCookies();
    await page.getByRole('button', { name: 'Price this plan' }).click();
    await signInAgain(page);
    await page.getByText(restored).waitFor();
    expect(await page.getByLabel('Name').inputValue()).toBe('Typed for nothing');
    expect(await page.getByLabel('Work at the motors, once').inputValue()).toBe('12345');
    await page.context().close();
  }, 90_000);

  it('costs no word of a motor', async () => {
    const { page } = await openWindow(browser, origin);
    await signIn(page, tom);
    await page.goto('/engagements/KG-02/motors', { waitUntil: 'networkidle' });
    await page.getByRole('link', { name: 'Edit M-1' }).click();
    await page.waitForLoadState('networkidle');
    await page.getByLabel('Drives').fill('Typed for nothing');
    await page.context().clearCookies();
    await page.getByRole('button', { name: 'Save M-1' }).click();
    await signInAgain(page);
    await page.getByText(restored).waitFor();
    expect(await page.getByLabel('Drives').inputValue()).toBe('Typed for nothing');
    await page.context().close();
  }, 90_000);
});

describe('a button pressed twice', () => {
  it('writes hours once', async () => {
    const { page } = await openWindow(browser, origin);
    await signIn(page, tom);
    await page.goto('/engagements/KG-02/hours', { waitUntil: 'networkidle' });
    await page.getByLabel('Time').fill('0:20');
    await page.getByLabel('What you did').fill('pressed twice by mistake');
    await page.getByRole('button', { name: 'Write hours' }).dblclick();
    await page.getByText('pressed twice by mistake').first().waitFor();
    await page.reload({ waitUntil: 'networkidle' });
    expect(await page.getByText('pressed twice by mistake').count()).toBe(1);
    await page.context().close();
  }, 90_000);
});
