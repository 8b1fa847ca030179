import { toConfirm, type IntakePreview, type IntakeView } from '../../schemas/intake';
import { Button } from '../ui/Button';
import { formatCount, formatDateTime, formatNumber } from '../ui/format';
import type { IntakeActions } from './IntakeSheet';
import { isKnown } from './interval-words';
import { SheetPart } from './Sheet';

export interface KeepStepProps {
  intake: IntakeView;
  preview: IntakePreview;
  actions: IntakeActions;
}

/** What goes where, in a sentence, and the button. */
export function KeepStep({ intake, preview, actions }: KeepStepProps) {
  const { state } = intake;
  const left = toConfirm(preview, intake.confirmed).count;
  const readable = preview.problems.length === 0 && preview.report !== null;
  const waiting = !readable ? 'after the file can be read' : left > 0 ? 'after your word for what is not sure' : null;
  const what =
    preview.kind === 'bills'
      ? formatCount(preview.bills.length, 'bill')
      : formatCount((preview.report?.intervals ?? 0) - (preview.report?.missing ?? 0), 'reading');
  return (
    <SheetPart
      id="keep"
      number="4"
      title="Keep"
      reference={<p>The file itself is kept beside what it brought in, with its check sum.</p>}
      result={
        <p>
          {state === 'kept'
            ? 'What is priced from it follows when its page is opened.'
            : 'After keeping, the stations that depend on it are worked out again when they are opened.'}
        </p>
      }
    >
      <p className="max-w-[60em]">
        {readable ? sentence(intake, preview) : 'Nothing can be kept until the file can be read.'}
      </p>
      {(state === 'read' || state === 'undone') && (
        <div className="actions mt-4">
          <Button busy={actions.busy} waiting={waiting} onClick={actions.keep}>
            {!readable ? 'Keep' : state === 'undone' ? `Keep ${what} again` : `Keep ${what}`}
          </Button>
        </div>
      )}
    </SheetPart>
  );
}

function sentence(intake: IntakeView, preview: IntakePreview): string {
  const { engagement, state } = intake;
  const go = state === 'kept' ? 'went' : 'go';
  if (preview.kind === 'bills') {
    const first = preview.bills[0]?.period.from;
    return `${formatCount(preview.bills.length, 'bill')} ${go} to engagement ${engagement.code}${first ? ', with their lines and printed quantities' : ''}. Amounts are kept in ${engagement.currency} exactly as printed.`;
  }
  const { report } = preview;
  if (!report) return '';
  const zone = engagement.siteTimeZone;
  const stepMs = (report.stepMinutes ?? 15) * 60_000;
  const channels = [
    isKnown(report.totalKwh) && 'kWh',
    isKnown(report.totalKvarhLagging) && 'lagging kvarh',
    isKnown(report.totalKvarhLeading) && 'leading kvarh',
  ].filter(Boolean);
  const listed = channels.length > 1 ? `${channels.slice(0, -1).join(', ')} and ${channels.at(-1)}` : channels[0];
  const estimated = report.estimated > 0 ? ` ${formatNumber(report.estimated)} of them are marked estimated.` : '';
  return `${formatCount(report.intervals - report.missing, 'reading')} of ${listed} ${go} to meter ${engagement.meter}, from ${formatDateTime(report.firstMs, zone)} to ${formatDateTime(report.lastMs + stepMs, zone)}, ${zone}.${estimated}`;
}
