import type { Trace, TracePoint } from '../core/intake';
import type { BillInput, BillView, MeteredPeriod } from '../schemas/bill';
import type { IntakeView, MatchInput, OverlapChoice } from '../schemas/intake';
import type { IntakePicture } from '../schemas/intervals';
import type { IntakeOverlap } from '../schemas/overlap';
import { call, sendFile } from './api';

type Kind = 'intervals' | 'bills';
type Seen = { id: number; version: number };

/** Brings a file in; `onProgress` hears the share that has gone up. */
export function bringIn(
  code: string,
  { kind, meterId }: { kind: Kind; meterId?: number },
  file: File,
  onProgress: (share: number) => void,
  signal: AbortSignal,
): Promise<IntakeView> {
  const query = new URLSearchParams({ kind, fileName: file.name });
  if (meterId !== undefined) query.set('meterId', String(meterId));
  return sendFile(`/api/engagements/${encodeURIComponent(code)}/uploads?${query}`, file, onProgress, signal);
}

/** Address of the page of a file on its way in. */
export const intakePage = (code: string, id: number) => `/engagements/${encodeURIComponent(code)}/intake/${id}`;

/** Address of a file as it came. */
export const originalPath = (id: number) => `/api/intakes/${id}/original`;

const step =
  (name: 'undo' | 'give-up') =>
  ({ id, version }: Seen) =>
    call<IntakeView>('POST', `/api/intakes/${id}/${name}`, { version });

/** Keeps what a file holds; `overlap` says which stands where something is kept already. */
export const keepIntake = ({ id, version }: Seen, overlap?: OverlapChoice) =>
  call<IntakeView>('POST', `/api/intakes/${id}/keep`, { version, overlap });

/** What is kept and what comes, side by side. */
export const fetchOverlap = (id: number) => call<IntakeOverlap>('GET', `/api/intakes/${id}/overlap`);

/** Takes back what a kept file brought in. */
export const undoIntake = step('undo');

/** Puts a file aside. */
export const giveUpIntake = step('give-up');

/** The file as it is now. */
export const fetchIntake = (id: number) => call<IntakeView>('GET', `/api/intakes/${id}`);

/** Reads a file again that could not be read, or whose reading was stopped. */
export const readAgain = ({ id, version }: Seen) => call<IntakeView>('POST', `/api/intakes/${id}/read`, { version });

/** Where in its file a kept value stands. */
export const fetchTrace = (id: number, at: TracePoint) =>
  call<Trace>('GET', `/api/intakes/${id}/trace?${'ms' in at ? `ms=${at.ms}` : `from=${at.from}`}`);

/** Reads the file again as corrected. */
export const matchIntake = (id: number, input: MatchInput) =>
  call<IntakeView>('POST', `/api/intakes/${id}/match`, input);

/** Remembers the map under a name. */
export const rememberMap = (id: number, name: string) => call<IntakeView>('POST', `/api/intakes/${id}/map`, { name });

/** Reads the file with a remembered map. */
export const readWithMap = ({ id, version }: Seen, mapId: number) =>
  call<IntakeView>('PUT', `/api/intakes/${id}/map`, { version, mapId });

/** What a file that is not kept yet holds by day, and what of it may not be true. */
export const fetchIntakePicture = (id: number) => call<IntakePicture>('GET', `/api/intakes/${id}/load`);

const billsPath = (code: string) => `/api/engagements/${encodeURIComponent(code)}/bills`;

/** Keeps a bill typed by hand. */
export const addBill = (code: string, bill: BillInput) => call<BillView>('POST', billsPath(code), bill);

/** Joins invoices to one bill. */
export const joinBills = (code: string, bills: Seen[], note: string) =>
  call<BillView>('POST', `${billsPath(code)}/join`, { bills: bills.map(({ id, version }) => ({ id, version })), note });

/** Takes a joined bill apart again. */
export const takeBillApart = (code: string, { id, version }: Seen) =>
  call<BillView[]>('POST', `${billsPath(code)}/${id}/apart`, { version });

/** What the kept readings say of a period; null where there are none. */
export const fetchMetered = (code: string, { from, to }: { from: string; to: string }) =>
  call<MeteredPeriod | null>('GET', `${billsPath(code)}/metered?${new URLSearchParams({ from, to })}`);

/** Changes a kept bill against the version seen. */
export const changeBill = (code: string, { id, version }: Seen, bill: BillInput) =>
  call<BillView>('PUT', `${billsPath(code)}/${id}`, { version, bill });

/** Removes a kept bill against the version seen. */
export const removeBill = (code: string, { id, version }: Seen) =>
  call<void>('DELETE', `${billsPath(code)}/${id}`, { version });
