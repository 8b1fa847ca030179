import type {
  AnswerInput,
  ClientRequestView,
  FileActInput,
  ItemDecisionInput,
  RequestChangeInput,
  RequestInput,
  StaffRequestView,
} from '../schemas/request';
import { call, sendFile } from './api';

/** Where a request is found. */
export interface RequestAddress {
  code: string;
  number: number;
}

const all = (code: string) => `/api/engagements/${encodeURIComponent(code)}/requests`;
const one = ({ code, number }: RequestAddress) => `${all(code)}/${number}`;

/** Makes a request and mails it. */
export const sendRequest = (code: string, input: RequestInput) => call<StaffRequestView>('POST', all(code), input);

/** Closes, withdraws, opens again, moves the day, or mails it again to somebody. */
export const changeRequest = (address: RequestAddress, input: RequestChangeInput) =>
  call<StaffRequestView>('PATCH', one(address), input);

/** Accepts what came for an item, or sends it back. */
export const decideItem = (address: RequestAddress, position: number, input: ItemDecisionInput) =>
  call<StaffRequestView>('PATCH', `${one(address)}/items/${position}`, input);

/** Address of a file that came. */
export const requestFilePath = (address: RequestAddress, key: string) => `${one(address)}/files/${key}`;

/** Takes a file into intake, beside a nameplate, aside, or back. */
export const actOnFile = (address: RequestAddress, key: string, input: FileActInput) =>
  call<{ intakeId: number | null; request: StaffRequestView }>('PATCH', requestFilePath(address, key), input);

/** Sends a file for an item; `onProgress` hears the share that has gone up. */
export function sendAnswer(
  address: RequestAddress,
  position: number,
  file: File,
  onProgress: (share: number) => void,
  signal: AbortSignal,
): Promise<ClientRequestView> {
  const query = new URLSearchParams({ fileName: file.name });
  return sendFile(`${one(address)}/items/${position}/uploads?${query}`, file, onProgress, signal);
}

/** Removes a file that was sent. */
export const removeAnswer = (address: RequestAddress, key: string, version: number) =>
  call<ClientRequestView>('DELETE', requestFilePath(address, key), { version });

/** Says that something is not there; null takes it back. */
export const answerInWords = (address: RequestAddress, position: number, input: AnswerInput) =>
  call<ClientRequestView>('PUT', `${one(address)}/items/${position}/answer`, input);
