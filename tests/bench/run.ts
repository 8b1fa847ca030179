import { benchEconomics } from './economics';
import { benchBound } from './bound';
import { benchIntake } from './intake';
import { benchIntakeBook, benchIntakeRows } from './intake-rows';
import { benchKeep } from './keep';
import { benchIntakeMemory } from './intake-memory';
import { benchMinuteYears } from './minute-years';
import { benchPlanRivals } from './plan-rivals';
import { benchPricing } from './pricing';
import { benchRepricing } from './repricing';
import { benchRivals } from './rivals';
import { benchSearch } from './search';
import { benchSearchServer } from './search-server';
import { benchServer } from './server';

/** One measured figure: a ratio within this run, or a rate, with the limit it is held to where there is one. */
export interface Measured {
  name: string;
  figures: string;
  ratio?: number;
  atMost?: number;
  perSecond?: number;
  atLeast?: number;
}

function verdict({ ratio, atMost, perSecond, atLeast }: Measured): string {
  if (ratio !== undefined && atMost !== undefined) return ratio <= atMost ? `within ${atMost}` : `OVER ${atMost}`;
  if (perSecond !== undefined && atLeast !== undefined)
    return perSecond >= atLeast ? `at least ${atLeast}` : `UNDER ${atLeast}`;
  return 'for information';
}

async function main(): Promise<void> {
  const parts = [
    benchPricing,
    benchRepricing,
    benchRivals,
    benchMinuteYears,
    benchSearch,
    benchEconomics,
    benchPlanRivals,
    benchBound,
    benchIntake,
    benchIntakeRows,
    benchIntakeBook,
    benchKeep,
    benchIntakeMemory,
    benchSearchServer,
    benchServer,
  ];
  for (const part of parts) {
    for (const measured of await part()) {
      const value = measured.ratio ?? measured.perSecond;
      process.stdout.write(
        `${measured.name}: ${value?.toFixed(2) ?? ''} (${verdict(measured)}); ${measured.figures}\n`,
      );
    }
  }
}

await main();
