import type { GapFillInput, GapFillView, GapPreviews } from '../schemas/gap-fill';
import { call } from './api';

const path = (code: string) => `/api/engagements/${encodeURIComponent(code)}/gap-fills`;

/** What each way to estimate a gap would add. */
export const fetchGapPreviews = (code: string, stretch: { meterId: number; fromMs: number; toMs: number }) => {
  const entries = Object.entries(stretch).map(([name, value]) => [name, String(value)]);
  return call<GapPreviews>('GET', `${path(code)}?${new URLSearchParams(entries)}`);
};

/** Has a gap estimated. */
export const fillGap = (code: string, input: GapFillInput) => call<GapFillView>('POST', path(code), input);

/** Takes an estimate back. */
export const takeBackFill = (code: string, { id, version }: { id: number; version: number }) =>
  call<void>('DELETE', `${path(code)}/${id}`, { version });
