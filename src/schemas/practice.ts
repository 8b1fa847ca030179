/** Time somebody spent, with its worth. Billable minutes that no rate covers are counted apart. */
export interface WorkedView {
  minutes: number;
  billableMinutes: number;
  amountMinor: number;
  unratedMinutes: number;
}

/** Work in progress of one engagement. */
export interface ProgressView extends WorkedView {
  code: string;
  client: string;
  site: string;
  currency: string;
  /** Days since the oldest entry; null without entries. */
  oldestDays: number | null;
  budgetHours: number | null;
  /** Share of the budget used; null without a budget. */
  budgetFraction: number | null;
  people: { name: string; minutes: number }[];
}

/** A person's hours over the recent weeks. */
export interface UtilisationView {
  userId: number;
  person: string;
  role: 'partner' | 'consultant';
  weeks: { minutes: number; billableMinutes: number }[];
  minutes: number;
  billableMinutes: number;
  /** Billable share of the hours told; null where none were told. */
  billableFraction: number | null;
}

/** The practice's own page. */
export interface PracticeView {
  name: string;
  /** Per currency, largest first. */
  totals: (WorkedView & { currency: string })[];
  progress: ProgressView[];
  people: (WorkedView & { person: string; role: string; currency: string })[];
  /** Mondays of the weeks, oldest first; the last is the week under way. */
  weeks: string[];
  utilisation: UtilisationView[];
}
