import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { AxeResults } from 'axe-core';
import type { Page } from 'playwright-core';

const source = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/** Faults against the published accessibility rules (WCAG 2.2 A and AA), each with the first element it concerns. */
export async function accessFaults(page: Page): Promise<string[]> {
  await page.evaluate(source);
  const results = await page.evaluate(async () => {
    const { axe } = window as unknown as { axe: { run(context: unknown, options: unknown): Promise<AxeResults> } };
    return axe.run(document, { runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'] });
  });
  return results.violations.map(({ id, nodes }) => `${id}: ${nodes[0]?.target.join(' ')}`);
}
