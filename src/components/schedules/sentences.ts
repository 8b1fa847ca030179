import type { ScheduleSheetView } from '../../schemas/schedule-sheet';
import { formatCount, formatDate } from '../ui/format';

/** Heading of a schedule's sheet: its title, or what stops it. */
export function scheduleHeadline({ sheet, problems, fileName }: ScheduleSheetView): string {
  if (sheet) return sheet.title;
  const [first] = problems;
  const errors = problems.length === 1 ? 'One error stops' : `${formatCount(problems.length, 'error')} stop`;
  return `${errors} ${fileName}${first ? `, in line ${first.line}: ${first.message}` : '.'}`;
}

/** The line beneath: where it was read, and from when it holds. */
export function scheduleLead({ sheet }: ScheduleSheetView): string {
  if (!sheet) {
    return 'Nothing is priced with a file that has errors; engagements that chose it before keep the text they chose.';
  }
  const { sourceWords, status, inForce } = sheet;
  const kinds = {
    invented: 'invented, of no real utility',
    memory: 'from memory, to be checked before use',
    found: '',
  };
  const words = [sourceWords, kinds[status as keyof typeof kinds], inForce && `in force from ${formatDate(inForce)}`];
  return `${words.filter(Boolean).join('; ')}.`;
}
