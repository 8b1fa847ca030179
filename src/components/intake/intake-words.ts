import type { IntakeProblem } from '../../core/intake';
import { toConfirm, type IntakePreview, type IntakeView } from '../../schemas/intake';
import { capital, formatCount, formatDate, formatSpelled } from '../ui/format';
import type { Problem } from '../ui/Notice';
import { readBill } from './bill-ledger';
import { readBillsHeading } from './bill-words';
import { presentInWords, readingsOf, spanInWords } from './interval-words';
import type { StepTap } from './Sheet';

/** What the file holds, in one sentence; null where it cannot be read yet. */
function holds(preview: IntakePreview, currency: string): string | null {
  const { report } = preview;
  if (!report || preview.problems.length > 0) return null;
  if (preview.kind === 'bills') {
    return readBillsHeading(
      preview.bills.map((bill, index) => readBill(bill, index, currency, undefined)),
      currency,
    );
  }
  const stepMinutes = report.stepMinutes ?? 15;
  const span = spanInWords(report.firstMs, report.lastMs + stepMinutes * 60_000);
  return `${span} of ${readingsOf(stepMinutes)}, ${presentInWords(report.intervals - report.missing, report.intervals)}.`;
}

/** What still wants the person's word: "Two columns want your word before it is kept." */
export function wantsWord(preview: IntakePreview, confirmed: readonly string[]): string | null {
  const { columns, guesses, count } = toConfirm(preview, confirmed);
  if (count === 0) return null;
  const parts = [
    columns.length > 0 && `${formatSpelled(columns.length)} ${columns.length === 1 ? 'column' : 'columns'}`,
    guesses.length > 0 && `${formatSpelled(guesses.length)} ${guesses.length === 1 ? 'decision' : 'decisions'}`,
  ].filter(Boolean);
  return `${capital(parts.join(' and '))} ${count === 1 ? 'wants' : 'want'} your word before it is kept.`;
}

/** The finding of the page. */
export function intakeHeading(intake: IntakeView): string {
  const { state, preview, fileName, engagement, problems } = intake;
  if (state === 'given-up') return `${fileName} was given up. Nothing of it is kept.`;
  if (state === 'reading') return `${fileName} is being read.`;
  if (!preview) return `${fileName} is not read. ${problems[0]?.message ?? ''}`.trim();
  const found = holds(preview, engagement.currency);
  if (!found) return `${fileName} cannot be read yet. ${problems[0]?.message ?? 'See the step Match.'}`;
  const ends: Record<string, string> = {
    kept: `Kept on ${formatDate(intake.keptAt ?? intake.broughtAt, engagement.siteTimeZone)}.`,
    undone: 'Undone: nothing of it is kept.',
  };
  return `${found} ${ends[state] ?? wantsWord(preview, intake.confirmed) ?? 'Look at it, then keep it.'}`;
}

/** The four steps with the reason beneath each. */
export function stepsOf(intake: IntakeView): StepTap[] {
  const { preview, state } = intake;
  const kept = state === 'kept';
  const readable = preview !== null && preview.problems.length === 0;
  const left = preview ? toConfirm(preview, intake.confirmed).count : 0;
  const parts = preview ? preview.columns.length + preview.guesses.length : 0;
  const matched = readable && left === 0;
  const current = !preview ? 'read' : kept ? 'keep' : !matched ? 'match' : 'keep';
  const notes = preview ? thingsToSee(preview) : 0;
  const steps: Omit<StepTap, 'current'>[] = [
    {
      id: 'read',
      label: 'Read',
      done: preview !== null,
      reason: preview ? formatCount(preview.rowsInFile, 'row') : state === 'reading' ? 'being read' : 'not read',
    },
    {
      id: 'match',
      label: 'Match',
      done: matched,
      reason: !readable
        ? state === 'reading'
          ? 'after reading'
          : 'to correct'
        : left === 0
          ? 'all sure'
          : `${parts - left} of ${parts} sure, ${left} to confirm`,
    },
    {
      id: 'check',
      label: 'Check',
      done: matched,
      reason: !readable ? 'after matching' : notes === 0 ? 'nothing odd' : `${formatCount(notes, 'thing')} to look at`,
    },
    { id: 'keep', label: 'Keep', done: kept, reason: kept ? 'kept' : 'nothing stored yet' },
  ];
  return steps.map((step) => ({ ...step, current: step.id === current }));
}

/** Gaps, repeated readings and notes of the reader. */
function thingsToSee({ report }: IntakePreview): number {
  if (!report) return 0;
  return (report.gaps?.length ?? 0) + report.notes.length;
}

const shownOfAKind = 3;

/** Problems with the same remedy told once: the first places, and how many more there are. */
export function foldProblems(problems: IntakeProblem[]): Problem[] {
  const kinds = new Map<string, IntakeProblem[]>();
  for (const problem of problems) kinds.set(problem.remedy, [...(kinds.get(problem.remedy) ?? []), problem]);
  return [...kinds.values()].flatMap((alike) => {
    const more = alike.length - shownOfAKind;
    const shown = alike.slice(0, shownOfAKind).map((problem, index, all) => ({
      ...problem,
      remedy: index === all.length - 1 && more <= 0 ? problem.remedy : undefined,
    }));
    if (more <= 0) return shown;
    return [...shown, { message: `${formatCount(more, 'more place')} of the kind.`, remedy: alike[0]?.remedy }];
  });
}
