import { describe, expect, it } from 'vitest';
import {
  formatAmount,
  formatBillName,
  formatClock,
  formatDate,
  formatDateTime,
  formatDelivered,
  formatDelivers,
  formatHours,
  formatMajor,
  formatMoney,
  formatNumber,
  formatPayback,
  formatPercent,
  formatPeriod,
  formatQuantity,
  formatWeekday,
} from '@/components/ui/format';

const noBreak = '\u00a0';

describe('formatNumber', () => {
  it('groups thousands and uses the true minus sign', () => {
    expect(formatNumber(-1234567.891, { decimals: 2 })).toBe('\u22121,234,567.89');
  });
  it('gives a value that rounds to nought no sign', () => {
    expect(formatNumber(-0.004, { decimals: 2, signed: true })).toBe('0.00');
  });
  it('signs positive differences on demand', () => {
    expect(formatNumber(3673, { signed: true })).toBe('+3,673');
  });
  it('drops trailing noughts with upTo', () => {
    expect([164, 164.5].map((value) => formatNumber(value, { upTo: 1 }))).toEqual(['164', '164.5']);
  });
});

describe('quantities and money', () => {
  it('keep figure and unit together', () => {
    expect(formatQuantity(1334, 'kvar')).toBe(`1,334${noBreak}kvar`);
    expect(formatPercent(0.9991, 2)).toBe(`99.91${noBreak}%`);
  });
  it('say of reactive power which way it goes, and show no minus', () => {
    expect([637, -382].map(formatDelivered)).toEqual(['637 delivered', '382 absorbed']);
    expect([637, -382].map(formatDelivers)).toEqual([`delivers 637${noBreak}kvar`, `absorbs 382${noBreak}kvar`]);
  });
  // Decimals of USD, JPY and KWD: ISO 4217, list of minor units (2, 0 and 3).
  it('use the minor units of the currency', () => {
    expect(formatMoney(1552491, 'USD')).toBe(`15,524.91${noBreak}USD`);
    expect(formatMoney(1552491, 'JPY')).toBe(`1,552,491${noBreak}JPY`);
    expect(formatAmount(1552491, 'KWD')).toBe('1,552.491');
  });
  it('round to whole units in sentences', () => {
    expect(formatMajor(71884.36, 'USD', { whole: true })).toBe(`71,884${noBreak}USD`);
  });
});

describe('dates and times', () => {
  it('read a local date without shifting it by a zone', () => {
    expect(formatDate('2025-07-10')).toBe('10 Jul 2025');
    expect(formatWeekday('2026-12-18')).toBe('Fri 18 Dec');
  });
  it('print a half-open period with its last day', () => {
    expect(formatPeriod('2025-07-10', '2025-08-11')).toBe('10 Jul – 10 Aug');
    expect(formatPeriod('2025-07-10', '2026-07-10', { year: true })).toBe('10 Jul 2025 to 9 Jul 2026');
  });
  it('name a bill by the month of its middle day, whatever day the meter is read on', () => {
    // Middle days by hand: 2 Nov + 14 = 16 Nov; 18 Oct + 15 = 2 Nov; 10 Jun + 15 = 25 Jun; one day is its own middle.
    const named = [
      { from: '2025-11-02', to: '2025-12-02' },
      { from: '2025-10-18', to: '2025-11-18' },
      { from: '2025-06-10', to: '2025-07-11' },
      { from: '2025-03-01', to: '2025-03-02' },
    ].map(formatBillName);
    expect(named).toEqual(['Nov 2025', 'Nov 2025', 'Jun 2025', 'Mar 2025']);
  });
  it('print an instant in the zone of the site', () => {
    // 22:15 UTC is 17:15 in Chicago under summer time (UTC-5).
    expect(formatDateTime(Date.UTC(2025, 7, 4, 22, 15), 'America/Chicago')).toBe('4 Aug 2025, 17:15');
  });
  it('print minutes as hours and as a clock', () => {
    expect([formatHours(105), formatClock(102)]).toEqual(['1.75', '1:42']);
  });
  it('print a payback in months', () => {
    expect([1.65, 1 / 12, 0.01, 0, null].map(formatPayback)).toEqual([
      '20 months',
      '1 month',
      '1 month',
      'at once',
      'never',
    ]);
  });
});
