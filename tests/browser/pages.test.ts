import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { pngHead } from '../setup/pages';
import { lockedPdf, scanPdf, scriptPdf, textPdf } from '../setup/pdf';
import { accessFaults } from './axe';
import { openWindow, readText, signIn, startBrowser, type PersonPage } from './browser';

const origin = inject('origin');
let browser: Browser;

beforeAll(async () => {
  browser = await startBrowser();
});

afterAll(async () => {
  await browser?.close();
});

const figure = (page: Page, text: string) => page.locator(`.page-figure[aria-label^="${text}"]`);

/** Opens the form of the bill of June, its statement beside it. */
async function openJune(page: Page): Promise<void> {
  await page.goto('/engagements/KG-02/bills');
  await page.waitForLoadState('networkidle');
  await page.getByRole('button', { name: 'Edit the bill of Jun 2026' }).click();
  await page.getByRole('listbox', { name: /^Numbers and dates of page 1/ }).waitFor();
}

/** The field of a line by its name, and how it is called in the form. */
async function lineField(page: Page, label: string) {
  const names = page.locator('.bill-form input[name^="lines."][name$=".label"]');
  const labels = await names.evaluateAll((all) => all.map((one) => (one as HTMLInputElement).value));
  return page.locator(`.bill-form input[name="lines.${labels.indexOf(label)}.amount"]`);
}

const markedText = (page: Page) =>
  page.evaluate(() => {
    const box = document.querySelector('[data-page-mark]')?.getBoundingClientRect();
    if (!box) return null;
    const middle = { x: box.left + box.width / 2, y: box.top + box.height / 2 };
    const over = [...document.querySelectorAll('.page-figure')].find((one) => {
      const own = one.getBoundingClientRect();
      return own.left <= middle.x && own.right >= middle.x && own.top <= middle.y && own.bottom >= middle.y;
    });
    return over?.getAttribute('aria-label')?.split(',').slice(0, 2).join(',') ?? 'nothing';
  });

describe('a bill beside its statement', () => {
  let tom: PersonPage;

  beforeAll(async () => {
    tom = await openWindow(browser, origin);
    await signIn(tom.page, 'tom@calder-vane.example');
  });

  it('fills nothing by itself: no field has a place before a number was taken', async () => {
    const { page } = tom;
    await openJune(page);
    await (await lineField(page, 'Demand')).focus();
    expect(await markedText(page)).toBeNull();
    expect(await page.locator('.page-figure[data-used]').count()).toBe(0);
  });

  it('takes a number dragged with the mouse and one chosen with the keys, and knows their places after saving', async () => {
    const { page } = tom;
    await openJune(page);
    const demand = await lineField(page, 'Demand');
    const fuel = await lineField(page, 'Fuel rider');
    const before = [await demand.inputValue(), await fuel.inputValue()];
    await demand.fill('1');
    await figure(page, before[0]!).dragTo(demand);
    expect(await demand.inputValue()).toBe(before[0]);
    expect(await markedText(page)).toBe(before[0]);

    await fuel.fill('2');
    await page.keyboard.press('F2');
    await page.keyboard.press('Home');
    for (let steps = 0; steps < 60; steps++) {
      const label = await page.locator('.page-figure[aria-selected="true"]').getAttribute('aria-label');
      if (label?.startsWith(before[1]!)) break;
      await page.keyboard.press('ArrowDown');
    }
    await page.keyboard.press('Enter');
    expect(await fuel.inputValue()).toBe(before[1]);
    expect(await fuel.evaluate((field) => field === document.activeElement)).toBe(true);
    expect(await markedText(page)).toBe(before[1]);

    await Promise.all([
      page.waitForEvent('load', { timeout: 60_000 }),
      page.getByRole('button', { name: 'Save the bill' }).click(),
    ]);
    await openJune(page);
    await (await lineField(page, 'Demand')).focus();
    await page.locator('[data-page-mark]').waitFor();
    expect(await markedText(page)).toBe(before[0]);
    await (await lineField(page, 'Fuel rider')).focus();
    await expect.poll(() => markedText(page)).toBe(before[1]);
    await page.getByRole('button', { name: 'turn' }).click();
    await expect.poll(() => markedText(page)).toBe(before[1]);
  });

  it('marks the field when its number is looked at, and forgets the place of a number typed over', async () => {
    const { page } = tom;
    await openJune(page);
    const demand = await lineField(page, 'Demand');
    const was = await demand.inputValue();
    await figure(page, was).hover();
    const row = page.locator('.form-row[data-marked]');
    expect(await row.locator('input[name$=".amount"]').inputValue()).toBe(was);
    await demand.fill('7');
    await expect.poll(() => markedText(page)).toBeNull();
  });

  it('refuses a date where a number belongs, in words, and takes it where a day does', async () => {
    const { page } = tom;
    await openJune(page);
    const demand = await lineField(page, 'Demand');
    const was = await demand.inputValue();
    const [date] = await page.locator('.page-figure[aria-label*="taken as 2026-"]').all();
    await date!.dragTo(demand);
    expect(await demand.inputValue()).toBe(was);
    expect(await readText(page.locator('.page-said'))).toMatch(/^Demand takes a number; \d\d\/\d\d\/2026 is a date\.$/);
    await date!.dragTo(page.locator('.bill-form input[name="from"]'));
    expect(await page.locator('.bill-form input[name="from"]').inputValue()).toMatch(/^2026-0\d-\d\d$/);
  });

  it('shows the photo, turned and larger, and complains of nothing', async () => {
    const { page, complaints } = tom;
    await openJune(page);
    await page.getByRole('button', { name: 'meter-ov5510-274.png' }).click();
    await page.getByRole('img', { name: 'Photo meter-ov5510-274.png' }).waitFor();
    await page.getByRole('button', { name: 'turn' }).click();
    await page.getByRole('button', { name: 'larger' }).click();
    expect(await readText(page.locator('.page-viewer'))).toContain('type what you see');
    expect(complaints).toEqual([]);
  });

  it.each([
    { name: 'wide and light', colorScheme: 'light', viewport: { width: 1440, height: 900 } },
    { name: 'narrow and dark', colorScheme: 'dark', viewport: { width: 390, height: 844 } },
  ] as const)('keeps to the accessibility rules and to the width, $name', async ({ colorScheme, viewport }) => {
    const { page } = await openWindow(browser, origin, { colorScheme, viewport, bypassCSP: true });
    await signIn(page, 'tom@calder-vane.example');
    await openJune(page);
    await page.locator('.page-drawer > summary').click();
    expect(await accessFaults(page)).toEqual([]);
    expect(await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBe(
      0,
    );
    await page.context().close();
  });
});

describe('files of strangers', () => {
  let sana: PersonPage;
  const asked: string[] = [];
  const dialogs: string[] = [];

  beforeAll(async () => {
    sana = await openWindow(browser, origin);
    sana.page.on('request', (request) => asked.push(new URL(request.url()).origin));
    sana.page.on('dialog', (dialog) => {
      dialogs.push(dialog.message());
      void dialog.dismiss();
    });
    await signIn(sana.page, 'sana@calder-vane.example');
  });

  const pick = async (...files: [string, Buffer][]) => {
    const { page } = sana;
    await page.goto('/engagements/HS-01/bills?typing');
    await page.waitForLoadState('networkidle');
    const chosen = files.map(([name, buffer]) => ({ name, mimeType: 'application/pdf', buffer }));
    await page.locator('.page-drawer input[type=file]').setInputFiles(chosen);
    return page;
  };

  it.each([
    ['damaged.pdf', Buffer.from('%PDF-1.7\nand nothing a PDF is made of'), /damaged or was cut short/],
    ['locked.pdf', lockedPdf(), /locked with a password/],
  ])('%s is attached and says why it cannot be shown', async (name, bytes, words) => {
    const page = await pick([name, bytes]);
    await page.getByText(`${name} cannot be shown.`).waitFor();
    expect(await readText(page.locator('.page-frame'))).toMatch(words);
  });

  it('several at once: what is none is refused by name, the rest is attached', async () => {
    const page = await pick(
      ['empty.pdf', Buffer.alloc(0)],
      ['page.pdf', Buffer.from('<!doctype html><script>alert(1)</script>')],
      ['bomb.png', pngHead(60_000, 60_000)],
      ['good.pdf', textPdf()],
    );
    await page.getByText('3 files were not attached.').waitFor();
    const words = await readText(page.locator('.pages'));
    expect(words).toMatch(/empty\.pdf: The file is empty/);
    expect(words).toMatch(/page\.pdf is a web page/);
    expect(words).toMatch(/bomb\.png is 60000 by 60000 pixels/);
    await figure(page, '1,234.56').waitFor();
  });

  it('a scan says that it has no text', async () => {
    const page = await pick(['scan.pdf', scanPdf()]);
    await page.getByText('No text on this page').waitFor();
    expect(await page.getByRole('listbox').count()).toBe(0);
  });

  it('scripts and addresses inside a PDF do nothing: no window, no request, no dialog', async () => {
    asked.length = 0;
    const page = await pick(['script.pdf', scriptPdf('https://elsewhere.example/take')]);
    await figure(page, '1,234.56').waitFor();
    await page.locator('.page-paper canvas').click({ position: { x: 20, y: 20 }, force: true });
    await page.waitForTimeout(500);
    expect(new Set(asked)).toEqual(new Set([origin]));
    expect(dialogs).toEqual([]);
    expect(page.context().pages()).toHaveLength(1);
  });

  it('the worker that reads them may reach nothing', async () => {
    const seen = new Set<string>();
    sana.page.on('response', (response) => {
      if (response.url().includes('pdf.worker')) seen.add(response.headers()['content-security-policy'] ?? 'none');
    });
    await pick(['again.pdf', scanPdf()]);
    await expect.poll(() => seen.size).toBeGreaterThan(0);
    expect([...seen]).toEqual(["default-src 'none'; script-src 'wasm-unsafe-eval'"]);
  });

  it('are removed after one question and come back', async () => {
    const page = await pick(['gone.pdf', scanPdf()]);
    await page.getByText('No text on this page').waitFor();
    await page.locator('.page-drawer > summary').click();
    const remove = page.getByRole('button', { name: /^Remove (scan|gone|again)\.pdf$/ }).first();
    const name = (await remove.getAttribute('aria-label'))!.replace('Remove ', '');
    await remove.click();
    await page.getByRole('button', { name: 'Remove it' }).click();
    await page.getByText(`${name} is removed.`).waitFor();
    await page.locator('.page-list').getByRole('button', { name: 'Undo', exact: true }).click();
    await page.locator('.page-file', { hasText: name }).waitFor({ state: 'attached' });
  });
});
