import type { ShaftLoadInput, ShaftLoadView } from '../schemas/shaft-load';
import { call, sendFile } from './api';

/** Changes where a motor's load comes from, and its load test. */
export const changeShaftLoad = (motorId: number, input: ShaftLoadInput) =>
  call<ShaftLoadView>('PUT', `/api/motors/${motorId}/shaft-load`, input);

/** Sends a file of a motor's submeter; `onProgress` hears the share that has gone up. */
export function sendSubmeter(
  motorId: number,
  file: File,
  factor: number,
  onProgress: (share: number) => void,
  signal: AbortSignal,
): Promise<ShaftLoadView> {
  const query = new URLSearchParams({ fileName: file.name, factor: String(factor) });
  return sendFile(`/api/motors/${motorId}/submeter?${query}`, file, onProgress, signal);
}

/** Takes a file of a submeter back. */
export const removeSubmeter = (motorId: number, fileId: number) =>
  call<ShaftLoadView>('DELETE', `/api/motors/${motorId}/submeter`, { fileId });
