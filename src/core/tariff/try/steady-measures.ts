import { localDateStartMs, type BillingPeriod, type LoadSeries } from '../../load';
import type { Schedule } from '../model';
import { textsWithin } from '../compare/needs';
import { evaluateQuantities } from '../price/evaluate-quantities';
import { IntervalSource, layGround } from '../price/interval-source';
import { planPeriods } from '../price/period-plan';
import { checkNames, prepareRun } from '../price/pricing';
import { withPlace } from '../price/run';

/** Steps tried for the made-up series, the longest that cuts no window and no demand window. [min] */
const stepsMinutes = [15, 5, 1] as const;

/**
 * What a schedule measures over a period in which the load stands still: its own windows, seasons, cells, clock changes and rates, by its own
 * formulas. Leading kvarh are nought.
 *
 * @param load.kw  Active power. [kW], >= 0
 * @param load.kvar  Reactive power absorbed. [kvar], >= 0
 * @returns values by name of the quantity; what contract inputs or rates leave open is not in it
 * @throws {PriceError} for a period outside the schedule's time, or contract inputs outside their range
 */
export function steadyMeasures(
  schedule: Schedule,
  period: BillingPeriod,
  load: { kw: number; kvar: number },
  contract: Record<string, number>,
): Map<string, number> {
  checkNames(schedule, { contract });
  const plans = planPeriods(schedule, [period]);
  const series = steadySeries(schedule, period, load);
  const { startMs, stepMinutes, kwh } = series;
  const ground = layGround(schedule, plans, { startMs, stepMinutes, count: kwh.length });
  const source = new IntervalSource(ground, series);
  source.gather(false);
  const run = prepareRun(schedule, plans, { contract }, { source, isUnity: false, wantsNotes: false });
  const [bill] = run.bills;
  const values = new Map<string, number>();
  withPlace(run, bill!, () => {
    for (const state of bill!.pieces) {
      evaluateQuantities(run, bill!, state);
      for (const { name, slot, definition } of state.piece.text.text.quantities) {
        const isMeasured = definition.kind === 'measure' || definition.kind === 'value';
        if (isMeasured && state.known[slot] === 1) values.set(name, state.values[slot]!);
      }
    }
  });
  return values;
}

function steadySeries(
  schedule: Schedule,
  { from, to }: BillingPeriod,
  { kw, kvar }: { kw: number; kvar: number },
): LoadSeries {
  const stepMinutes = stepMinutesFor(schedule, { from, to });
  const startMs = localDateStartMs(from, schedule.timeZone);
  const count = Math.round((localDateStartMs(to, schedule.timeZone) - startMs) / (stepMinutes * 60_000));
  return {
    startMs,
    stepMinutes,
    kwh: new Float64Array(count).fill((kw * stepMinutes) / 60),
    kvarhLagging: new Float64Array(count).fill((kvar * stepMinutes) / 60),
    kvarhLeading: new Float64Array(count),
    quality: new Uint8Array(count),
  };
}

/** Step of a series made up for a period: the longest of those tried that cuts no window and no demand window. [min] */
export function stepMinutesFor(schedule: Schedule, period: BillingPeriod): number {
  const borders = textsWithin(schedule, period).flatMap(({ windows, demandWindow }) => [
    ...[...windows.values()].flatMap(({ rules }) => rules.flatMap(({ spans }) => spans.flat())),
    ...(demandWindow ? [demandWindow.minutes, demandWindow.everyMinutes ?? demandWindow.minutes] : []),
  ]);
  return stepsMinutes.find((step) => borders.every((border) => border % step === 0)) ?? 1;
}
