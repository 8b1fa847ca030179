import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { accessFaults } from './axe';
import { openWindow, readText, signIn, startBrowser, type PersonPage } from './browser';

const origin = inject('origin');
const station = '/engagements/KG-02/motors';

let browser: Browser;
let tom: PersonPage;

beforeAll(async () => {
  browser = await startBrowser();
  tom = await openWindow(browser, origin);
  await signIn(tom.page, 'tom@calder-vane.example');
  await tom.page.goto(station);
  await tom.page.waitForLoadState('networkidle');
}, 120_000);

afterAll(async () => {
  await browser?.close();
});

const bench = () => tom.page.locator('.motor-bench').first();
const mark = () => bench().getByRole('slider');
const valueOf = async () => Number(await mark().getAttribute('aria-valuenow'));
const reading = (label: string) =>
  readText(
    bench()
      .locator('.bench-readings > div', { has: tom.page.getByText(label, { exact: true }) })
      .locator('b'),
  );
const kvarRead = async () => {
  const [, verb, figure] = /^(delivers|absorbs) ([\d,]+) kvar$/.exec(await reading('Reactive power')) ?? [];
  return (verb === 'absorbs' ? -1 : 1) * Number((figure ?? 'none').replace(',', ''));
};

describe('the field current on the V-curves', () => {
  it('follows the pointer across the chart, and readings and pictures follow it', async () => {
    const { page } = tom;
    const plot = bench().locator('.drag-along');
    await plot.scrollIntoViewIfNeeded();
    const box = (await plot.boundingBox())!;
    const press = async (from: number, to: number) => {
      await page.mouse.move(box.x + from * box.width, box.y + box.height / 2);
      await page.mouse.down();
      await page.mouse.move(box.x + to * box.width, box.y + box.height / 2, { steps: 8 });
      await page.mouse.up();
    };
    await press(0.5, 0.45);
    const [lowField, lowKvar] = [await valueOf(), await kvarRead()];
    const finding = await bench().locator('figcaption').nth(1).innerText();
    await press(0.45, 0.7);
    const [highField, highKvar] = [await valueOf(), await kvarRead()];
    expect(highField).toBeGreaterThan(lowField + 20);
    // More field delivers more: the right-hand side of every V-curve leads
    expect(highKvar).toBeGreaterThan(lowKvar + 100);
    await expect.poll(() => bench().locator('figcaption').nth(1).innerText()).not.toBe(finding);
    expect(await readText(bench().locator('figcaption').first())).toContain(`${highField} A`);
    expect(await mark().getAttribute('aria-valuetext')).toMatch(
      /^\d+.A, (delivers|absorbs) [\d,]+.kvar at \d+.% load$/,
    );
  });

  it('takes arrow keys, Page up and down, and stays between the ends of the axis', async () => {
    await mark().focus();
    const start = await valueOf();
    await mark().press('ArrowRight');
    expect(await valueOf()).toBe(start + 1);
    await mark().press('PageDown');
    expect(await valueOf()).toBe(start - 9);
    await mark().press('End');
    const end = await valueOf();
    await mark().press('ArrowRight');
    expect(await valueOf()).toBe(end);
    // Beyond the field's limit it can be looked at, and is said to be beyond
    expect(await readText(bench())).toContain('Not admissible');
    await mark().press('Home');
    expect(await valueOf()).toBeLessThan(start);
    expect(await readText(bench())).toContain('falls out of step');
  });

  it('can be typed, and leaves nothing behind: the page opens with the plan again', async () => {
    const { page } = tom;
    await bench().getByLabel('Try a field current').fill('150');
    await bench().getByLabel('Try a field current').press('Enter');
    expect(await valueOf()).toBe(150);
    await page.reload();
    await page.waitForLoadState('networkidle');
    expect(await valueOf()).not.toBe(150);
  });
});

describe('the pictures of a motor', () => {
  it('have their figures as a table one key away, and go back', async () => {
    const figures = bench().locator('figure.chart');
    expect(await figures.count()).toBe(4);
    for (let index = 0; index < 4; index += 1) {
      const figure = figures.nth(index);
      await figure.focus();
      await figure.press('t');
      expect(await figure.getByRole('table').getByRole('row').count()).toBeGreaterThan(1);
      await figure.press('t');
      expect(await figure.getByRole('table').count()).toBe(0);
    }
  });

  it('export what they show', async () => {
    const { page } = tom;
    const figure = bench().locator('figure.chart').first();
    const [csv] = await Promise.all([
      page.waitForEvent('download'),
      figure.getByRole('button', { name: 'CSV' }).click(),
    ]);
    expect(csv.suggestedFilename()).toBe('M-1-v-curves.csv');
    const [png] = await Promise.all([
      page.waitForEvent('download'),
      figure.getByRole('button', { name: 'PNG' }).click(),
    ]);
    expect(png.suggestedFilename()).toBe('M-1-v-curves.png');
  });

  it.each([
    ['light', 1440],
    ['dark', 390],
  ] as const)('stay within the page and keep the rules of access, %s at %i', async (colorScheme, width) => {
    const { page } = tom;
    await page.emulateMedia({ colorScheme });
    await page.setViewportSize({ width, height: 900 });
    await page.reload();
    await page.waitForLoadState('networkidle');
    const over = await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
    expect(over).toBe(0);
    expect(await accessFaults(page)).toEqual([]);
  });
});

it('complains of nothing in the console', () => {
  expect(tom.complaints).toEqual([]);
});
