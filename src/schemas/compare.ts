import type { BreakEvens, ChargeGroup } from '../core/tariff';
import type { PricingRoute } from './pricing';
import type { ContractField, HistoryField } from './tariff';

/** A schedule taken into a comparison, with what its contract would supply. */
export interface CompareChoice {
  id: string;
  contract: Record<string, number>;
  history: Record<string, number[]> | null;
}

/** Schedules compared at once, the standing one left out. */
export const mostCompared = 4;
const mostMonths = 60;

/** The comparison as the address of its page keeps it. */
export function compareQuery(choices: CompareChoice[]): URLSearchParams {
  const query = new URLSearchParams();
  for (const { id, contract, history } of choices) {
    query.append('with', id);
    for (const [name, value] of Object.entries(contract)) query.append(`${id}.${name}`, String(value));
    for (const [name, values] of Object.entries(history ?? {})) query.append(`${id}.past.${name}`, values.join(' '));
  }
  return query;
}

/** Reads the address back; what is no number becomes NaN, for the schedule's own check to refuse. */
export function compareChoices(query: URLSearchParams): CompareChoice[] {
  const ids = [...new Set(query.getAll('with'))].slice(0, mostCompared);
  return ids.map((id) => {
    const own = [...query].flatMap(([key, text]): [string, string][] =>
      key.startsWith(`${id}.`) ? [[key.slice(id.length + 1), text]] : [],
    );
    const numbers = (text: string) => text.split(/\s+/).filter(Boolean).slice(0, mostMonths).map(Number);
    const history = own.flatMap(([key, text]): [string, number[]][] =>
      key.startsWith('past.') ? [[key.slice(5), numbers(text)]] : [],
    );
    const contract = own
      .filter(([key]) => !key.includes('.'))
      .map(([key, text]) => [key, Number(text || NaN)] as const);
    return {
      id,
      contract: Object.fromEntries(contract),
      history: history.length > 0 ? Object.fromEntries(history) : null,
    };
  });
}

/** A bill under one of the schedules, in major units. */
export interface ComparedBill {
  total: number;
  reactiveCost: number;
  groups: Record<ChargeGroup, number>;
}

/** A schedule priced over the year, or why it cannot be. */
export type ComparedSchedule =
  { id: string; bills: ComparedBill[]; notes: string[]; isHistoryTold: boolean } | { id: string; refused: string };

/** Cost of the year under each priced schedule, over a varied load. */
export interface CompareSweep {
  /** In order of the place; costs in order of `ids`. */
  points: { place: number; powerFactor: number; costs: number[] }[];
  /** The standing schedule first. */
  ids: string[];
  /** The standing schedule against each other. */
  pairs: { id: string; found: BreakEvens }[];
}

export interface CompareResult {
  schedules: ComparedSchedule[];
  /** Share of lagging kvarh taken away, and factor on the whole load; null where there is no load or nothing to compare. */
  byShare: CompareSweep | { refused: string } | null;
  byFactor: CompareSweep | { refused: string } | null;
  /** Energy of the periods, from the load or else from the lines of energy; null where neither tells. */
  kwh: number | null;
  powerFactor: number | null;
}

/** A schedule of the library that may be compared. */
export interface CompareCandidate {
  id: string;
  title: string;
  publisher: string | null;
  inForce: string | null;
  currency: string;
  contract: ContractField[];
  history: HistoryField[];
  chosen: boolean;
  /** What its fields begin with: as chosen, else as the standing contract says under the same name. */
  start: { contract: Record<string, number>; history: Record<string, number[]> | null };
}

/** A schedule that cannot be taken, and why. */
export interface NotComparable {
  id: string;
  title: string;
  reason: string;
}

/** One schedule over the year; amounts in minor units. */
export interface CompareColumn {
  id: string;
  /** Short name for heads and sentences: "LP-4". */
  name: string;
  title: string;
  isStanding: boolean;
  months: { totalMinor: number; reactiveMinor: number }[];
  totalMinor: number;
  /** Less the standing schedule's: negative is cheaper. */
  differenceMinor: number;
  reactiveMinor: number;
  groups: Record<ChargeGroup, number>;
  /** Per kWh, in major units; null where the energy is not known. */
  perKwh: number | null;
  /** Quantities its ratchets look back at beyond the year, told by nobody. */
  untold: string[];
  notes: string[];
}

/** Cost of the year over a varied load. */
export interface SweepView {
  ids: string[];
  points: { place: number; powerFactor: number; costs: number[] }[];
  /** A sentence or two for each other schedule. */
  words: { id: string; name: string; finding: string }[];
  /** Places at which a pair costs the same, for the picture. */
  marks: { id: string; place: number; cost: number }[];
}

/** A year under several schedules. */
export interface CompareView {
  currency: string;
  route: PricingRoute;
  months: { name: string; from: string; to: string }[];
  /** The standing schedule first. */
  columns: CompareColumn[];
  kwh: number | null;
  powerFactor: number | null;
  byShare: SweepView | null;
  byFactor: SweepView | null;
  /** Why break-evens are not looked for; null where they are. */
  noBreakEvens: string | null;
}
