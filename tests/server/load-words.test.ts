import { describe, expect, it } from 'vitest';
import { loadDraftOf, loadDraftToInput } from '@/components/motors/load-draft';
import { gapSentence, testSentence, testTable, yearSentence } from '@/components/motors/load-words';
import { shaftLoadInput, type LoadTestView, type ShaftLoadView } from '@/schemas/shaft-load';

const hours = (load: number) => new Array<number>(24).fill(load);

const view: ShaftLoadView = {
  motorId: 7,
  version: 3,
  source: 'submeter',
  profile: { unit: 'kW', weekday: hours(900).with(0, 0), saturday: hours(450.5), sunday: hours(0) },
  whenMissing: 'calendar',
  loadTest: [{ fieldA: 105, inputKw: 620, kvar: 80, sense: 'lagging', voltageV: 4150 }],
  files: [],
  year: { hoursRunning: 5435, usualShaftKw: 1119.4, highestShaftKw: 1200, hoursMissing: 24, hoursBeyond: 0.5 },
  test: null,
};

describe('a shaft load as it is typed', () => {
  it('comes back from the form as it was stored', () => {
    const { version, source, profile, whenMissing, loadTest } = view;
    const input = shaftLoadInput.parse(loadDraftToInput(loadDraftOf(view), version));
    expect(input).toEqual({ version, source, profile, whenMissing, loadTest });
  });

  it('reads a day pasted as a row or a column, and refuses what is no figure', () => {
    const draft = loadDraftOf({ ...view, profile: null, source: 'profile' });
    const filled = {
      unit: 'percent',
      weekday: hours(70).join('\t'),
      saturday: hours(40).join('\n'),
      sunday: hours(0).join('; '),
    };
    const read = (profile: typeof filled) => shaftLoadInput.safeParse(loadDraftToInput({ ...draft, profile }, 0));
    expect(read(filled).data?.profile).toMatchObject({ weekday: hours(70), saturday: hours(40), sunday: hours(0) });
    const wrong = read({ ...filled, saturday: hours(40).with(3, NaN).join(' ').replace('NaN', '4o') });
    expect(wrong.error?.issues[0]?.path).toEqual(['profile', 'saturday', 3]);
  });

  it('leaves out a profile nobody wrote', () => {
    const draft = loadDraftOf({ ...view, profile: null, source: 'calendar' });
    expect(loadDraftToInput(draft, 0)).toMatchObject({ profile: null });
  });
});

describe('what is said of a shaft load', () => {
  const plain = (text: string | null) => text?.replaceAll('\u00a0', ' ');

  it('is where it comes from, and what stands in for missing readings', () => {
    expect(plain(yearSentence('M-1', view))).toBe(
      'By its submeter M-1 runs 5,435 hours of the year, most often at 1,119 kW of shaft load.',
    );
    expect(plain(gapSentence(view))).toContain(
      'no reading for 24 hours of the year: there the shift calendar stands in.',
    );
    expect(plain(gapSentence({ ...view, whenMissing: 'standstill' }))).toContain('taken to stand still');
    expect(plain(gapSentence(view))).toContain('In 0.5 hours it reads more than the field of today can hold');
    expect(gapSentence({ ...view, source: 'calendar' })).toBeNull();
  });

  const row = {
    shaftKw: 594,
    shaftPercent: 40,
    kvarDelivered: -161,
    kvarOff: -241,
    lineA: 88,
    lineOffA: -3.8,
    instrumentsOffPercent: 6,
    fault: null,
  };
  const test: LoadTestView = {
    rows: [row, { ...row, fault: 'pull-out' }],
    offPercent: 9.61,
    compared: 1,
    agrees: false,
    suspects: [{ label: 'Xd', unit: 'pu', value: 1.1, fitted: 0.941, assumed: true, leftPercent: 0.8 }],
  };

  it('names the value that would explain a load test, and what cannot be told', () => {
    expect(plain(testSentence(test))).toBe(
      'Readings and motor data differ by 9.6 % of rated kVA. It would be explained by Xd 0.94 pu in place of 1.1 (assumed), which leaves 0.8 %. ' +
        'One row cannot tell them apart: read a second load at another field. Confirm it before the plate is changed. 1 of 2 rows cannot be: read them again.',
    );
    expect(plain(testSentence({ ...test, suspects: [] }))).toContain('No single value explains it');
    expect(plain(testSentence({ ...test, agrees: true, rows: [row] }))).toBe(
      'Readings and motor data agree within 9.6 % of rated kVA.',
    );
    expect(plain(testSentence({ ...test, offPercent: null }))).toContain('No row can be compared');
  });

  it('shows reactive power by its word, not by a sign, and marks rows that cannot be', () => {
    const { rows } = testTable(test);
    expect(rows[0]?.cells).toMatchObject({ kvar: '161 absorbed', said: { tone: 'warn' } });
    expect(rows[1]).toMatchObject({ kind: 'refused', cells: { shaft: null, said: { value: 'beyond pull-out' } } });
  });
});
