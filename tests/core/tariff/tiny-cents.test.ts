import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { priceQuantities, type PricedBill } from '@/core/tariff';
import { buildSchedule } from './build';

// Oracle: whole numbers of any length (BigInt). A decimal is its digits and how many of them stand behind the point.

interface Decimal {
  digits: bigint;
  places: number;
}

const decimal = (text: string): Decimal => {
  const [whole = '', fraction = ''] = text.split('.');
  return { digits: BigInt(whole + fraction), places: fraction.length };
};

/** Digits of a decimal with fewer places, half away from zero. */
function roundedTo(places: number, { digits, places: has }: Decimal): bigint {
  if (has <= places) return digits * 10n ** BigInt(places - has);
  const unit = 10n ** BigInt(has - places);
  const size = digits < 0n ? -digits : digits;
  const up = (2n * size + unit) / (2n * unit);
  return digits < 0n ? -up : up;
}

/**
 * Whether doubles can tell on which side of a tie a value lies: it is a tie, or off it by more than 2e-5 of the last place and more than
 * 2e-15 of itself (a double holds 15 to 16 digits, and each operation loses some of the last).
 */
function isTold(places: number, { digits, places: has }: Decimal): boolean {
  if (has <= places) return true;
  const unit = 10n ** BigInt(has - places);
  const size = digits < 0n ? -digits : digits;
  const twiceOff = 2n * (size % unit) - unit;
  const off = twiceOff < 0n ? -twiceOff : twiceOff;
  return off === 0n || (off * 25_000n > unit && off * 10n ** 15n > 4n * size);
}

const times = (a: Decimal, b: Decimal): Decimal => ({ digits: a.digits * b.digits, places: a.places + b.places });

/** A decimal with so many digits behind the point, as text. */
function text(digits: bigint, places: number): string {
  const size = (digits < 0n ? -digits : digits).toString().padStart(places + 1, '0');
  const whole = size.slice(0, size.length - places);
  const fraction = places === 0 ? '' : `.${size.slice(size.length - places)}`;
  return `${digits < 0n ? '-' : ''}${whole}${fraction}`;
}

const period = { from: '2026-03-01', to: '2026-04-01' };

function price(currency: string, kwh: string, rates: string[]): PricedBill {
  const lines = rates.map((rate, i) => `  line${i}: { per: kwh, rate: ${rate}, group: energy }`);
  const schedule = buildSchedule(`quantities:\n  kwh: { sum: kwh }\ncharges:\n${lines.join('\n')}`, { currency });
  return priceQuantities(schedule, [{ ...period, quantities: { kwh: Number(kwh) } }])[0]!;
}

describe('half a cent', () => {
  // By hand: 346,375 x 0.081 = 28,056.375 and 163,625 x 0.064 = 10,472.000: a true tie that binary arithmetic just misses or not.
  it.each([
    ['EUR', '346375', '0.081', 28_056.38],
    ['EUR', '346375', '-0.081', -28_056.38],
    ['EUR', '1', '0.005', 0.01],
    ['EUR', '1', '-0.005', -0.01],
    ['EUR', '1.1', '1.05', 1.16],
    ['EUR', '33', '0.035', 1.16],
    ['EUR', '1.005', '1', 1.01],
    ['EUR', '1.00499', '1', 1],
    ['EUR', '0.00499999', '1', 0],
    ['JPY', '5', '0.1', 1],
    ['JPY', '5', '-0.1', -1],
    ['JPY', '4.99', '0.1', 0],
    ['CLP', '1234.5', '1', 1235],
    ['KWD', '1.0005', '1', 1.001],
    ['KWD', '-1.0005', '1', -1.001],
    ['TND', '7', '0.1235', 0.865],
    ['KWD', '1', '0.00049', 0],
  ])('in %s, %s x %s is %d', (currency, kwh, rate, expected) => {
    const bill = price(currency, kwh, [rate]);
    expect(bill.lines[0]!.amount).toBe(expected);
    expect(bill.total).toBe(expected);
    expect(Object.is(bill.total, -0)).toBe(false);
  });
});

const currencies = [
  ['EUR', 2],
  ['JPY', 0],
  ['CLP', 0],
  ['KWD', 3],
  ['TND', 3],
] as const;

/** A whole number of up to so many digits. */
const wholes = (digits: number) => fc.bigInt({ min: 1n, max: 10n ** BigInt(digits) });

describe.each(currencies)('lines in %s', (currency, places) => {
  const check = (kwh: string, rates: string[]): void => {
    const products = rates.map((rate) => times(decimal(kwh), decimal(rate)));
    fc.pre(products.every((product) => isTold(places, product)));
    const bill = price(currency, kwh, rates);
    const exact = products.map((product) => roundedTo(places, product));
    expect(bill.lines.map(({ amount }) => amount)).toEqual(exact.map((digits) => Number(text(digits, places)) + 0));
    const total = exact.reduce((sum, digits) => sum + digits, 0n);
    expect(bill.total).toBe(Number(text(total, places)) + 0);
  };

  it('are the exact products, rounded half away from zero, and the total is their exact sum', () => {
    const sizes = fc.constantFrom(3, 6, 9).chain((digits) => fc.tuple(wholes(digits + 2), fc.constant(2)));
    const rates = fc.array(fc.tuple(wholes(6), fc.boolean()), { minLength: 1, maxLength: 6 });
    fc.assert(
      fc.property(sizes, rates, ([quantity, decimals], all) => {
        check(
          text(quantity, decimals),
          all.map(([rate, isNegative]) => text(isNegative ? -rate : rate, 5)),
        );
      }),
      { numRuns: 200 },
    );
  });

  it('at exact ties go away from zero, up to a thousand million', () => {
    // An odd number of halves of the last digit, as a product: (2 n + 1) x 0.5 in the last place.
    fc.assert(
      fc.property(wholes(9), fc.boolean(), (n, isNegative) => {
        check(text(2n * n + 1n, 0), [text(isNegative ? -5n : 5n, places + 1)]);
      }),
      { numRuns: 200 },
    );
  });

  it('just below a tie go towards zero, just above away from it, at a thousand million too', () => {
    fc.assert(
      fc.property(wholes(9 + places), fc.constantFrom(49n, 51n, 4n, 6n, 45n, 55n), (n, hundredths) => {
        check(text(n * 100n + hundredths, places + 2), ['1']);
      }),
      { numRuns: 200 },
    );
  });

  it('leave no crumbs in a total of a hundred lines', () => {
    fc.assert(
      fc.property(wholes(places + 9), wholes(places + 2), (large, small) => {
        const rates = Array.from({ length: 100 }, (_, i) =>
          text((i % 2 === 0 ? large : -large) + small * BigInt(i), places),
        );
        check('1', rates);
      }),
      { numRuns: 20 },
    );
  });
});

describe('percentages', () => {
  it('take the printed lines, not what was before rounding, in exact arithmetic', () => {
    const percents = fc.array(wholes(4), { minLength: 1, maxLength: 4 });
    fc.assert(
      fc.property(wholes(10), wholes(5), percents, (kwhDigits, rateDigits, all) => {
        const kwh = text(kwhDigits, 2);
        const rate = text(rateDigits, 5);
        const lines = all.map(
          (percent, i) => `  tax${i}: { percentOf: all above, rate: ${text(percent, 3)}, group: tax }`,
        );
        const schedule = buildSchedule(
          `quantities:\n  kwh: { sum: kwh }\ncharges:\n  energy: { per: kwh, rate: ${rate}, group: energy }\n${lines.join('\n')}`,
        );
        const [bill] = priceQuantities(schedule, [{ ...period, quantities: { kwh: Number(kwh) } }]);
        const product = times(decimal(kwh), decimal(rate));
        fc.pre(isTold(2, product));
        let sum = roundedTo(2, product);
        const expected = [sum];
        for (const percent of all) {
          const exact = { digits: sum * percent, places: 2 + 3 + 2 };
          fc.pre(isTold(2, exact));
          const tax = roundedTo(2, exact);
          expected.push(tax);
          sum += tax;
        }
        expect(bill!.lines.map(({ amount }) => amount)).toEqual(expected.map((digits) => Number(text(digits, 2))));
        expect(bill!.total).toBe(Number(text(sum, 2)));
      }),
      { numRuns: 200 },
    );
  });
});
