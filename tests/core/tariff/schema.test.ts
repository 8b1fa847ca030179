import { existsSync, readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import Ajv from 'ajv';
import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';
import { readSchedule, scheduleJsonSchema } from '@/core/tariff';
import { scheduleGrammar, takesAt } from '@/core/tariff/grammar';
import { problemsOf } from './build';
import { allFields, exampleOf, hosts, textOf, type Document } from './grammar-documents';
import { kestrel, millrace, millracePlain, tidewater } from './worked-schedules';

const validate = new Ajv({ strict: true, strictRequired: false, allowUnionTypes: true }).compile(scheduleJsonSchema());
const read = (text: string): unknown => parse(text, { version: '1.2', schema: 'core' });
const isValid = (document: unknown): boolean => validate(document);
const isRead = (document: Document): boolean => problemsOf(() => readSchedule(textOf(document))).length === 0;
const said = (document: Document): string => problemsOf(() => readSchedule(textOf(document)))[0]?.message ?? '';

describe('scheduleJsonSchema', () => {
  it('is the file beside the schedules (npm run schema writes it)', () => {
    const file: unknown = JSON.parse(readFileSync('tariffs/schedule.schema.json', 'utf8'));
    expect(file).toEqual(JSON.parse(JSON.stringify(scheduleJsonSchema())));
  });

  const files = readdirSync('tariffs', { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.yaml'));
  it.each(files)('accepts %s', (name) => {
    const text = readFileSync(path.join('tariffs', name), 'utf8');
    expect(isValid(read(text)), JSON.stringify(validate.errors)).toBe(true);
  });

  it.each(files.filter((name) => !name.includes(path.sep)))('is named for editors by %s', (name) => {
    const [first] = readFileSync(path.join('tariffs', name), 'utf8').split('\n');
    expect(first).toBe('# yaml-language-server: $schema=./schedule.schema.json');
  });

  it.each([
    ['millrace', millrace],
    ['millrace-plain', millracePlain],
    ['kestrel', kestrel],
    ['tidewater', tidewater],
  ])('accepts %s', (_, text) => {
    expect(isValid(read(text)), JSON.stringify(validate.errors)).toBe(true);
  });

  it.each<[string, string, string]>([
    ['a misspelt part', 'quantities:', 'quantites:'],
    ['a missing currency', 'currency: EUR', ''],
    ['a wrong date', 'inForce: 2026-01-01', 'inForce: 1 January 2026'],
    ['an unknown way to divide', 'straddle: intervals', 'straddle: interval'],
    ['a misspelt field', 'each: hour', 'eahc: hour'],
    ['an unknown cell', 'each: hour', 'each: week'],
    ['a word among numbers', 'default: 2000', 'default: much'],
    ['two kinds in one entry', '{ highest: kva }', '{ highest: kva, sum: kvarhLagging }'],
    ['a quantity that says nothing', '{ highest: kva }', '{ unit: kVA }'],
    ['a charge without group', 'rate: 0.0180, group: reactive', 'rate: 0.0180'],
    ['an unknown group', 'group: tax }', 'group: taxes }'],
    ['a charge without rate', 'rate: 0.0180, ', ''],
    ['rate and tiers', 'per: allKwh, rate: fuel,', 'per: allKwh, rate: fuel, tiers: [ { rate: 1 } ],'],
    ['months in a charge', 'rate: fuel', 'rate: { months: { 2026-07: { a: 1 } } }'],
    ['a month that is none', '2026-07: 0.0031', '2026-13: 0.0031'],
    ['an unknown kind of day', 'days: weekdays, hours: 10:00-20:00', 'days: workdays, hours: 10:00-20:00'],
    ['a loose clock', '10:00-20:00', '10-20'],
    ['a window without hours', ', hours: 22:00-06:00', ''],
    ['a wrong demand window', '15 min', '15 minutes'],
    ['a wrong rounding', 'rounding: 0.01', 'rounding: cents'],
    ['a capital name', 'maxKva:      {', 'MaxKva:      {'],
    ['a list in in', 'in: night', 'in: [night, peak]'],
    ['a decimal comma', '{ summer: 11.50, winter: 8.20 }', '9,80'],
    ['a misspelt field in a version', 'reactive:  { rate: 0.0210', 'reactive:  { rtae: 0.0210'],
    ['a version of a head field', 'note: Sheet 5', 'currency: USD'],
  ])('refuses %s, as the reader does', (_, found, written) => {
    if (!millrace.includes(found)) throw new Error(`The working schedule does not hold ${found}`);
    const text = millrace.replace(found, written);
    expect(isValid(read(text))).toBe(false);
    expect(problemsOf(() => readSchedule(text)).length).toBeGreaterThan(0);
  });
});

describe('the table of fields', () => {
  const own = hosts.flatMap((host) => host.fields.map((field) => [host.name, field.name, host, field] as const));

  it.each(own)('in %s reader and schema take %s', (_, name, host, field) => {
    const document = host.document({ ...host.least(name), [name]: exampleOf(field) });
    expect(problemsOf(() => readSchedule(textOf(document)))).toEqual([]);
    expect(isValid(document), JSON.stringify(validate.errors)).toBe(true);
  });

  it.each(hosts.map((host) => [host.name, host] as const))('in %s both refuse any other field', (_, host) => {
    const others = allFields.filter(({ name }) => !host.fields.some((field) => field.name === name));
    let refused = 0;
    for (const field of [...others, { ...allFields[0]!, name: 'other' }]) {
      const document = host.document({ ...host.least(field.name), [field.name]: exampleOf(field) });
      expect(isValid(document), `${field.name}: ${said(document)}`).toBe(isRead(document));
      if (!isValid(document)) refused++;
    }
    // A charge per a quantity that also says percentOf is another kind of charge.
    expect(refused).toBeGreaterThanOrEqual(others.length);
  });

  const required = own.filter(([, , , { isRequired }]) => isRequired);
  it.each(required)('in %s both ask for %s', (_, name, host) => {
    const { [name]: __, ...rest } = host.document({ ...host.least(), [name]: undefined });
    const document = host.name === 'a schedule' ? rest : host.document(without(host.least(), name));
    expect(isRead(document)).toBe(false);
    expect(isValid(document)).toBe(false);
  });

  // What a version may change: any field of an entry that is there.
  const changed = hosts.filter(({ name }) => /^a (window|quantity|charge)/.test(name));
  it.each(changed.flatMap((host) => host.fields.map((field) => [host.name, field.name, host, field] as const)))(
    'in a version of %s both take %s',
    (hostName, name, host, field) => {
      const section = hostName.startsWith('a window')
        ? 'windows'
        : hostName.startsWith('a q')
          ? 'quantities'
          : 'charges';
      const other = host.fields.find((needs) => needs.name === field.needs);
      const needed = other && { [other.name]: exampleOf(other) };
      const change = { '2026-07-01': { [section]: { other: { ...needed, [name]: exampleOf(field) } } } };
      const document: Document = { ...host.document(host.least()), versions: change };
      expect(problemsOf(() => readSchedule(textOf(document)))).toEqual([]);
      expect(isValid(document), JSON.stringify(validate.errors)).toBe(true);
      const removed = { '2026-07-01': { [section]: { other: 'removed' } } };
      expect(isValid({ ...document, versions: removed })).toBe(true);
    },
  );

  it.each(['windows', 'quantities', 'charges', 'contract'])(
    'lets a version add to %s before another entry',
    (section) => {
      const entries: Record<string, Document> = {
        windows: { days: 'weekdays', hours: '08:00-12:00' },
        quantities: { sum: 'kwh' },
        charges: { amount: 1, group: 'fixed' },
        contract: { unit: 'kW', default: 1 },
      };
      const added = { extra: { ...entries[section], before: 'end' } };
      const uses = section === 'windows' ? { quantities: { q: { sum: 'kwh', in: 'extra', before: 'end' } } } : {};
      const spent =
        section === 'contract' ? { charges: { c: { amount: 'extra', group: 'fixed', before: 'end' } } } : {};
      const document = hosts[0]!.document({ versions: { '2026-07-01': { [section]: added, ...uses, ...spent } } });
      expect(problemsOf(() => readSchedule(textOf(document)))).toEqual([]);
      expect(isValid(document), JSON.stringify(validate.errors)).toBe(true);
      const outside = hosts[0]!.document({ [section]: added });
      const problems = problemsOf(() => readSchedule(textOf(outside)));
      expect(problems.map(({ message }) => message)).toContain('is said outside a version.');
      expect(isValid(outside)).toBe(false);
    },
  );

  it('needs nothing that a browser lacks', () => {
    const seen = new Set<string>();
    const follow = (file: string): void => {
      if (seen.has(file)) return;
      seen.add(file);
      for (const [, from = ''] of readFileSync(file, 'utf8').matchAll(/^(?:import|export)[^;]*? from '([^']+)';/gm)) {
        expect(from, `${file} imports ${from}`).toMatch(/^\./);
        const target = path.join(path.dirname(file), from);
        follow(existsSync(`${target}.ts`) ? `${target}.ts` : path.join(target, 'index.ts'));
      }
    };
    follow('src/core/tariff/grammar/index.ts');
    expect(seen.size).toBeGreaterThan(5);
  });

  it('says what may stand at a place', () => {
    const names = (where: string): string[] => {
      const takes = takesAt(where.split('.'));
      return takes?.kind === 'set' ? takes.fields.map(({ name }) => name) : [];
    };
    expect(names('source')).toContain('publisher');
    expect(names('contract.contractKva')).toContain('range');
    expect(names('charges.energy.tiers.1')).toEqual(['to', 'rate']);
    expect(names('versions.2026-08-01.charges.energy.tiers.1')).toEqual(['to', 'rate']);
    expect(names('versions.2026-08-01')).toContain('note');
    expect(names('examples.1.readings')).toContain('kvarhLeading');
    expect(takesAt(['quantities', 'maxKva'])).toMatchObject({ kind: 'kinds', kinds: scheduleGrammar.quantityKinds });
    expect(takesAt(['windows', 'peak', '1', 'hours'])).toMatchObject({ kind: 'list' });
    expect(takesAt(['rates', 'fuel', 'months'])).toMatchObject({ kind: 'entries', key: 'month' });
    expect(takesAt(['charges', 'energy', 'rate', 'peak'])).toEqual({ kind: 'place', by: ['season'] });
    expect(takesAt(['charges', 'energy', 'rate', 'peak', 'summer'])).toMatchObject({ kind: 'formula' });
    expect(takesAt(['quantities', 'maxKva', 'highest', 'kva'])).toBeUndefined();
    expect(takesAt(['nowhere', 'peak'])).toBeUndefined();
  });
});

function without(set: Document, name: string): Document {
  return Object.fromEntries(Object.entries(set).filter(([key]) => key !== name));
}
