import { z } from 'zod';

/** One line of reasoning, as the why panel lists it. */
export interface WhyStepView {
  label: string;
  working?: string;
  result?: string;
  kind?: 'plain' | 'picked' | 'equals' | 'fault';
  source?: string;
}

/** The local day of the cell that set a peak, in means of `stepMinutes`; null where a reading is missing. */
export interface DayPicture {
  /** Local date, YYYY-MM-DD. */
  date: string;
  stepMinutes: number;
  points: { minute: number; kw: number | null; kvarLagging: number | null; kvarLeading: number | null }[];
  peak: { minute: number; kw: number; kvarLagging: number; powerFactor: number } | null;
  /** The quantity whose peak it is. */
  quantity: string;
  value: number;
  unit: string;
}

/** One period a ratchet can look at. */
export interface LookBackBar {
  name: string;
  value: number;
  unit: string;
  /** Whether the look-back reaches it, and whether it set the value. */
  counted: boolean;
  used: boolean;
  /** The bill in question itself. */
  current: boolean;
}

export interface LookBackPicture {
  title: string;
  unit: string;
  bars: LookBackBar[];
  usedValue: number;
}

/** Everything behind one figure of the tariff sheet. */
export interface WhyView {
  title: string;
  steps: WhyStepView[];
  causes?: { label: string; off: string; fits: boolean }[];
  source?: string;
  sourceHref?: string;
  day: DayPicture | null;
  lookBack: LookBackPicture | null;
  /** Figures this one rests on, to open in turn. */
  next: { figure: string; label: string }[];
}

/** Which figure is asked: of the bill as a whole, of a group of lines, of a line, of a quantity or an input. */
export const whyQuery = z.object({
  bill: z.coerce.number().int().positive(),
  figure: z
    .string()
    .regex(/^(total|billed|difference|(group|line|name):[A-Za-z][A-Za-z0-9]*)$/, 'There is no such figure.'),
});
export type WhyQuery = z.infer<typeof whyQuery>;
