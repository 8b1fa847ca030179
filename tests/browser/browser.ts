import { existsSync } from 'node:fs';
import { chromium, type Browser, type BrowserContextOptions, type Locator, type Page } from 'playwright-core';
import { demoAccounts } from '@/server/demo-accounts';

const places = ['/usr/bin/chromium', '/usr/bin/chromium-browser', '/usr/bin/google-chrome'];
const quiet = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

/** Starts the machine's own Chromium. */
export async function startBrowser(): Promise<Browser> {
  const executablePath = places.find((place) => existsSync(place));
  if (!executablePath) throw new Error('The browser tests need Chromium. On Debian: apt-get install chromium');
  return chromium.launch({ executablePath, args: quiet });
}

/** A page of a person's own browser, with everything its console complains of. */
export interface PersonPage {
  page: Page;
  complaints: string[];
}

/** Opens a fresh browser window for one person. */
export async function openWindow(
  browser: Browser,
  origin: string,
  options: BrowserContextOptions = {},
): Promise<PersonPage> {
  const context = await browser.newContext({ baseURL: origin, viewport: { width: 1440, height: 900 }, ...options });
  const page = await context.newPage();
  page.setDefaultTimeout(20_000);
  const complaints: string[] = [];
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(`${page.url()}: ${message.text()}`);
  });
  page.on('pageerror', (error) => complaints.push(`${page.url()}: ${error.message}`));
  return { page, complaints };
}

/** Signs a person in through the form. */
export async function signIn(page: Page, email: string, password: string = demoAccounts.password): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
}

/** What a person reads in a part of the page, with ordinary blanks. */
export async function readText(part: Locator): Promise<string> {
  return (await part.innerText()).replaceAll('\u00a0', ' ');
}
