import type { Place } from '../../../schemas/attachment';

/** A number or date of a page, on its way to a field. */
export interface Offer {
  kind: 'number' | 'date';
  /** As it would be typed: `-1,234.56`, `2026-05-11`. */
  typed: string;
  /** Where it stands, with the text as printed. */
  place: Place;
}

const offerType = 'application/x-counterlag-figure';

/** Lays an offer into what is being dragged; other windows of this application can take it too. */
export function putOffer(data: DataTransfer, offer: Offer): void {
  data.setData(offerType, JSON.stringify(offer));
  data.effectAllowed = 'copy';
}

/** Whether what is being dragged is an offer: while it hovers its content cannot be read. */
export const isOffer = (data: DataTransfer) => data.types.includes(offerType);

/** The offer that was dropped. */
export function takeOffer(data: DataTransfer): Offer | null {
  const text = data.getData(offerType);
  return text === '' ? null : (JSON.parse(text) as Offer);
}
