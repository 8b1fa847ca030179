import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import type { Browser, Page } from 'playwright-core';
import { openWindow, readText, signIn, startBrowser } from './browser';

const origin = inject('origin');
const station = '/engagements/HS-01/bills';
let browser: Browser;
let page: Page;
let complaints: string[];

beforeAll(async () => {
  browser = await startBrowser();
  ({ page, complaints } = await openWindow(browser, origin));
  page.on('response', (response) => {
    const isTyped = response.request().method() === 'POST' && /\/bills$/.test(response.url());
    if (isTyped && response.status() === 201)
      void response.json().then(
        ({ id }: { id: number }) => typed.push(id),
        () => undefined, // the page was left
      );
  });
  await signIn(page, 'sana@calder-vane.example');
}, 60_000);
// The other files of tests find the demo as it was.
afterAll(async () => {
  for (const id of typed) await page.evaluate(removeBill, id);
  await browser.close();
});

const typed: number[] = [];

async function removeBill(id: number): Promise<void> {
  const headers = { 'content-type': 'application/json' };
  for (let version = 0; version < 20; version += 1) {
    const body = JSON.stringify({ version });
    const { ok } = await fetch(`/api/engagements/HS-01/bills/${id}`, { method: 'DELETE', headers, body });
    if (ok) return;
  }
}

const form = () => page.locator('#bill form');
const row = (label: string) => form().locator('.form-row', { hasText: label }).first();

/** Types into the field that has the focus and goes on to the next one. */
async function typeOn(text: string): Promise<void> {
  await page.keyboard.press('ControlOrMeta+a');
  if (text !== '') await page.keyboard.type(text);
  await page.keyboard.press('Tab');
}

/** Goes from a quantity to the amounts of the lines, past what stands between. */
async function goTo(label: string): Promise<void> {
  await form().getByLabel(label, { exact: true }).focus();
}

async function typeBill(bill: {
  invoice: string;
  from: string;
  lastDay: string;
  figures: string[];
  amounts: string[];
}) {
  await form().getByLabel('Invoice no.').focus();
  await typeOn(bill.invoice);
  await form().getByLabel('First day').fill(bill.from);
  await form().getByLabel('Last day').fill(bill.lastDay);
  await goTo('Energy');
  for (const figure of bill.figures) await typeOn(figure);
  for (const [index, amount] of bill.amounts.entries()) {
    await goTo(`Amount of line ${index + 1}`);
    await typeOn(amount);
  }
}

/** March 2026 of the cold store, invented: the account was renumbered on 20 March, and the utility made two invoices. */
const first = {
  invoice: '37201',
  from: '2026-03-01',
  lastDay: '2026-03-19',
  figures: ['118,000', '', ''],
  amounts: ['58.84', '6,938.40', '0.00'],
};
const second = {
  invoice: '37202',
  from: '2026-03-20',
  lastDay: '2026-03-31',
  figures: ['75,000', '470', '86 %'],
  amounts: ['37.16', '4,410.00', '7,144.00'],
};

describe('bills typed from paper', () => {
  it('are checked while they are typed: sum, average price, load factor, power factor in per cent', async () => {
    await page.goto(`${station}?typing`, { waitUntil: 'networkidle' });
    await typeBill(first);
    // 58.84 + 6,938.40 = 6,997.24
    expect(await readText(row('Lines typed'))).toContain('6,997.24');
    await goTo('Printed total');
    await page.keyboard.type('6,997.42');
    expect(await readText(form().locator('[role=status]'))).toMatch(/differs\s+\u22120\.18/);
    await page.keyboard.press('ControlOrMeta+a');
    await page.keyboard.type('6,997.24');
    expect(await readText(form().locator('[role=status]'))).toContain('agrees');
    // 6,997.24 / 118,000 = 0.0593
    expect(await readText(row('Average price'))).toContain('0.0593');
    await page.keyboard.press('Enter');
    await page.locator('#year').getByText('37201').waitFor();
    await page.waitForLoadState('networkidle');
  }, 90_000);

  it('go on with the next period and the same lines after Enter', async () => {
    expect(await form().getByLabel('First day').inputValue()).toBe('2026-03-20');
    expect(await form().getByLabel('Name of line 2').inputValue()).toBe('Energy charge');
    await typeBill(second);
    expect(await readText(row('First day'))).toContain('joins 19 Mar');
    // 75,000 kWh of 470 kW x 12 days x 24 h = 135,360 kWh: 0.55
    expect(await readText(row('Peak demand'))).toContain('load factor 0.55');
    expect(await readText(row('Power factor'))).toContain('taken as 0.86');
    await form().getByRole('button', { name: 'With quantities and rates' }).click();
    await goTo('Quantity of Demand charge');
    for (const text of ['470', 'kW', '15.30']) await typeOn(text);
    // 470 x 15.30 = 7,191.00; 7,144.00 is 47.00 less
    const demand = form().locator('.bill-line').nth(2);
    expect(await readText(demand)).toContain('comes to 7,191.00, \u221247.00 off');
    await goTo('Rate of Demand charge');
    await typeOn('15.20');
    expect(await readText(demand)).toContain('= 7,144.00');
    await goTo('Printed total');
    await page.keyboard.type('11,591.16');
    await page.keyboard.press('Enter');
    await page.locator('#year').getByText('37202').waitFor();
  }, 90_000);

  it('are joined where they look like the invoices of one bill, and taken apart again', async () => {
    await page.goto(station, { waitUntil: 'networkidle' });
    const suggestion = page.getByText(/Two bills look like the invoices of one bill of 31 days/);
    await suggestion.waitFor();
    await page.getByLabel('Why they are one').fill('The account was renumbered on 20 March');
    await page.getByRole('button', { name: 'Join two invoices' }).click();
    await suggestion.waitFor({ state: 'detached' });
    await page.waitForLoadState('networkidle');
    const march = page.locator('#year tr', { hasText: 'Mar 2026' });
    // 6,997.24 + 11,591.16 = 18,588.40; 118,000 + 75,000
    expect(await readText(march)).toMatch(/two invoices[\s\S]*193,000[\s\S]*18,588\.40/);
    await march.getByRole('button', { name: 'two invoices' }).click();
    const panel = page.getByRole('region', { name: 'Invoices of Mar 2026' }).first();
    expect(await readText(panel)).toMatch(/priced as one bill of 31 days[\s\S]*37201[\s\S]*37202[\s\S]*One bill/);
    expect(await readText(panel)).toContain('The account was renumbered on 20 March.');
    await panel.getByRole('button', { name: 'Take apart again' }).click();
    await suggestion.waitFor();
    expect(complaints).toEqual([]);
  }, 90_000);
});
