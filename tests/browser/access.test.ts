import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { accessFaults } from './axe';
import { openWindow, signIn, startBrowser } from './browser';

const origin = inject('origin');

const visits = [
  {
    who: 'partner',
    email: 'ilse@calder-vane.example',
    addresses: [
      '/today',
      '/engagements',
      '/engagements/new',
      '/engagements/KG-02/bills',
      '/engagements/KG-02/attachments/1',
      '/engagements/KG-02/intervals',
      '/engagements/KG-02/tariff',
      '/engagements/KG-02/tariff/compare?with=ostrander-hv3&ostrander-hv3.contractKva=3000',
      '/engagements/KG-02/tariff/letter',
      '/engagements/KG-02/tariff/letters/1',
      '/engagements/KG-02/requests',
      '/engagements/KG-02/requests/new?about=motors',
      '/engagements/KG-02/requests/1',
      '/engagements/KG-02/motors',
      '/engagements/KG-02/plans',
      '/engagements/KG-02/report',
      '/engagements/KG-02/proof',
      '/engagements/KG-02/hours',
      '/clients',
      '/clients/1',
      '/schedules',
      '/schedules/ostrander-lp4',
      '/schedules/ostrander-lp4/edit',
      '/schedules/ostrander-gs2/history',
      '/schedules/new',
      '/schedules/guide',
      '/schedules/forms',
      '/schedules/forms/kvarh-share-of-kwh',
      '/schedules/ostrander-lp4/try?from=2026-07-01&to=2026-08-01&kwh=1030000&kw=2400&pf=0.89',
      '/practice',
      '/people',
      '/trail',
      '/profile',
    ],
  },
  {
    who: 'client',
    email: 'mira@kestrel-gap.example',
    addresses: [
      '/client/KG-02/overview',
      '/client/KG-02/bills',
      '/client/KG-02/reports',
      '/client/KG-02/reports/1',
      '/client/KG-02/requests',
      '/client/KG-02/requests/1',
    ],
  },
] as const;

const looks = [
  { name: 'wide and light', colorScheme: 'light', viewport: { width: 1440, height: 900 } },
  { name: 'narrow and dark', colorScheme: 'dark', viewport: { width: 390, height: 844 } },
] as const;

let browser: Browser;

beforeAll(async () => {
  browser = await startBrowser();
});

afterAll(async () => {
  await browser?.close();
});

const overflow = (page: Page) =>
  page.evaluate(() => Math.max(0, document.documentElement.scrollWidth - document.documentElement.clientWidth));

describe.each(visits)('the pages of a $who', ({ email, addresses }) => {
  it.concurrent.each(looks)(
    'keep to the accessibility rules and to the width, $name',
    async ({ colorScheme, viewport }) => {
      const { page, complaints } = await openWindow(browser, origin, { colorScheme, viewport, bypassCSP: true });
      await signIn(page, email);
      const found: Record<string, unknown> = {};
      for (const address of addresses) {
        await page.goto(address);
        await page.waitForLoadState('networkidle');
        const wrong = await accessFaults(page);
        const wide = await overflow(page);
        if (wrong.length > 0 || wide > 0) found[address] = { wrong, wide };
      }
      expect(found).toEqual({});
      expect(complaints).toEqual([]);
      await page.context().close();
    },
  );
});

describe('the way in', () => {
  it.each(looks)('keeps to the accessibility rules, $name', async ({ colorScheme, viewport }) => {
    const { page } = await openWindow(browser, origin, { colorScheme, viewport, bypassCSP: true });
    for (const address of ['/sign-in', '/reset', '/invitation/none']) {
      await page.goto(address);
      expect([address, await accessFaults(page), await overflow(page)]).toEqual([address, [], 0]);
    }
    await page.context().close();
  });
});
