import { describe, expect, it } from 'vitest';
import { toInput as engagementInputOf, emptyDraft as emptyEngagement } from '@/components/engagements/draft';
import { draftToInput, emptyDraft as emptyMotor } from '@/components/motors/draft';
import { typedNumber } from '@/components/ui/typed-number';

// Common practice of English: the decimal mark is a point, commas group by threes. A comma that does not group is refused.
describe('typedNumber', () => {
  it.each([
    ['2,479,826', 2_479_826],
    ['1 234.5', 1234.5],
    ['1,334.5', 1334.5],
    ['\u22123', -3],
    ['.5', 0.5],
    ['12.', 12],
    ['12,5', NaN],
    ['1.234,56', NaN],
    ['1,23,456', NaN],
    ['abc', NaN],
    ['', undefined],
    ['  ', undefined],
  ])('reads %s as %s', (text, expected) => expect(typedNumber(text)).toBe(expected));
});

describe('forms', () => {
  it('never take a decimal comma for tenfold or a grouping comma for a thousandth', () => {
    const motor = { ...emptyMotor(), fieldTodayA: '10,5' };
    expect(draftToInput(motor)).toMatchObject({ fieldTodayA: NaN });
    const choices = { clients: [], currency: 'USD', staff: [], timeZones: [], me: 1 };
    const engagement = { ...emptyEngagement(choices, '2026-12-01'), budgetHours: '1,250' };
    expect(engagementInputOf(engagement).budgetHours).toBe(1250);
  });
});
