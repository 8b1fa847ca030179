import { useState } from 'react';
import { ApiError } from '../../client/api';
import {
  fetchIntake,
  giveUpIntake,
  keepIntake,
  matchIntake,
  originalPath,
  readAgain,
  readWithMap,
  rememberMap,
  undoIntake,
} from '../../client/intake';
import { Queries } from '../../client/queries';
import type { ColumnMap } from '../../core/intake';
import { toConfirm, type IntakeView, type OverlapChoice } from '../../schemas/intake';
import { Button, ButtonLink } from '../ui/Button';
import { formatBytes, formatDateTime, formatSpelled } from '../ui/format';
import { Notice, type Problem } from '../ui/Notice';
import { CheckBills } from './CheckBills';
import { CheckIntervals } from './CheckIntervals';
import { foldProblems, intakeHeading, stepsOf } from './intake-words';
import { KeepStep } from './KeepStep';
import { MatchStep } from './MatchStep';
import { BeingRead } from './BeingRead';
import { ReadStep } from './ReadStep';
import { SheetHeading, StepBus } from './Sheet';

/** What the person may do to the file; each answers with the file as it is then. */
export interface IntakeActions {
  busy: boolean;
  match: (columnMap: ColumnMap, more?: { timeZone?: string; confirm?: string[] }) => void;
  confirm: (keys: string[]) => void;
  useMap: (mapId: number) => void;
  /** Reads a file again that could not be read. */
  readAgain: () => void;
  /** Takes up what the job of reading found. */
  takeUp: () => void;
  remember: (name: string) => Promise<string | null>;
  keep: (overlap?: OverlapChoice) => void;
  undo: () => void;
  giveUp: () => void;
}

interface Fault {
  title: string;
  problems: Problem[];
  /** Station of the file that stands in the way. */
  station: boolean;
}

const faultOf = (error: unknown): Fault => {
  if (!(error instanceof ApiError))
    return { title: 'This failed in the browser. Load the page again.', problems: [], station: false };
  const problems = [
    ...((error.details.problems as Problem[] | undefined) ?? []),
    ...Object.values(error.fields).flatMap((messages) => messages.map((message) => ({ message }))),
  ];
  return { title: error.message, problems, station: error.code === 'conflict' };
};

/** What is kept has changed: the page is loaded anew, so that the stations on the bus follow. */
function follow(fault: Fault | null): void {
  if (fault) return;
  window.history.replaceState(null, '', window.location.pathname);
  window.location.reload();
}

function useIntake(initial: IntakeView) {
  const [intake, setIntake] = useState(initial);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<Fault | null>(null);
  const run = async (work: Promise<IntakeView>): Promise<Fault | null> => {
    setBusy(true);
    setFault(null);
    try {
      setIntake(await work);
      return null;
    } catch (error) {
      const found = faultOf(error);
      setFault(found);
      return found;
    } finally {
      setBusy(false);
    }
  };
  const match: IntakeActions['match'] = (columnMap, { timeZone = intake.timeZone, confirm = [] } = {}) => {
    const confirmed = [...new Set([...intake.confirmed, ...confirm])];
    void run(matchIntake(intake.id, { version: intake.version, timeZone, columnMap, confirmed }));
  };
  const actions: IntakeActions = {
    busy,
    match,
    confirm: (keys) => intake.preview && match(intake.preview.columnMap, { confirm: keys }),
    useMap: (mapId) => void run(readWithMap(intake, mapId)),
    readAgain: () => void run(readAgain(intake)),
    takeUp: () => void run(fetchIntake(intake.id)),
    remember: async (name) => (await run(rememberMap(intake.id, name)))?.title ?? null,
    keep: (overlap) => void run(keepIntake(intake, overlap)).then(follow),
    undo: () => void run(undoIntake(intake)).then(follow),
    giveUp: () => void run(giveUpIntake(intake)).then(follow),
  };
  return { intake, fault, actions };
}

/** One file on its way in: Read, Match, Check, Keep. */
export function IntakeSheet({ intake }: { intake: IntakeView }) {
  return (
    <Queries>
      <Steps initial={intake} />
    </Queries>
  );
}

function Steps({ initial }: { initial: IntakeView }) {
  const { intake, fault, actions } = useIntake(initial);
  const { preview, state } = intake;
  return (
    <>
      <SheetHeading title={intakeHeading(intake)} lead={<Lead intake={intake} />}>
        <HeadActions intake={intake} actions={actions} />
      </SheetHeading>
      <StepBus steps={stepsOf(intake)} />
      {fault && (
        <div className="m-4">
          <Notice kind="fault" title={fault.title} problems={fault.problems}>
            {fault.station && (
              <a className="text-link" href={`/engagements/${intake.engagement.code}/${intake.kind}#files`}>
                Open the kept files
              </a>
            )}
          </Notice>
        </div>
      )}
      {preview ? (
        <>
          <ReadStep intake={intake} preview={preview} folded={state === 'kept'} />
          <MatchStep intake={intake} preview={preview} actions={actions} />
          {preview.kind === 'bills' ? (
            <CheckBills intake={intake} preview={preview} actions={actions} />
          ) : (
            <CheckIntervals intake={intake} preview={preview} />
          )}
          <KeepStep intake={intake} preview={preview} actions={actions} />
        </>
      ) : state === 'reading' ? (
        <BeingRead intake={intake} actions={actions} />
      ) : (
        <Refused intake={intake} />
      )}
    </>
  );
}

function Lead({ intake }: { intake: IntakeView }) {
  const { fileName, bytes, broughtBy, broughtAt, engagement, state } = intake;
  const who = broughtBy ? `, brought in by ${broughtBy}` : ', brought in';
  const promise =
    state === 'kept' ? 'Keeping can be undone.' : 'Nothing is stored until you keep it, and keeping can be undone.';
  return (
    <>
      {fileName}, {formatBytes(bytes)}
      {who} on {formatDateTime(broughtAt, engagement.siteTimeZone)}. {promise}
    </>
  );
}

function HeadActions({ intake, actions }: { intake: IntakeView; actions: IntakeActions }) {
  const { state, preview, engagement, kind } = intake;
  const [asked, setAsked] = useState(false);
  const station = `/engagements/${engagement.code}/${kind}`;
  if (state === 'given-up') return <ButtonLink href={station}>Back to the station</ButtonLink>;
  if (state === 'kept') {
    return (
      <>
        {asked ? (
          <>
            <span>Everything this file brought in goes; the file stays.</span>
            <Button kind="secondary" busy={actions.busy} onClick={actions.undo}>
              Undo it
            </Button>
          </>
        ) : (
          <Button kind="secondary" onClick={() => setAsked(true)}>
            Undo
          </Button>
        )}
        <ButtonLink href={station}>See the {kind === 'bills' ? 'bills' : 'readings'}</ButtonLink>
      </>
    );
  }
  if (state === 'reading')
    return (
      <ButtonLink kind="secondary" href={station}>
        Back to the station
      </ButtonLink>
    );
  const left = preview ? toConfirm(preview, intake.confirmed).count : 0;
  const ready = preview !== null && preview.problems.length === 0;
  return (
    <>
      <Button kind="secondary" busy={actions.busy} onClick={actions.giveUp}>
        Give up this file
      </Button>
      {!preview && (
        <Button kind="primary" busy={actions.busy} onClick={actions.readAgain}>
          Read it again
        </Button>
      )}
      {ready && left > 0 && <ButtonLink href="#match">Look at the {formatSpelled(left)} to confirm</ButtonLink>}
      {ready && left === 0 && (
        <ButtonLink kind="secondary" href="#keep">
          Go to Keep
        </ButtonLink>
      )}
    </>
  );
}

/** A file nothing could be made of: what, where, what to do. */
function Refused({ intake }: { intake: IntakeView }) {
  return (
    <section className="columns" id="read">
      <div className="reference">
        <p>The file stays in the drawer exactly as it came, with its check sum.</p>
      </div>
      <div className="working">
        <Notice kind="fault" title="What is wrong with it" problems={foldProblems(intake.problems)} />
        <p className="mt-4 text-sm">
          <a className="text-link" href={originalPath(intake.id)} download={intake.fileName}>
            Download the original
          </a>
        </p>
      </div>
      <div className="result">
        <h3>SHA-256</h3>
        <p className="break-all">{intake.sha256}</p>
      </div>
    </section>
  );
}
