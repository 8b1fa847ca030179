import { describe, expect, it } from 'vitest';
import { answer, comesBack, costNow, paidBack, paybackFinding, toDo } from '@/components/report/words';
import type { EditionContent, EditionPlan } from '@/schemas/edition';
import { editionLetter } from '@/server/mail/edition-letter';
import { buildEditionContent } from '../setup/edition';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');
const base = buildEditionContent();

/** An edition of a plan that differs from the one that pays by what is given. */
const edition = (given: Partial<EditionPlan>, rest: Partial<EditionContent> = {}): EditionContent => ({
  ...base,
  plan: { ...base.plan, ...given },
  ...rest,
});
const worth = (npv: number) => ({ ...base.plan.appraisal, npv });
const letterOf = (content: EditionContent) =>
  plain(
    editionLetter({ content, recipientName: 'Mira', greeting: '', link: 'http://a.example/', linkEnds: null }).text,
  );

const never = { paybackWords: 'never', paybackSpread: { lowMonths: 0, highMonths: 0 } };
const dearer = edition({ ...never, saving: -13_773, appraisal: worth(-92_919) });
const idle = edition({ ...never, saving: 0, capitalCost: 0, appraisal: worth(0) });
const ruinous = edition({ ...never, capitalCost: 5_000_000, appraisal: worth(-4_700_000) });

describe('a plan that does not pay', () => {
  it('is said to, with the figure that says so, and never that nothing else would', () => {
    expect(plain(answer(dearer))).toBe(
      'Leave the fields as they are: Plan A would make the bills 13,773 USD a year dearer.',
    );
    expect(answer(idle)).toBe('Leave the fields as they are: Plan A saves nothing on the bills.');
    expect(plain(answer(ruinous))).toBe(
      'Leave the fields as they are: the 60,000 USD a year that Plan A saves do not pay for its work and upkeep in 10 years at 8 % interest.',
    );
  });

  it('asks nobody to turn anything', () => {
    for (const content of [dearer, idle, ruinous]) {
      expect(toDo(content)).toBe(
        'Change nothing at the motors, and buy nothing. Plan A was priced and is not proposed.',
      );
    }
  });

  it('has no payback in letter and picture', () => {
    for (const content of [dearer, idle, ruinous]) {
      const letter = letterOf(content);
      expect(letter).toContain('Pays for itself: not within 10 years');
      expect(letter).not.toMatch(/never|at once|samples lie between|After/);
    }
    expect(paybackFinding(dearer)).toBe('There is no saving that could pay for any work.');
    expect(paybackFinding(ruinous)).toBe('The saving does not pay for the work within the horizon.');
    expect(paidBack('never')).toBe('never paid back');
  });

  it('that pays late is told apart from one that never pays', () => {
    // 60,000 a year for 500,000: paid after 100 months, 600,000 in all; at 8 % worth 60,000 x 6.7101 = 402,606 < 500,000.
    const late = edition(
      { capitalCost: 500_000, paybackWords: '100 months', appraisal: worth(-97_394) },
      { cashFlow: [0, 120].map((month) => ({ month, cumulative: -500_000 + month * 5_000 })) },
    );
    expect(plain(paybackFinding(late))).toBe(
      'After 100 months the saving has paid for the work, but not for 8 % interest on it.',
    );
  });
});

describe('what a plan does', () => {
  it('is raise, lower or set, as it is', () => {
    const fields = (...pairs: [number, number][]) =>
      pairs.map(([todayA, fieldA], index) => ({ motorId: index, name: `M-${index + 1}`, fieldA, todayA }));
    expect(toDo(edition({ fields: fields([109, 136]) }))).toMatch(/^Raise the field of M-1 from 109 to 136 A\./);
    expect(toDo(edition({ fields: fields([109, 104]) }))).toMatch(/^Lower the field of M-1 from 109 to 104 A\./);
    expect(toDo(edition({ fields: fields([109, 104], [70, 86]) }))).toMatch(/^Set the field of M-1 .* and of M-2/);
  });

  it('names capacitors with their caution, in report and letter', () => {
    const banks = [
      { name: '', steps: 3, stepKvar: 300, kvar: 900, lossWPerKvar: 0.5, resonance: null, switchings: 0, lossKwh: 0 },
    ];
    const alone = edition({ banks, fields: base.plan.fields.map((one) => ({ ...one, fieldA: one.todayA })) });
    expect(plain(answer(alone))).toMatch(/^900 kvar of capacitors can cut your power bills by 60,000 USD a year/);
    expect(plain(toDo(alone))).toMatch(/Add 900 kvar of capacitors\. Capacitors can resonate with harmonics/);
    expect(letterOf(alone)).toContain('Capacitors can resonate with harmonics');
    const both = edition({ banks });
    expect(plain(answer(both))).toMatch(/^One motor you already own and 900 kvar of capacitors can cut/);
    expect(toDo(both)).not.toContain('no capacitors are bought');
    expect(toDo(base)).toContain('no capacitors are bought');
    expect(letterOf(base)).not.toContain('Capacitors');
  });

  it('needs no payback where nothing is bought', () => {
    const free = edition({ capitalCost: 0, paybackWords: 'at once', paybackSpread: { lowMonths: 0, highMonths: 0 } });
    expect(answer(free)).toMatch(/nothing has to be bought\.$/);
    expect(letterOf(free)).toContain('Pays for itself: at once');
    expect(letterOf(free)).not.toMatch(/samples lie between|After at once/);
  });
});

it('says that bills carry nothing for poor power factor where they do not', () => {
  const content = { ...base, standing: { ...base.standing, reactiveCost: 0 } };
  expect(costNow(content)).toBe('Your bills carry nothing for poor power factor.');
});

describe('what the audit could not see', () => {
  const bill = base.bills[0]!;
  const month = { ...base, bills: [{ ...bill, from: '2025-11-01', to: '2025-12-01' }] };
  const year = { ...base, bills: [{ ...bill, from: '2025-11-01', to: '2026-11-01' }] };

  it('a month of bills is no year', () => {
    expect(plain(answer(month))).toMatch(/by 60,000 USD in the 30 days audited, and/);
    expect(plain(costNow(month))).toMatch(/72,000 USD in the 30 days audited for poor power factor/);
    expect(plain(answer(year))).toMatch(/by 60,000 USD a year, and/);
  });

  it('bills without all readings neither agree nor disagree', () => {
    expect(comesBack({ ...year, billsIncomplete: 1 })).toBe(
      'Readings are missing in every bill, so none could be compared with the schedule.',
    );
    expect(comesBack({ ...year, bills: [bill, bill, bill], billsIncomplete: 1 })).toBe(
      'Two of three bills agree with the schedule. One could not be compared, since readings are missing.',
    );
    expect(comesBack(year)).toMatch(/agree/);
  });
});
