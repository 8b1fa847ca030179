import type { FieldControl } from '../machine';
import { USUAL_PERTURBATION, perturbPlant } from './perturb';
import type { Perturbation } from './perturb';
import { createCandidates } from './search-candidates';
import type { Candidates } from './search-candidates';
import type { SearchInput, SearchResult } from './search-settings';
import type { At } from './search-walk';

/** A setting over the perturbed years. */
export interface TriedSetting {
  controls: FieldControl[][];
  bankSteps: number;
  /** Mean of the years' bills and the searched bank's own cost, and their standard deviation. [currency] */
  meanCost: number;
  spreadCost: number;
  /** Mean saving against leaving all as it stands in the same years, and that of the worst year. [currency] */
  meanSaving: number;
  worstSaving: number;
  /** Mean and greatest of what the best of the settings tried would have cost less in the same year. [currency] */
  meanRegret: number;
  worstRegret: number;
}

/** How a chosen setting does in years that are only like the metered one. */
export interface Robustness {
  years: number;
  chosen: TriedSetting;
  standing: TriedSetting;
  /** Settings a few steps away, in the order of their mean cost. */
  neighbours: TriedSetting[];
  /** Years in which nothing tried is cheaper than the chosen setting by more than `tolerance`. */
  bestYears: number;
  tolerance: number;
  /** Best on the metered year's exact data only: another setting costs less in the mean, and by more than chance. */
  onlyOnExactData: boolean;
  /** The neighbour of least mean cost, where it beats the chosen setting by more than chance. */
  safer: TriedSetting | null;
  cancelled: boolean;
}

/** Steps a neighbour lies away on each side. */
const REACH = 3;

/** Share of the saving below which settings are as good as one another. */
const TOLERANCE_SHARE = 0.01;

/** Standard errors of the mean by which a neighbour must be cheaper: about 1 in 100 by chance. */
const STANDARD_ERRORS = 2.6;

/**
 * Tries a chosen setting and its neighbours on perturbed years.
 *
 * Neighbours are up to three steps away on one axis, on both sides, and on all axes of a span together. All are priced on the same
 * years, so that they differ by the setting alone. A setting that stands on the edge of a cliff is cheapest on the metered year and
 * falls over in half of the others: then `onlyOnExactData` is said and the setting of least mean cost is offered.
 *
 * @param input  What was searched over.
 * @param result  What was found.
 * @param how.years  Perturbed years, 24 when absent. Whole, >= 2
 * @param how.seed  Any 32-bit whole number: the same gives the same years.
 * @param how.by  How far the years lie from the metered one.
 * @param how.onProgress  Called after every year; returning false ends the trial with the years so far.
 * @throws {RangeError} naming the argument out of range
 */
export function tryRobustness(
  input: SearchInput,
  result: SearchResult,
  how: {
    years?: number;
    seed?: number;
    by?: Perturbation;
    onProgress?: (progress: { years: number; planned: number }) => boolean | void;
  } = {},
): Robustness {
  const { years = 24, seed = 1, by = USUAL_PERTURBATION, onProgress } = how;
  if (!(Number.isInteger(years) && years >= 2)) throw new RangeError(`years must be a whole number >= 2, got ${years}`);
  const settings = settingsTried(input, result);
  const costs: number[][] = settings.map(() => []);
  let cancelled = false;
  let candidates: Candidates | undefined;
  for (let year = 0; year < years && !cancelled; year++) {
    const plant = perturbPlant(input.plant, (seed + year * 7919) | 0, by);
    candidates = createCandidates(candidateInput(input, result, plant));
    settings.forEach((at, k) => costs[k]!.push(candidates!.price(at).reduce((sum, total) => sum + total, 0)));
    cancelled = onProgress?.({ years: year + 1, planned: years }) === false;
  }
  return judge(settings, costs, candidates!, cancelled);
}

function candidateInput(input: SearchInput, { axes }: SearchResult, plant: SearchInput['plant']) {
  const { fixed = {}, bank, totals, bills } = input;
  return { plant, fixed, bank, totals, bills, axes, spans: fixed.spans?.count ?? 1 };
}

/** Standing first, then the chosen setting, then its neighbours. */
function settingsTried(input: SearchInput, { axes, bankSteps }: SearchResult): At[] {
  const places = [...axes.map(({ place }) => place), ...(input.bank ? [bankSteps] : [])];
  const lengths = [...axes.map(({ settings }) => settings.length), ...(input.bank ? [input.bank.mostSteps + 1] : [])];
  const standing = [...axes.map((axis) => axis.standing), ...(input.bank ? [0] : [])];
  const found = new Map([standing, places].map((at) => [at.join(), at]));
  const isOffered = (at: At) =>
    at.every((k, a) => k >= 0 && k < lengths[a]! && (k !== axes[a]?.standing || axes[a].standingAdmissible));
  const groups = [
    ...places.map((_, axis) => [axis]),
    ...[...new Set(axes.map(({ span }) => span))].map((span) =>
      axes.flatMap((axis, a) => (axis.span === span ? [a] : [])),
    ),
  ];
  for (const group of groups) {
    for (let step = -REACH; step <= REACH; step++) {
      const at = places.map((k, a) => (group.includes(a) ? k + step : k));
      if (step !== 0 && isOffered(at)) found.set(at.join(), at);
    }
  }
  return [...found.values()];
}

function judge(settings: At[], costs: number[][], candidates: Candidates, cancelled: boolean): Robustness {
  const years = costs[0]!.length;
  const least = Array.from({ length: years }, (_, year) => Math.min(...costs.map((own) => own[year]!)));
  const tried = settings.map((at, k) => figuresOf(at, costs[k]!, costs[0]!, least, candidates));
  const chosenAt = settings.length > 1 && tried.length > 1 ? 1 : 0;
  const chosen = tried[chosenAt]!;
  const tolerance = Math.max(0.01, TOLERANCE_SHARE * Math.abs(chosen.meanSaving));
  const bestYears = costs[chosenAt]!.filter((cost, year) => cost <= least[year]! + tolerance).length;
  const order = tried.map((_, k) => k).filter((k) => k > chosenAt);
  order.sort((a, b) => tried[a]!.meanCost - tried[b]!.meanCost || a - b);
  const [best] = order;
  const isSafer = best !== undefined && beats(costs[best]!, costs[chosenAt]!, tolerance);
  return {
    years,
    chosen,
    standing: tried[0]!,
    neighbours: order.map((k) => tried[k]!),
    bestYears,
    tolerance,
    onlyOnExactData: isSafer,
    safer: isSafer ? tried[best]! : null,
    cancelled,
  };
}

function figuresOf(at: At, own: number[], standing: number[], least: number[], candidates: Candidates): TriedSetting {
  const meanCost = mean(own);
  const savings = own.map((cost, year) => standing[year]! - cost);
  const regrets = own.map((cost, year) => cost - least[year]!);
  return {
    controls: candidates.controlsOf(at),
    bankSteps: candidates.stepsOf(at),
    meanCost,
    spreadCost: spread(own),
    meanSaving: mean(savings),
    worstSaving: Math.min(...savings),
    meanRegret: mean(regrets),
    worstRegret: Math.max(...regrets),
  };
}

/** Whether costs are less than others in the mean of the same years, by more than a tolerance and more than chance. */
function beats(own: number[], others: number[], tolerance: number): boolean {
  const gains = others.map((cost, year) => cost - own[year]!);
  const error = spread(gains) / Math.sqrt(gains.length);
  return mean(gains) > tolerance && mean(gains) > STANDARD_ERRORS * error;
}

function mean(values: number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

/** Standard deviation of a sample. */
function spread(values: number[]): number {
  if (values.length < 2) return 0;
  const middle = mean(values);
  return Math.sqrt(values.reduce((sum, value) => sum + (value - middle) ** 2, 0) / (values.length - 1));
}
