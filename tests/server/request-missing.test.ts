import { describe, expect, it } from 'vitest';
import type { MonthOfLoad } from '@/schemas/intervals';
import { usualDueDay } from '@/server/services/request-draft';
import { missingBills, missingIntervals, missingPlates, uncoveredStretches } from '@/server/services/request-missing';

const year = { from: '2025-11-01', to: '2026-11-01' };
const bill = (from: string, to: string) => ({ from, to });
const utc = (text: string) => Date.parse(`${text}:00Z`);

describe('uncoveredStretches', () => {
  it('is the whole year without a bill', () => {
    expect(uncoveredStretches([], year)).toEqual([year]);
  });
  it('finds months in between, however short, whatever the order of the bills', () => {
    const bills = [
      bill('2026-03-01', '2026-11-03'),
      bill('2025-11-02', '2026-01-31'),
      bill('2026-01-31', '2026-02-27'),
    ];
    expect(uncoveredStretches(bills, year)).toEqual([{ from: '2026-02-27', to: '2026-03-01' }]);
  });
  it('lets bills read on other days than the year’s fall short of it by fifteen days at its ends', () => {
    expect(uncoveredStretches([bill('2025-11-16', '2026-10-17')], year)).toEqual([]);
    // 1 to 17 November are sixteen days; from 16 October to the end are sixteen too.
    expect(uncoveredStretches([bill('2025-11-17', '2026-10-16')], year)).toEqual([
      { from: '2025-11-01', to: '2025-11-17' },
      { from: '2026-10-16', to: '2026-11-01' },
    ]);
  });
  it('counts bills that lie over each other, or wholly before or after the year, for what they cover', () => {
    const bills = [
      bill('2025-01-01', '2025-02-01'),
      bill('2025-10-20', '2026-05-01'),
      bill('2026-01-01', '2026-02-01'),
    ];
    expect(uncoveredStretches([...bills, bill('2026-12-01', '2027-01-01')], year)).toEqual([
      { from: '2026-05-01', to: '2026-11-01' },
    ]);
  });
});

describe('missingBills', () => {
  it('asks for each stretch with its days', () => {
    const items = missingBills([bill('2025-11-01', '2026-06-01'), bill('2026-07-01', '2026-11-01')], year);
    expect(items).toMatchObject([{ kind: 'bills', from: '2026-06-01', to: '2026-07-01' }]);
    expect(items[0]?.words).toMatch(/^The power bill for these days/);
    expect(missingBills([], year)[0]?.words).toMatch(/^The power bills of the whole year/);
  });
});

describe('missingIntervals', () => {
  const month = (given: Partial<MonthOfLoad>): MonthOfLoad => ({
    from: '2025-11-01',
    intervals: 0,
    present: 0,
    estimated: 0,
    kwh: 1,
    kvarhLagging: 1,
    kvarhLeading: null,
    maxKw: null,
    maxKwMs: null,
    ...given,
  });
  const station = (gaps: [string, string][], months = [month({})]) => ({
    timeZone: 'UTC',
    year: {
      stepMinutes: 15,
      intervals: 0,
      present: 0,
      estimated: 0,
      peak: null,
      gaps: gaps.map(([from, to]) => ({ fromMs: utc(from), toMs: utc(to), intervals: 1 })),
      gapCount: gaps.length,
      fills: [],
      findings: [],
      months,
    },
  });

  it('asks for the whole year where nothing is kept', () => {
    expect(missingIntervals({ timeZone: 'UTC', year: null }, 'OV 1', year)).toMatchObject([
      { kind: 'intervals', ...year, words: expect.stringContaining('OV 1') },
    ]);
  });
  it('asks for a long gap by its days, for several hours in words, and not for minutes', () => {
    const items = missingIntervals(
      station([
        ['2026-04-20T06:00', '2026-04-27T00:00'],
        ['2026-06-01T02:00', '2026-06-01T05:00'],
      ]),
      'OV 1',
      year,
    );
    expect(items).toMatchObject([
      { from: '2026-04-20', to: '2026-04-27' },
      { from: null, words: 'The readings missing in 1 shorter gap: 1 Jun 2026, 02:00' },
    ]);
    expect(missingIntervals(station([['2026-06-01T02:00', '2026-06-01T02:30']]), 'OV 1', year)).toEqual([]);
  });
  it('makes no list of thirty gaps', () => {
    const days = Array.from({ length: 30 }, (_, index) => String(index + 1).padStart(2, '0'));
    const items = missingIntervals(
      station(days.map((day) => [`2026-04-${day}T00:00`, `2026-04-${day}T23:59`] as [string, string])),
      'OV 1',
      year,
    );
    expect(items).toHaveLength(1);
    expect(items[0]?.words).toContain('30 shorter gaps');
    expect(items[0]?.words).toContain('27 more');
  });
  it('asks for reactive energy where the meter’s files have none', () => {
    const without = month({ kvarhLagging: null });
    expect(missingIntervals(station([], [without, without]), 'OV 1', year)).toMatchObject([year]);
    const [some] = missingIntervals(station([], [month({}), month({ ...without, from: '2026-03-01' })]), 'OV 1', year);
    expect(some?.why).toBe('There is no reactive energy for Mar 2026.');
    expect(missingIntervals(station([]), 'OV 1', year)).toEqual([]);
  });
});

describe('missingPlates', () => {
  const assumed = { motorId: 3, motorName: 'M-2', field: 'xdPu', label: 'Xd', value: 1, unit: 'pu', why: '' };
  it('asks for every plate where no motor is entered, and for those with assumed values', () => {
    expect(missingPlates([])).toMatchObject([{ kind: 'nameplate', motorId: null }]);
    const motors = [
      { id: 2, name: 'M-1', drives: null, assumed: [] },
      {
        id: 3,
        name: 'M-2',
        drives: 'Compressor',
        assumed: [{ ...assumed, range: [0, 2] as [number, number], kvarMost: null, kvarEffect: null }],
      },
    ];
    expect(missingPlates(motors)).toMatchObject([{ motorId: 3, why: 'Assumed so far: Xd.' }]);
  });
});

describe('usualDueDay', () => {
  // 2026-12-01 is a Tuesday; two weeks on is one too. From Saturday the 5th it would be a Saturday, from the 6th a Sunday.
  it('is two weeks on, never on a weekend', () => {
    expect(usualDueDay('2026-12-01')).toBe('2026-12-15');
    expect(usualDueDay('2026-12-05')).toBe('2026-12-21');
    expect(usualDueDay('2026-12-06')).toBe('2026-12-21');
  });
});
