import { notFound } from './errors';

/** Row id of an address. Anything but a positive whole number is an address with nothing behind it. */
export function rowId(text: string | undefined): number {
  if (!text || !/^[1-9]\d{0,14}$/.test(text)) throw notFound();
  return Number(text);
}
