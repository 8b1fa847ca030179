import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { accessFaults } from './axe';
import { openWindow, readText, signIn, startBrowser, type PersonPage } from './browser';

const origin = inject('origin');
const overview = '/client/KG-02/overview';
const consultantsPlan = '/engagements/KG-02/plans?plan=1#form';

let browser: Browser;
let mira: PersonPage;
beforeAll(async () => {
  browser = await startBrowser();
  mira = await openWindow(browser, origin, { viewport: { width: 390, height: 844 }, colorScheme: 'dark' });
  await signIn(mira.page, 'mira@kestrel-gap.example');
});
afterAll(async () => {
  await browser.close();
});

const panel = () => mira.page.getByRole('complementary', { name: 'Try your own figures' });
const sentence = () => readText(mira.page.locator('.own-sentence'));

describe('a client’s own assumptions', () => {
  it('are moved by keyboard on a phone, and what changes is said at once beside what the report shows', async () => {
    const { page } = mira;
    await page.goto(overview);
    await page.waitForLoadState('networkidle');
    const heading = await readText(page.getByRole('heading', { level: 1 }));
    const shown = /Edition \d+ shows (\d+ months)\./.exec(await sentence())?.[1];
    expect(shown).toBeDefined();
    expect(heading).toContain(shown);
    await panel()
      .getByRole('slider', { name: /^The plant runs/ })
      .focus();
    for (let press = 0; press < 20; press += 1) await page.keyboard.press('ArrowLeft');
    expect(await panel().getByRole('textbox', { name: 'The plant runs' }).inputValue()).toBe('80');
    await panel().getByRole('textbox', { name: 'The work costs' }).fill('120,000');
    await page.keyboard.press('Enter');
    await page.getByText(/With your own assumptions it is paid back in \d+ months, eight of ten/).waitFor();
    const own = Number(/paid back in (\d+) months/.exec(await sentence())?.[1]);
    expect(own).toBeGreaterThan(Number.parseInt(shown!, 10));
    expect(await sentence()).toContain(`shows ${shown}.`);
    // The picture carries the reader's line and its crossing; the edition's own finding stays.
    expect(await readText(page.locator('.client-money figcaption').first())).toContain(
      `After ${shown} the saving has paid`,
    );
    expect(await page.locator('.client-money svg text').allTextContents()).toContain(
      `yours: ${own}\u00a0months`.replace('\u00a0', ' '),
    );
    expect(await readText(page.getByRole('heading', { level: 1 }))).toBe(heading);
  });

  it('stay within what the consultant allows, and say so', async () => {
    const { page } = mira;
    await panel().getByRole('textbox', { name: 'The work costs' }).fill('900,000');
    await page.keyboard.press('Enter');
    expect(await panel().getByRole('textbox', { name: 'The work costs' }).inputValue()).toBe('120,000');
    expect(await readText(panel())).toContain('It may be moved from 40,000 to 120,000');
    expect(await panel().getByRole('slider', { name: /^Tax/ }).count()).toBe(0);
  });

  it('change nothing of the edition: after a reset and after a reload all is as it was', async () => {
    const { page } = mira;
    await panel()
      .getByRole('button', { name: /^Back to edition/ })
      .click();
    expect(await sentence()).toMatch(/Move a figure to see what it changes\.$/);
    await page.reload();
    await page.waitForLoadState('networkidle');
    expect(await sentence()).toMatch(/^Edition \d+ shows \d+ months\./);
    expect(await accessFaults(page)).toEqual([]);
    const { scrollWidth, clientWidth } = await page.evaluate(() => document.documentElement);
    expect(scrollWidth).toBe(clientWidth);
  });
});

describe('the consultant’s form', () => {
  it('folds what only some plans need, and opens it where something is refused', async () => {
    const tom = await openWindow(browser, origin);
    const { page } = tom;
    await signIn(page, 'tom@calder-vane.example');
    await page.goto(consultantsPlan);
    await page.waitForLoadState('networkidle');
    expect(await page.getByLabel('Tax rate', { exact: true }).isVisible()).toBe(false);
    await page.getByText('What the client may move').click();
    await page.getByLabel('Operating hours from').fill('130');
    await page.getByText('What the client may move').click();
    await page.getByRole('button', { name: /^Save Plan/ }).click();
    const fault = page.getByRole('group', { name: 'Operating hours, range' }).getByRole('alert');
    await fault.waitFor();
    expect(await readText(fault)).toMatch(
      /The end of the range lies above its beginning|The range holds the plan’s own 100/,
    );
    expect(tom.complaints).toEqual([]);
  });
});
