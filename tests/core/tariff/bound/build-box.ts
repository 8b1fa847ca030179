import { addDays, localDateStartMs, type BillingPeriod, type LoadSeries } from '@/core/load';
import type { LoadBox, PriceOptions, Registers, Schedule } from '@/core/tariff';

/** Numbers from 0 to 1, always the same for a seed. */
export function randomOf(seed: number): () => number {
  let state = seed % 2_147_483_647 || 1;
  return () => (state = (state * 48_271) % 2_147_483_647) / 2_147_483_647;
}

const names = ['kwh', 'kvarhLagging', 'kvarhLeading'] as const;

function room(count: number): Registers {
  return { kwh: new Float64Array(count), kvarhLagging: new Float64Array(count), kvarhLeading: new Float64Array(count) };
}

/**
 * A box of random loads over some local dates: energies of all sizes, some intervals missing, some without energy, ends near to each
 * other, far apart or the same.
 */
export function buildBox(input: {
  from: string;
  to: string;
  timeZone: string;
  stepMinutes: number;
  random: () => number;
}): LoadBox {
  const { timeZone, stepMinutes, random } = input;
  const startMs = localDateStartMs(input.from, timeZone);
  const count = Math.round((localDateStartMs(input.to, timeZone) - startMs) / (stepMinutes * 60_000));
  const box: LoadBox = { startMs, stepMinutes, low: room(count), high: room(count), quality: new Uint8Array(count) };
  const size = 10 ** (1 + 3 * random());
  const spread = [0, 0.001, 0.05, 1][Math.floor(4 * random())]!;
  const hasGaps = random() < 0.3;
  for (let i = 0; i < count; i++) {
    if (hasGaps && random() < 0.02) box.quality[i] = 2;
    const kwh = random() < 0.03 ? 0 : size * (0.2 + random());
    const lagging = random() < 0.2 ? 0 : kwh * random();
    const leading = random() < 0.6 ? 0 : 0.5 * kwh * random();
    for (const [r, middle] of [kwh, lagging, leading].entries()) {
      const half = spread * (r === 0 ? 0.02 : 1) * middle * random();
      const isMissing = box.quality[i] === 2;
      box.low[names[r]!][i] = isMissing ? NaN : Math.max(0, middle - half);
      box.high[names[r]!][i] = isMissing ? NaN : middle + half * random();
    }
  }
  return box;
}

/** A load in a box: in each interval and register an end, or something between. */
export function loadInside(box: LoadBox, random: () => number): LoadSeries {
  const { startMs, stepMinutes, quality, low, high } = box;
  const kind = random();
  const pick = (from: number, to: number): number => {
    const share = kind < 0.3 ? Math.round(random()) : kind < 0.4 ? 0 : kind < 0.5 ? 1 : random();
    return Math.min(to, Math.max(from, from + share * (to - from)));
  };
  const load = { startMs, stepMinutes, quality, ...room(quality.length) };
  for (const name of names) {
    for (let i = 0; i < quality.length; i++)
      load[name][i] = quality[i] === 2 ? NaN : pick(low[name][i]!, high[name][i]!);
  }
  return load;
}

/** What a schedule must be told beside the meter: contract inputs, what bills give, earlier months. */
export function tellOf(schedule: Schedule, periods: BillingPeriod[], random: () => number): PriceOptions {
  const texts = schedule.texts;
  const contract = Object.fromEntries(
    texts
      .flatMap(({ contract: inputs }) => inputs)
      .map((entry) => {
        const [from, to] = entry.range ?? [0, 1000];
        const inRange = Math.round(from + random() * (Math.min(to, from + 3000) - from));
        const date = entry.unit === 'date' ? 20_250_115 : inRange;
        return [entry.name, entry.default !== undefined && random() < 0.7 ? entry.default : date];
      }),
  );
  const givenOf = (): Record<string, number> =>
    Object.fromEntries(
      texts.flatMap(({ quantities }) =>
        quantities.flatMap(({ name, definition, unit }) =>
          definition.kind === 'given' && (definition.default === undefined || random() < 0.3)
            ? [[name, unit === 'flag' ? Math.round(random()) : Math.round(1000 * random())] as const]
            : [],
        ),
      ),
    );
  const measured = texts.flatMap(({ quantities }) => quantities.map(({ name }) => name));
  const history = Object.fromEntries(
    measured
      .filter(() => random() < 0.3)
      .map((name) => [name, [random(), random()].map((share) => Math.round(2000 * share))]),
  );
  return { periods, contract, given: periods.map(givenOf), history };
}

/** Three bills of some days each, one after the other. */
export function shortPeriods(from: string, days: readonly number[]): BillingPeriod[] {
  let at = from;
  return days.map((count) => {
    const period = { from: at, to: addDays(at, count) };
    at = period.to;
    return period;
  });
}
