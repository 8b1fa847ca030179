import { useQuery } from '@tanstack/react-query';
import { fetchOverlap } from '../../client/intake';
import { toConfirm, type IntakePreview, type IntakeView } from '../../schemas/intake';
import type { IntervalsOverlap } from '../../schemas/overlap';
import { Button } from '../ui/Button';
import { formatCount, formatDateTime, formatNumber } from '../ui/format';
import { Notice } from '../ui/Notice';
import type { IntakeActions } from './IntakeSheet';
import { isKnown, readingsOf } from './interval-words';
import { KeepBillsOverlap } from './KeepBillsOverlap';
import { KeepChoice } from './KeepChoice';
import { SheetPart } from './Sheet';

export interface KeepStepProps {
  intake: IntakeView;
  preview: IntakePreview;
  actions: IntakeActions;
}

/** What goes where, in a sentence, and the button; where something is kept already, both side by side. */
export function KeepStep({ intake, preview, actions }: KeepStepProps) {
  const { state } = intake;
  const readable = preview.problems.length === 0 && preview.report !== null;
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
        <Choice intake={intake} preview={preview} actions={actions} readable={readable} />
      )}
    </SheetPart>
  );
}

function Choice({ intake, preview, actions, readable }: KeepStepProps & { readable: boolean }) {
  const left = toConfirm(preview, intake.confirmed).count;
  const settled = readable && left === 0;
  const overlap = useQuery({
    queryKey: ['intake-overlap', intake.id, intake.version],
    queryFn: () => fetchOverlap(intake.id),
    enabled: settled,
  });
  const what =
    preview.kind === 'bills'
      ? formatCount(preview.bills.length, 'bill')
      : formatCount((preview.report?.intervals ?? 0) - (preview.report?.missing ?? 0), 'reading');
  if (overlap.error) return <Notice kind="fault" title={overlap.error.message} />;
  const beside = overlap.data;
  if (beside?.kind === 'intervals' && beside.asks) {
    return <KeepChoice intake={intake} overlap={beside} what={what} actions={actions} />;
  }
  if (beside?.kind === 'bills' && beside.asks) {
    return <KeepBillsOverlap intake={intake} overlap={beside} actions={actions} />;
  }
  const waiting = !readable
    ? 'after the file can be read'
    : left > 0
      ? 'after your word for what is not sure'
      : overlap.isLoading && 'after a look at what is kept already';
  return (
    <>
      {beside?.kind === 'intervals' && <Lengths overlap={beside} />}
      <div className="actions mt-4">
        <Button busy={actions.busy} waiting={waiting} onClick={() => actions.keep()}>
          {!readable ? 'Keep' : intake.state === 'undone' ? `Keep ${what} again` : `Keep ${what}`}
        </Button>
      </div>
    </>
  );
}

/** Files of different length of interval are read in the longest. */
function Lengths({ overlap }: { overlap: IntervalsOverlap }) {
  const { kept, comes, compared } = overlap.stepMinutes;
  const shortest = Math.min(comes, ...kept);
  if (shortest === compared) return null;
  return (
    <Notice title={`What is kept will be read as ${readingsOf(compared)}`}>
      {`Files of ${shortest} and of ${compared} minutes are read together in the longer. A demand over fewer than ${compared} minutes cannot be told from them; undoing this file brings the shorter ones back.`}
    </Notice>
  );
}

function sentence(intake: IntakeView, preview: IntakePreview): string {
  const { engagement, state } = intake;
  const went = (count: number) => (state === 'kept' ? 'went' : count === 1 ? 'goes' : 'go');
  if (preview.kind === 'bills') {
    const first = preview.bills[0]?.period.from;
    return `${formatCount(preview.bills.length, 'bill')} ${went(preview.bills.length)} to engagement ${engagement.code}${first ? ', with their lines and printed quantities' : ''}. Amounts are kept in ${engagement.currency} exactly as printed.`;
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
  return `${formatCount(report.intervals - report.missing, 'reading')} of ${listed} ${went(report.intervals - report.missing)} to meter ${engagement.meter}, from ${formatDateTime(report.firstMs, zone)} to ${formatDateTime(report.lastMs + stepMs, zone)}, ${zone}.${estimated}`;
}
