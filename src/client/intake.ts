import type { BillInput, BillView } from '../schemas/bill';
import type { IntakeOverlap, IntakePicture, IntakeView, MatchInput, OverlapChoice } from '../schemas/intake';
import { call, sendFile } from './api';

type Kind = 'intervals' | 'bills';
type Seen = { id: number; version: number };

/** Brings a file in; `onProgress` hears the share that has gone up. */
export function bringIn(
  code: string,
  kind: Kind,
  file: File,
  onProgress: (share: number) => void,
  signal: AbortSignal,
): Promise<IntakeView> {
  const query = new URLSearchParams({ kind, fileName: file.name });
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

/** Changes a kept bill against the version seen. */
export const changeBill = (code: string, { id, version }: Seen, bill: BillInput) =>
  call<BillView>('PUT', `${billsPath(code)}/${id}`, { version, bill });

/** Removes a kept bill against the version seen. */
export const removeBill = (code: string, { id, version }: Seen) =>
  call<void>('DELETE', `${billsPath(code)}/${id}`, { version });
