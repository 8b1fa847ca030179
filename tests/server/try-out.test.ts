import { describe, expect, it } from 'vitest';
import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { readSchedule } from '@/core/tariff';
import { draftFaults, draftFromQuery, lastMonth, queryOf, tryInputOf, usableDraft } from '@/components/try/draft';
import { tryInput, type TryInput } from '@/schemas/try-out';
import { parseOrThrow } from '@/server/http';
import { openReadable, tryOutOn } from '@/server/services/try-out';
import { buildActor } from '../setup/build';

const lp4 = readSchedule(readFileSync(path.resolve('tariffs/ostrander-lp4.yaml'), 'utf8'));
const millrace = readSchedule(readFileSync(path.resolve('tariffs/millrace-kva.yaml'), 'utf8'));
const input = (given: Partial<TryInput> = {}): TryInput => ({
  from: '2026-02-01',
  to: '2026-03-01',
  kwh: 1_344_000,
  kw: 2000,
  pf: 0.8,
  target: 0.95,
  q: {},
  c: {},
  p: {},
  ...given,
});

describe('openReadable', () => {
  it('is no business of a client, and knows no schedule that is not there', async () => {
    await expect(openReadable(await buildActor({ role: 'client' }), 'ostrander-lp4', 'library')).rejects.toMatchObject({
      status: 404,
    });
    await expect(openReadable(await buildActor(), 'nothing', 'library')).rejects.toMatchObject({ status: 404 });
  });

  it('opens a schedule to any of the staff', async () => {
    expect((await openReadable(await buildActor(), 'ostrander-lp4', 'library')).id).toBe('ostrander-lp4');
  });
});

describe('tryInput', () => {
  it('refuses what is no number, no day and no power factor, each at its field', () => {
    const sent = JSON.parse(
      JSON.stringify(input({ kwh: NaN, kw: -1, pf: 1.2, from: '2026-02-30', q: { maxKw: NaN } })),
    );
    expect(() => parseOrThrow(tryInput, sent)).toThrow(
      expect.objectContaining({
        status: 422,
        fields: {
          kwh: ['Write a number, such as 1,200.5.'],
          kw: ['Write a number from nought on.'],
          pf: ['A power factor lies between 0.1 and 1.'],
          from: ['Choose a day of the calendar.'],
          'q.maxKw': ['Write a number, such as 1,200.5.'],
        },
      }),
    );
  });
});

describe('tryOutOn', () => {
  // The bill worked line by line in tests/core/tariff/library.test.ts: 101,337.37; at unity, and so from 0.95 on, 96,551.01.
  it('prices the month, what poor power factor costs of it, and the month with the field raised', () => {
    const view = tryOutOn(lp4, input());
    expect(view.bill).toMatchObject({ totalMinor: 10_133_737, targetMinor: 9_655_101, poorFactorMinor: 478_636 });
    expect(view.headline.replaceAll('\u00a0', ' ')).toBe(
      'This bill is 101,337.37 USD. With the power factor raised to 0.95 it would be 4,786.36 USD less.',
    );
    const demand = view.bill!.lines.find(({ id }) => id === 'demand')!;
    expect([demand.amountMinor, demand.targetMinor]).toEqual([2_945_000, 2_480_000]);
    expect(demand.why.steps.at(-1)).toMatchObject({ label: 'Demand', source: 'clause 6b' });
    const energy = view.bill!.lines.find(({ id }) => id === 'energyOnPeak')!;
    expect(energy.why.steps[0]?.working).toBe('shared by the hours of the windows');
  });

  it('marks what is assumed, what was typed, and what is a figure of the bill itself', () => {
    const view = tryOutOn(lp4, input({ q: { kwhOnPeak: 300_000 } }));
    expect(view.measured.map(({ key, label, state, words }) => [key, label, state, words])).toEqual([
      ['q.kwhOnPeak', 'Energy, on peak', 'typed', 'as typed'],
      ['q.kwhOffPeak', 'Energy, off peak', 'assumed', 'shares what the other windows leave'],
      ['q.kvarh', 'Reactive energy', 'fixed', 'as above'],
      ['q.maxKw', 'Metered demand', 'fixed', 'as above'],
    ]);
    expect(view.lookBacks).toMatchObject([{ key: 'p.adjustedKw', value: 2375, state: 'assumed' }]);
  });

  // 0.60 x 5,000 of last summer = 3,000 kW against 2,375: 3,000 x 12.40 = 37,200.00 in both columns.
  it('takes one number for every earlier month of a ratchet', () => {
    const view = tryOutOn(lp4, input({ p: { adjustedKw: 5000 } }));
    const demand = view.bill!.lines.find(({ id }) => id === 'demand');
    expect(demand).toMatchObject({ amountMinor: 3_720_000, targetMinor: 3_720_000 });
  });

  it('has no second column where there is nothing to raise, and says so', () => {
    const view = tryOutOn(lp4, input({ pf: 0.97 }));
    expect(view.bill).toMatchObject({ targetMinor: null });
    expect(view.noTarget).toContain('0.970 already');
  });

  it('says what is still to be typed instead of a bill', () => {
    const view = tryOutOn(lp4, input({ kwh: undefined, kw: undefined, pf: undefined }));
    expect(view.bill).toBeNull();
    expect(view.waiting).toEqual(['the kWh', 'kvarh or the power factor', 'the kW']);
    expect(view.headline).toBe('Type the kWh, kvarh or the power factor, and the kW: the bill appears as you type.');
  });

  it('prices without a power factor where the schedule needs none, and then tells no cost of it', () => {
    const plain = readSchedule(
      'schedule: plain\ntitle: Plain\ncurrency: USD\ntimeZone: America/Chicago\nquantities: { kwh: { sum: kwh } }\ncharges: { energy: { per: kwh, rate: 0.1, group: energy } }\n',
    );
    const view = tryOutOn(plain, input({ pf: undefined }));
    expect(view.bill).toMatchObject({ totalMinor: 13_440_000, poorFactorMinor: null, targetMinor: null });
    expect(view.noTarget).toContain('Type kvarh or a power factor');
  });

  it('says what cannot be at the field to change, and keeps every field', () => {
    const faultsOf = (given: Partial<TryInput>, schedule = lp4) => tryOutOn(schedule, input(given)).faults;
    expect(faultsOf({ kw: 1000 })).toEqual({ kw: expect.stringContaining('2,000 kW') });
    expect(faultsOf({ q: { kwhOnPeak: 2_000_000 } })).toEqual({ kwh: expect.stringContaining('2,000,000') });
    expect(faultsOf({ c: { contractKw: 10 } })).toEqual({
      'c.contractKw': 'Contract demand lies between 500 and 20000 kW.',
    });
    expect(faultsOf({ from: '2024-02-01', to: '2024-03-01' })).toEqual({
      from: expect.stringContaining('in force from'),
    });
    expect(faultsOf({ to: '2026-02-01' })).toEqual({ to: 'The last day comes after the first.' });
    expect(faultsOf({ to: '2026-09-01' })).toEqual({ to: expect.stringContaining('212 days') });
    // The fuel rider of September 2025 is not in the file.
    expect(faultsOf({ from: '2025-09-01', to: '2025-10-01' })).toEqual({ form: expect.stringContaining('2025-09') });
    expect(tryOutOn(lp4, input({ kw: 1000 })).measured).toHaveLength(4);
  });

  it('words the result for a mail, with what was assumed', () => {
    const { summary } = tryOutOn(lp4, input());
    expect(summary).toContain('Feb 2026, 1 Feb 2026 to 28 Feb 2026, 28 days');
    expect(summary).toContain('1,344,000 kWh, 2,000 kW, 1,008,000 kvarh, average power factor 0.80');
    expect(summary).toContain('Bill: 101,337.37 USD');
    expect(summary).toContain('With the power factor raised to 0.95: 96,551.01 USD, 4,786.36 USD less in this month');
    expect(summary).toContain('Assumed: Energy, on peak 304,000 kWh, shared by the hours of the windows.');
    expect(summary).not.toContain('\u00a0');
  });

  // 2 to 31 July 2026 has no text border; 16 March to 15 April lies in two seasons of Millrace: priced, with a note.
  it('prices a bill of any dates', () => {
    const view = tryOutOn(millrace, input({ from: '2026-03-16', to: '2026-04-16', kw: 2500 }));
    expect([view.days, view.bill!.notes.length > 0]).toEqual([31, true]);
    expect(view.bill!.notes.join(' ')).toContain('2 seasons');
  });
});

describe('the draft of a try-out', () => {
  const today = '2026-12-01';

  it('goes into the address and comes back', () => {
    const draft = {
      from: '2026-07-01',
      to: '2026-08-01',
      kwh: '1,030,000',
      'q.kwhOnPeak': '420 000',
      'c.contractKw': '',
    };
    const { 'c.contractKw': _empty, ...told } = draft;
    expect(draftFromQuery(new URLSearchParams(queryOf(draft)), today)).toEqual(told);
  });

  it('begins with the month that ended last, and takes no key it does not know', () => {
    expect(lastMonth('2026-03-15')).toEqual({ from: '2026-02-01', to: '2026-03-01' });
    expect(draftFromQuery(new URLSearchParams('kwh=5&nothing=1&q.__proto__=1'), today)).toEqual({
      from: '2026-11-01',
      to: '2026-12-01',
      kwh: '5',
    });
  });

  it('sends numbers as typed, and marks at its field what is none', () => {
    const draft = { from: '2026-07-01', to: '2026-08-01', kwh: '1,030,000', pf: '0,9', 'q.maxKw': 'much' };
    expect(tryInputOf(draft)).toMatchObject({ kwh: 1_030_000, pf: NaN, target: 0.95, q: { maxKw: NaN } });
    expect(Object.keys(draftFaults(draft)).sort()).toEqual(['pf', 'q.maxKw']);
    expect(draftFaults(usableDraft(draft, today))).toEqual({});
  });
});

describe('the forms of the library', () => {
  const folder = path.resolve('tariffs/forms');
  const forms = readdirSync(folder).filter((name) => name.endsWith('.yaml'));

  it.each(forms)('%s gives a bill from kWh, kW and power factor, or says what else it asks', (name) => {
    const form = readSchedule(readFileSync(path.join(folder, name), 'utf8'));
    const view = tryOutOn(form, input());
    expect(view.faults).toEqual({});
    if (view.waiting.length > 0) expect(view.bill).toBeNull();
    else expect(view.bill).not.toBeNull();
  });

  it('give one to a client no more than schedules do', async () => {
    const client = await buildActor({ role: 'client' });
    await expect(openReadable(client, 'kvarh-cliff', 'forms')).rejects.toMatchObject({ status: 404 });
    expect((await openReadable(await buildActor(), 'kvarh-cliff', 'forms')).id).toBe('kvarh-cliff');
  });
});
