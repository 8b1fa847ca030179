import type { EngagementRowView } from './engagement';
import type { JobProgress } from './job';

/** Something that waits, why it matters and what happens next. Every one comes from the data. */
export interface WaitingView {
  id: string;
  /** `overdue` and `yours` wait for the reader, `others` for somebody else. */
  group: 'overdue' | 'yours' | 'others';
  mark: 'diamond' | 'hollow' | 'half' | 'circle';
  /** The day it is due, or since when it waits. */
  date: string;
  dateIs: 'due' | 'since';
  /** Days late (overdue) or waited. */
  days: number;
  title: string;
  where: string;
  why: string;
  stake: { amountMinor: number; currency: string; note: string } | { text: string; note: string } | null;
  next: string;
  href: string;
  action: string;
  /** A second way to go on. */
  other?: { href: string; action: string };
}

/** A long work under way, with its engagement. */
export interface RunningView {
  code: string;
  job: JobProgress;
}

/** The first page of staff. */
export interface TodayView {
  date: string;
  waiting: WaitingView[];
  running: RunningView[];
  engagements: EngagementRowView[];
  /** The reader's own hours of the week under way. */
  week: { monday: string; rows: { day: string; code: string; minutes: number }[]; minutes: number };
}
