import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { checkExamples, describeSchedule, priceBills, priceQuantities, type PricedBill } from '@/core/tariff';
import { hasShared, sharedFile } from '../setup/shared';
import type { FormCase } from './form-case';
import { chargeCases } from './form-charge-cases';
import { energyCases } from './form-energy-cases';
import { formIds, formText, readForm } from './form-file';
import { intervalCases } from './form-interval-cases';
import { filesOfForm, fromMemory, unnumbered, wishes } from './form-table';

const cases = [...chargeCases, ...energyCases, ...intervalCases];

function priceCase({ form, period, quantities, load, options }: FormCase): PricedBill {
  const schedule = readForm(form);
  const [bill] = load
    ? priceBills(schedule, load, { ...options, periods: [period] })
    : priceQuantities(schedule, [{ ...period, quantities: quantities! }], options);
  return bill!;
}

/** A figure of a bill by name, or lines added up: `lag + lead`. */
function figureOf({ total, reactiveCost, lines, quantities }: PricedBill, name: string): number | undefined {
  const sums: Record<string, number> = { total, reactiveCost };
  const one = (part: string): number | undefined =>
    sums[part] ?? lines.find(({ id }) => id === part)?.amount ?? quantities[part]?.value;
  const parts = name.split(' + ').map(one);
  return parts.reduce((sum, part) => (sum === undefined || part === undefined ? undefined : sum + part));
}

describe('published billing rules, in the forms', () => {
  it.each(cases)('$id gives the published figures from $form', (one) => {
    const bill = priceCase(one);
    for (const { name, value, within } of one.figures) {
      const found = figureOf(bill, name);
      expect(found, name).toBeDefined();
      // The crumbs of binary arithmetic beside the last printed digit.
      const tolerance = (within ?? one.within) + 1e-9;
      expect(Math.abs(found! - value), `${name}: ${found} for ${value}`).toBeLessThanOrEqual(tolerance);
    }
  });

  it.each(cases)('$id is a worked bill of $form too', ({ form, figures }) => {
    const expected = readForm(form).examples.map(({ expect: figuresOfBill }) => figuresOfBill);
    const carries = expected.some((bill) =>
      figures.some(({ name, value }) => bill.some((figure) => figure.name === name && figure.value === value)),
    );
    expect(carries).toBe(true);
  });
});

interface ListedCase {
  id: string;
  expected: Record<string, number | number[]>;
}

/** Figures by name; those of a list by name and place. */
function flatten(expected: ListedCase['expected']): Record<string, number> {
  const entries = Object.entries(expected).flatMap(([key, value]): [string, number][] =>
    typeof value === 'number' ? [[key, value]] : value.map((item, i) => [`${key}.${i}`, item]),
  );
  return Object.fromEntries(entries);
}

/** The figures a case checks, by their names in the list, and those that stand inside the arithmetic. */
function listedFigures({ figures, inside }: FormCase): Record<string, number> {
  const checked = figures.flatMap(({ key, value }): [string, number][] => (key === undefined ? [] : [[key, value]]));
  const others = Object.entries(inside ?? {}).flatMap(([key, { values }]): [string, number][] =>
    values.length === 1 ? [[key, values[0]!]] : values.map((value, i) => [`${key}.${i}`, value]),
  );
  return Object.fromEntries([...checked, ...others]);
}

describe.skipIf(!hasShared)('the list of published cases beside the checkout', () => {
  const listed = (): ListedCase[] =>
    JSON.parse(readFileSync(sharedFile('checks', 'tariff-cases.json'), 'utf8')) as ListedCase[];

  it('has a form for every case, figure by figure', () => {
    const list = listed();
    expect(list.length).toBeGreaterThanOrEqual(26);
    for (const { id, expected } of list) {
      const one = cases.find((row) => row.id === id);
      expect(one, id).toBeDefined();
      expect(listedFigures(one!), id).toEqual(flatten(expected));
    }
  });
});

describe('the files of the forms', () => {
  it.each(formIds)('%s is read without notes, named like its file, its source stated', (id) => {
    const schedule = readForm(id);
    expect(schedule.id).toBe(id);
    expect(schedule.notes).toEqual([]);
    expect(schedule.title).not.toBe(id);
    expect(schedule.source.publisher).toBeDefined();
    expect(schedule.source.title).toBeDefined();
    expect(schedule.source.status).toBe(fromMemory.includes(id) ? 'memory' : 'found');
    expect(schedule.inForce).not.toBeNull();
    expect(() => JSON.stringify(describeSchedule(schedule))).not.toThrow();
  });

  it.each(formIds)('%s says first what the rule does, then what to change, then where it was read', (id) => {
    const [modeline, ...paragraphs] = headComment(formText(id));
    expect(modeline).toBe('yaml-language-server: $schema=../schedule.schema.json');
    expect(paragraphs).toHaveLength(3);
    const [rule, change, source] = paragraphs;
    expect(rule!.length).toBeGreaterThan(120);
    expect(change).toMatch(/^Change first: /);
    expect(source).toMatch(/\bexamples\s+to be replaced/);
    expect(source).toMatch(fromMemory.includes(id) ? /FROM MEMORY, not read in a source/ : /\b[Rr]ead\b/);
  });

  it.each(formIds)('%s gives its worked bills', (id) => {
    const results = checkExamples(readForm(id));
    expect(results.length).toBeGreaterThan(0);
    for (const { title, problem, figures, fits } of results) {
      expect(problem, title).toBeUndefined();
      const off = figures.filter((figure) => !figure.fits);
      expect(off, title).toEqual([]);
      expect(fits, title).toBe(true);
    }
  });

  it.each(formIds)('%s has a worked bill with its total and one with its reactive cost', (id) => {
    const names = readForm(id).examples.flatMap((example) => example.expect.map(({ name }) => name));
    expect(names).toContain('total');
    expect(names).toContain('reactiveCost');
  });

  it.each(formIds)(
    '%s leaves nothing to chance: dates, division, rounding, demand window, what holds without kWh',
    (id) => {
      const text = formText(id);
      for (const part of ['inForce', 'straddle', 'rounding', 'demandWindow']) {
        expect(text).toMatch(new RegExp(`^${part}: `, 'm'));
      }
      const isSaid = /^zeroKwh: /m.test(text);
      if (/\b(pf|ratio)\(/.test(withoutComments(text))) expect(isSaid).toBe(true);
      expect(isSaid || headComment(text).join(' ').includes('without kWh')).toBe(true);
    },
  );
});

/** Paragraphs of the comment above `schedule:`, its lines joined. */
function headComment(text: string): string[] {
  const head = text.slice(0, text.indexOf('\nschedule: '));
  const lines = head.split('\n').map((line) => line.replace(/^# ?/, ''));
  return lines
    .join('\n')
    .split(/\n\s*\n/)
    .map((paragraph) => paragraph.trim().replace(/\n/g, ' '));
}

function withoutComments(text: string): string {
  return text.replace(/(^|\s)#.*$/gm, '');
}

describe('the table of published forms', () => {
  it('has a file for each of the 32 numbers, and every file its number', () => {
    const numbers = Object.keys(filesOfForm).map(Number);
    expect(numbers).toEqual(Array.from({ length: 32 }, (_, i) => i + 1));
    const named = [...Object.values(filesOfForm).flat(), ...unnumbered];
    expect(named.sort()).toEqual([...formIds].sort());
    for (const [number, files] of Object.entries(filesOfForm)) {
      for (const id of files) expect(formText(id), id).toMatch(new RegExp(`^# Form ${number}[,.]`, 'm'));
    }
  });

  it.each(wishes)('$wish', ({ saidBy }) => {
    expect(saidBy.length).toBeGreaterThan(0);
    for (const [form, words] of saidBy) expect(withoutComments(formText(form)), form).toMatch(words);
  });
});
