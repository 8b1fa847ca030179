import {
  billReach,
  boundOf,
  searchSettings,
  simulatePlan,
  spanSeries,
  tryRobustness,
  type Robustness,
  type SearchInput,
  type SearchMotor,
  type SearchResult,
  type Spans,
} from '../../core/plan';
import { localDateStartMs } from '../../core/load';
import { looksBack } from '../../core/tariff';
import { wordNumber } from '../../core/units';
import { spanNames, wholeYear } from '../../schemas/plan-spans';
import type { SearchView } from '../../schemas/search';
import { priceOptionsOf, readyYear, type ReadyYear } from './price-year';
import { weighCapacitors } from './search-capacitors';
import { curvesOf, foundSettings, limitHours, namedNote } from './search-views';
import type { SearchTask, TaskBasis } from './tasks';

const tellEvery = 5;
const triedYears = 16;

/**
 * Searches the field currents that make the year's bills least, tries them on years like the metered one, weighs capacitors and
 * bounds what finer control could bring; tells the port how far it is.
 */
export function searchYear({ basis, asked, spanRules, fingerprint, port }: SearchTask): SearchView {
  const ready = readyYear(basis);
  const { stepA, motorIds } = asked;
  const { spans: set = wholeYear } = asked;
  const names = spanNames(set);
  const spans = spanRules ? spansInOrder(ready, spanRules, names.length) : undefined;
  const input: SearchInput = {
    plant: { ...ready.plant, motors: searchedMotors(ready, stepA, motorIds) },
    fixed: spans ? { spans } : {},
    totals: (load, changed) => ready.pricing.totals(load, { changed }),
    bills: billReach(spans, billIntervals(ready), looksBack(ready.schedule)),
    onProgress: ({ priced, planned }) => {
      if (priced % tellEvery === 0) port.postMessage({ done: priced, planned });
    },
  };
  const found = searchSettings(input);
  port.postMessage({ done: found.priced, planned: found.priced });
  const tellYears = ({ years, planned }: { years: number; planned: number }) =>
    port.postMessage({ done: years, planned, unit: 'trial years' });
  const robust = found.leaveAlone ? null : tryRobustness(input, found, { years: triedYears, onProgress: tellYears });
  const weighed = weighCapacitors({
    ready,
    input,
    found,
    asked,
    tell: (done, planned) => port.postMessage({ done, planned, unit: 'bank sizes' }),
  });
  const saving = found.standingCost - found.cost;
  const year = simulatePlan(ready.plant, { ...input.fixed, controls: found.controls });
  return {
    fields: foundSettings(basis, found.controls, spans !== undefined),
    spans: set,
    yearTotal: found.cost,
    standingTotal: found.standingCost,
    saving,
    priced: found.priced,
    exhaustive: found.exhaustive,
    leaveAlone: found.leaveAlone,
    stepA,
    curves: curvesOf(basis, found, spans ? names : null),
    limits: limitHours(basis, found, year),
    robustness: robust && robustnessOf(basis, robust, spans !== undefined),
    ...weighed,
    bound: boundView(ready, found),
    notes: [...new Set(found.notes.map((note) => namedNote(note, basis.motors)))],
    fingerprint,
  };
}

function searchedMotors({ basis, plant }: ReadyYear, stepA: number, motorIds: number[] | undefined): SearchMotor[] {
  return plant.motors.map((motor, index) => {
    const isSearched = !motorIds || motorIds.includes(basis.motors[index]!.id);
    return { ...motor, searched: isSearched ? { holds: 'field-current', stepA } : null };
  });
}

/** Spans in the order a person named them: a season that comes twice is one. */
function spansInOrder(
  { basis, grid }: ReadyYear,
  { rules, of }: NonNullable<SearchTask['spanRules']>,
  count: number,
): Spans {
  const { index } = spanSeries(rules, grid, basis.timeZone, basis.holidays);
  return { index: index.map((rule) => of[rule]!), count };
}

/** Intervals of each bill. */
function billIntervals({ basis, grid }: ReadyYear): { first: number; end: number }[] {
  const place = (date: string) => {
    const at = Math.round((localDateStartMs(date, basis.timeZone) - grid.startMs) / (grid.stepMinutes * 60_000));
    return Math.min(grid.count, Math.max(0, at));
  };
  return basis.periods.map(({ from, to }) => ({ first: place(from), end: place(to) }));
}

function robustnessOf(basis: TaskBasis, robust: Robustness, bySpan: boolean): SearchView['robustness'] {
  const { years, bestYears, chosen, safer } = robust;
  const { meanSaving, worstSaving } = chosen;
  return {
    years,
    bestYears,
    meanSaving,
    worstSaving,
    safer: safer && {
      fields: foundSettings(basis, safer.controls, bySpan),
      meanSaving: safer.meanSaving,
      worstSaving: safer.worstSaving,
    },
  };
}

/** What no reactive power within the limits can beat, and how far the best found lies above it. */
function boundView(ready: ReadyYear, found: SearchResult): SearchView['bound'] {
  const bound = boundOf({ plant: ready.plant, schedule: ready.schedule, options: priceOptionsOf(ready.basis) });
  if (bound.refused !== undefined) return null;
  const share = (100 * (found.cost - bound.total)) / Math.abs(found.cost || 1);
  const losses =
    bound.freeLossCost !== null && bound.freeLossCost > 0
      ? ' Part of the distance is no room at all: the bound charges each motor only the losses it cannot avoid.'
      : '';
  return {
    total: bound.total,
    words: `The setting found lies ${wordNumber(share, 0.1)} % above it: finer control, hour by hour, can bring no more than that.${losses}`,
  };
}
