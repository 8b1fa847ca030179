import { describe, expect, it } from 'vitest';
import { priceQuantities, readSchedule } from '@/core/tariff';
import { chargeCases } from './tariff-charge-cases';
import { energyCases } from './tariff-energy-cases';

describe('published billing rules, from printed quantities', () => {
  it.each([...chargeCases, ...energyCases])(
    '$id gives the published figures',
    ({ schedule, rows, options, expected, tolerance }) => {
      const [bill] = priceQuantities(readSchedule(schedule), rows, options ?? {});
      const found: Record<string, number | undefined> = { total: bill!.total, reactiveCost: bill!.reactiveCost };
      for (const [name, { value }] of Object.entries(bill!.quantities)) found[name] = value;
      for (const { id, amount } of bill!.lines) found[id] = amount;
      for (const [name, value] of Object.entries(expected)) {
        expect(found[name], name).toBeDefined();
        // Half a unit of the printed figures' last digit, and the crumbs of binary arithmetic.
        expect(Math.abs(found[name]! - value), `${name}: ${found[name]} for ${value}`).toBeLessThanOrEqual(
          tolerance + 1e-9,
        );
      }
    },
  );
});
