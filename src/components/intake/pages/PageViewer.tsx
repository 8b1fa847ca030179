import { useCallback, useEffect, useMemo, useState } from 'react';
import { pageWindow } from '../../../client/attachments';
import { shownPages, type AttachmentView, type Place } from '../../../schemas/attachment';
import { Notice } from '../../ui/Notice';
import { sameBox } from './box';
import { FigureLayer, type LaidFigure } from './FigureLayer';
import { FigureNote, PageStyleFields } from './FigureNote';
import { PageTools } from './PageTools';
import type { Offer } from './offer';
import { putOffer } from './offer';
import type { PdfPage } from './pdf';
import { PdfSheet } from './PdfSheet';
import { PhotoSheet } from './PhotoSheet';
import { styleShown, typedAs, type PageStyle } from './printed';
import { usePageFile } from './use-page-file';

/** A field of the form that was filled from a page. */
export interface UsedPlace {
  path: string;
  label: string;
  place: Place;
}

export interface PageViewerProps {
  code: string;
  attachment: AttachmentView;
  /** Fields filled from these pages. */
  used?: UsedPlace[];
  /** The place of the field that has the focus: the page follows it. */
  marked?: Place | null;
  /** The field a number goes into, by its label. */
  into: string | null;
  onOffer(offer: Offer): void;
  /** The keys leave the numbers for the field. */
  onLeave(): void;
  /** A figure is looked at that went into fields. */
  onLook?(paths: string[]): void;
  /** Whether the pages already have a window of their own. */
  alone?: boolean;
}

const zooms = [1, 1.5, 2, 3];

/** Pages of a bill: one at a time, larger, turned, with their numbers ready to be taken. */
export function PageViewer(props: PageViewerProps) {
  const { code, attachment, used = [], marked = null, into, onOffer, onLeave, onLook, alone = false } = props;
  const file = usePageFile(attachment);
  const [page, setPage] = useState(1);
  const [zoom, setZoom] = useState(1);
  const [quarters, setQuarters] = useState(0);
  const [open, setOpen] = useState<PdfPage | null>(null);
  const [chosen, setChosen] = useState<Partial<PageStyle>>({});
  const [looked, setLooked] = useState<LaidFigure | null>(null);
  const here = marked?.attachmentId === attachment.id ? marked : null;
  const followed = here?.page;
  useEffect(() => {
    if (followed !== undefined) setPage(followed);
  }, [followed, here]);
  const handlePage = useCallback((opened: PdfPage | null) => setOpen(opened), []);

  const shown = useMemo(() => styleShown(open?.figures ?? []), [open]);
  const style = {
    decimal: chosen.decimal ?? shown.decimal ?? 'point',
    dates: chosen.dates ?? shown.dates ?? 'month',
  } as const;
  const usedAt = (box: Place['box']) => used.filter(({ place }) => place.page === page && sameBox(place.box, box));
  const figures = (open?.figures ?? []).map((figure): LaidFigure => ({
    ...figure,
    typed: typedAs(figure, style),
    usedIn:
      usedAt(figure.box)
        .map(({ label }) => label)
        .join(' and ') || null,
  }));
  const offerOf = ({ kind, typed, box, text }: LaidFigure): Offer | null =>
    typed === null ? null : { kind, typed, place: { attachmentId: attachment.id, page, box, text } };
  const take = (figure: LaidFigure) => {
    const offer = offerOf(figure);
    if (offer) onOffer(offer);
  };
  const look = (figure: LaidFigure | null) => {
    setLooked(figure);
    onLook?.(figure ? usedAt(figure.box).map(({ path }) => path) : []);
  };
  const pages = file.kind === 'pdf' ? file.pdf.pageCount : 1;
  return (
    <div className="page-viewer">
      <div className="page-frame" tabIndex={file.kind === 'photo' && zoom > 1 ? 0 : undefined} data-page-frame>
        {file.kind === 'waiting' && (
          <p className="page-words" role="status">
            Opening {attachment.fileName}
          </p>
        )}
        {file.kind === 'fault' && (
          <div className="p-4">
            <Notice kind="fault" title={`${attachment.fileName} cannot be shown.`}>
              {file.message}
            </Notice>
          </div>
        )}
        {file.kind === 'photo' && (
          <PhotoSheet address={file.address} fileName={attachment.fileName} quarters={quarters} zoom={zoom} />
        )}
        {file.kind === 'pdf' && (
          <PdfSheet
            pdf={file.pdf}
            fileName={attachment.fileName}
            page={page}
            quarters={quarters}
            zoom={zoom}
            onPage={handlePage}
          >
            {open && figures.length > 0 && (
              <FigureLayer
                label={`Numbers and dates of page ${page}, in reading order`}
                figures={figures}
                quarters={quarters}
                marked={here?.page === page ? here.box : null}
                onLook={look}
                onTake={take}
                onDrag={(figure, data) => {
                  const offer = offerOf(figure);
                  if (offer) putOffer(data, offer);
                }}
                onLeave={onLeave}
              />
            )}
          </PdfSheet>
        )}
      </div>
      {file.kind !== 'fault' && (
        <PageTools
          page={page}
          pages={Math.min(pages, shownPages)}
          onPage={setPage}
          larger={zooms.find((one) => one > zoom)}
          smaller={zooms.findLast((one) => one < zoom)}
          onZoom={setZoom}
          onTurn={() => setQuarters((quarters + 1) % 4)}
          beside={alone ? undefined : pageWindow(code, attachment.id)}
        />
      )}
      {pages > shownPages && (
        <Notice
          title={`Only the first ${shownPages} of ${pages} pages are shown. Split the file by bill to see the rest.`}
        />
      )}
      {file.kind === 'photo' && <p className="hint">A photo has no text to take numbers from: type what you see.</p>}
      {file.kind === 'pdf' && open && !open.hasText && (
        <p className="hint">No text on this page, it is a picture: type what you see.</p>
      )}
      {figures.length > 0 && (
        <>
          <FigureNote looked={looked} into={into} alone={alone} />
          <PageStyleFields
            style={style}
            shown={shown}
            hasDates={figures.some(({ kind }) => kind === 'date')}
            onChange={setChosen}
          />
        </>
      )}
    </div>
  );
}
