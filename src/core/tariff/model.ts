import type { Rounding } from '../units';
import type { Evaluate } from './formula/compile';
import type { Formula } from './formula/ast';
import type { ChannelName } from './channels';
import type { cells, groups, metering, statuses, straddles } from './grammar/words';

/** Group of a bill's line. */
export type ChargeGroup = (typeof groups)[number];

/** How a bill across two texts, seasons or rider months is divided. */
export type Straddle = (typeof straddles)[number];

/** How a bill across borders is divided. */
export interface StraddleRule {
  /** As said, of versions. */
  straddle: Straddle;
  /** How what is shared is shared. */
  division: 'intervals' | 'days';
  /** Whose first or last day decides for the whole bill; null: it is shared. */
  ruledBy: Record<'text' | 'season' | 'month', 'start' | 'end' | null>;
}

/** A formula bound to its names and compiled. */
export interface Expression {
  formula: Formula;
  /** Path in the file, for messages. */
  path: string;
  /** Names it reads (quantities, rates, contract inputs, lines), channels and facts left out. */
  names: string[];
  /** Places of `names` in the array of values. */
  slots: number[];
  /** Channels of the cell it reads. */
  channels: ChannelName[];
  evaluate: Evaluate;
}

/** A number, or one for each season or month. */
export type NumberPlace =
  | { kind: 'same'; expression: Expression }
  | { kind: 'seasons'; bySeason: Expression[] }
  | { kind: 'months'; byMonth: ReadonlyMap<string, Expression>; path: string };

interface Entry {
  name: string;
  slot: number;
  label?: string;
  clause?: string;
  path: string;
}

/** What the site's contract supplies. */
export interface ContractInput extends Entry {
  unit: string;
  default?: number;
  range?: readonly [number, number];
}

/** A number formulas use, or a monthly rider. */
export interface RateEntry extends Entry {
  place: NumberPlace;
}

/** Over what a measure is settled. */
export type CellKind = (typeof cells)[number];

/** A measure over cells. */
export interface MeasureDefinition {
  kind: 'measure';
  operation: 'sum' | 'highest' | 'lowest';
  /** What is measured, in channels of the cell and names above. */
  expression: Expression;
  /** Set where the expression is one bare channel. */
  channel?: ChannelName;
  /** Left out for a plain sum, whose result is the same over any cell. */
  each?: CellKind;
  window?: string;
  where?: Expression;
  count: number;
  isDistinctDays: boolean;
}

/** A channel at the instant another measure was set. */
export interface ValueDefinition {
  kind: 'value';
  expression: Expression;
  channel?: ChannelName;
  at: string;
}

/** Worked out from what stands above. */
export interface FormulaDefinition {
  kind: 'formula';
  expression: Expression;
}

/** A value by steps, highest beginning first. */
export interface PickDefinition {
  kind: 'pick';
  of: Expression;
  steps: { from: number; raw: string; value: Expression }[];
  otherwise: Expression;
}

/** Which periods a look back takes. */
export interface PastSpan {
  kind: 'last' | 'year' | 'streak';
  count: number;
  includesThis: boolean;
  words: string;
}

/** A look back over billing periods. */
export interface PastDefinition {
  kind: 'past';
  expression: Expression;
  take: { kind: 'highest' | 'lowest' | 'mean' | 'sum' | 'count' | 'streak'; highest?: number; words: string };
  over: PastSpan;
  season?: { index: number; name: string; isWholly: boolean };
}

/** Said by the bill, not by the meter. */
export interface GivenDefinition {
  kind: 'given';
  default?: number;
  unity?: number;
}

/** A quantity of the bill. */
export type QuantityEntry = Entry & {
  unit: string;
  rounding?: Rounding;
  definition: QuantityDefinition;
};
export type QuantityDefinition =
  MeasureDefinition | ValueDefinition | FormulaDefinition | PickDefinition | PastDefinition | GivenDefinition;

/** One tier: its upper end, if it has one, and its rate. */
export interface Tier {
  to?: Expression;
  rate: NumberPlace;
}

/** What a line is charged for. */
export type ChargeDefinition =
  | { kind: 'amount'; amount: NumberPlace }
  | { kind: 'per'; per: Expression; perName: string; unit: string; price: Tier[] }
  | {
      kind: 'percent';
      of: string[];
      isAllAbove: boolean;
      per?: Expression;
      perName?: string;
      unit?: string;
      price: Tier[];
    }
  | { kind: 'topUp' | 'cap'; of: string[]; isAllAbove: boolean; to: NumberPlace };

/** A line of the bill. */
export type ChargeEntry = Entry & {
  /** Words for all lines of the charge; `label` adds the window. */
  heading: string;
  group: ChargeGroup;
  rounding: Rounding;
  when?: Expression;
  definition: ChargeDefinition;
};

/** Seasons of the year: names, and the season of every day by month x 32 + day of month. */
export interface SeasonTable {
  names: string[];
  words: string[];
  ofDay: Uint8Array;
}

/** One rule of a window: seasons (empty: all), days as a bit mask, spans of the clock in minutes, each from < to. */
export interface WindowRule {
  seasons: number[];
  days: number;
  spans: (readonly [number, number])[];
}

/** A window of the clock: any of its rules, or all time outside other windows. */
export interface WindowEntry {
  name: string;
  path: string;
  words: string;
  rules: WindowRule[];
  /** Present: all time outside these. */
  restOf?: string[];
}

/** Demand window. [min]; `everyMinutes` present: rolling. */
export interface DemandWindow {
  minutes: number;
  everyMinutes?: number;
}

/** Holidays: the package's calendar with days added and dropped. */
export interface HolidayRule {
  calendar?: string;
  add: string[];
  drop: string[];
}

/** The text of a schedule in force from a day on, merged, expanded, resolved and compiled. */
export interface ScheduleText {
  /** First day, YYYY-MM-DD. */
  from: string;
  note?: string;
  contract: ContractInput[];
  rates: RateEntry[];
  quantities: QuantityEntry[];
  charges: ChargeEntry[];
  families: ReadonlyMap<string, { windows: string[]; members: string[] }>;
  seasons?: SeasonTable;
  windows: ReadonlyMap<string, WindowEntry>;
  holidays: HolidayRule;
  demandWindow?: DemandWindow;
  rounding: Rounding;
  zeroKwh: { pf?: number; ratio?: number };
  /** Whether any number depends on the season, or on the month. */
  dependsOnSeason: boolean;
  dependsOnMonth: boolean;
}

/** Where a schedule comes from. */
export interface ScheduleSource {
  publisher?: string;
  title?: string;
  date?: string;
  status?: (typeof statuses)[number];
  url?: string;
}

/** A stretch of meter readings of an example; the rest of its period counts as missing. */
export interface ExampleReadings {
  /** UTC instant at which the first reading begins. [ms since epoch] */
  startMs: number;
  /** [min] */
  stepMinutes: number;
  /** Energies per interval, all of one length. [kWh, kvarh] */
  kwh: number[];
  kvarhLagging: number[];
  kvarhLeading: number[];
}

/** A worked bill the schedule must reproduce. */
export interface ScheduleExample {
  title: string;
  /** Where its figures come from. */
  source?: string;
  path: string;
  /** Billing period of local dates, half-open. */
  from: string;
  to: string;
  /** As in the options of pricing. */
  contract?: Record<string, number>;
  history?: Record<string, number[]>;
  /** As printed on the bill; with readings, what the bill gives beside the meter. */
  quantities: Record<string, number>;
  readings?: ExampleReadings;
  /** What must come out: quantities, lines, `total`, `reactiveCost`, each within its tolerance. */
  expect: { name: string; value: number; tolerance: number }[];
}

/** A schedule, read and checked. Treat as immutable. */
export interface Schedule extends StraddleRule {
  id: string;
  title: string;
  currency: string;
  timeZone: string;
  source: ScheduleSource;
  /** First day the schedule holds, YYYY-MM-DD; null if the file does not say. */
  inForce: string | null;
  /** Whether a bill is of one meter, or of several whose readings are summed before anything is measured. */
  meters: (typeof metering)[number];
  /** Texts by their first day, the earliest first; at least one. */
  texts: readonly ScheduleText[];
  /** Places of all names in the array of values. */
  slots: ReadonlyMap<string, number>;
  /** Names of lines over all texts, in the order of the bill. */
  lineOrder: readonly string[];
  /** Worked bills of the file, in its order; `checkExamples` prices them. */
  examples: readonly ScheduleExample[];
  notes: { path: string; message: string }[];
}
