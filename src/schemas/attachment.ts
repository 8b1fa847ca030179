import { z } from 'zod';

/** What can be attached to a bill: browsers show these by themselves or with the reader of PDF. */
export const mediaTypes = ['application/pdf', 'image/jpeg', 'image/png', 'image/webp'] as const;
export type MediaType = (typeof mediaTypes)[number];

/** The largest file of pages. [bytes] */
export const pagesCapBytes = 32 * 1024 * 1024;
/** The largest photo. [pixels] */
export const photoCapPixels = 64_000_000;
/** Pages of one file that are shown. */
export const shownPages = 200;

/** Pages of a bill, or pages that wait for one. */
export interface AttachmentView {
  id: number;
  version: number;
  /** The bill they belong to; null while they wait for it. */
  billId: number | null;
  fileName: string;
  bytes: number;
  sha256: string;
  mediaType: MediaType;
  /** As counted by the browser that attached the file; null where it could not. */
  pageCount: number | null;
  attachedBy: string | null;
  attachedAt: string;
  removed: boolean;
}

/** The answer to a file that was sent. */
export interface AttachedFile {
  attachment: AttachmentView;
  /** The same file was there already: nothing was added. */
  known: boolean;
  /** Other bills of the engagement that have the same file. */
  alsoOf: number[];
}

/** Pages as the table of bills names them. */
export interface BillPages {
  id: number;
  fileName: string;
  kind: 'PDF' | 'photo';
}

const share = z.number().min(0).max(1);

/** Where a value stands on a page: left, top, right, bottom as shares of the page as it is printed upright. */
export const placeShape = z.object({
  attachmentId: z.number().int().positive(),
  page: z.number().int().min(1).max(shownPages),
  box: z.tuple([share, share, share, share]).refine(([left, top, right, bottom]) => left < right && top < bottom, {
    message: 'A place on a page has a width and a height.',
  }),
  /** As printed. */
  text: z.string().min(1).max(80),
});

export type Place = z.infer<typeof placeShape>;

/** Places of a bill's values by field: `from`, `total`, `quantities.kwh.figure`, `lines.2.amount` (third kept line). */
export const placesShape = z
  .record(
    z.string().regex(/^[a-z][A-Za-z0-9]*(\.[A-Za-z0-9]+){0,2}$/, 'A field has a name such as lines.2.amount.'),
    placeShape,
  )
  .refine((places) => Object.keys(places).length <= 400, 'A bill has at most 400 places on its pages.');

export type Places = z.infer<typeof placesShape>;

const billId = z.number().int().positive().nullable();

/** The query of a file being sent. */
export const attachmentQuery = z.object({
  fileName: z.string().trim().min(1, 'The file needs a name.').max(255, 'The name of the file is too long.'),
  billId: z.coerce.number().pipe(billId.unwrap()).optional(),
  pageCount: z.coerce.number().int().min(1).max(100_000).optional(),
});

/** Moves pages to another bill, lets them wait, removes them or takes that back. */
export const attachmentChange = z
  .object({ version: z.number().int().min(0), billId: billId.optional(), removed: z.boolean().optional() })
  .refine(({ billId, removed }) => (billId === undefined) !== (removed === undefined), {
    message: 'Say either the bill the pages belong to or whether they are removed.',
  });

export type AttachmentChange = z.infer<typeof attachmentChange>;
