import type { TryInput, TryView } from '../schemas/try-out';
import { call } from './api';

/** Prices a month told in short at an address that tries months on a schedule. */
export const tryMonth = (path: string, input: TryInput) => call<TryView>('POST', path, input);
