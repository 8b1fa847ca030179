import { getDocument, PDFWorker, type PDFDocumentProxy, type PDFPageProxy } from 'pdfjs-dist';
import workerUrl from 'pdfjs-dist/build/pdf.worker.min.mjs?url';
import { shownPages } from '../../../schemas/attachment';
import { figuresOfPage, type PageFigure, type TextRun } from './page-text';
import { ownFontFiles, ownWasmFiles } from './pdf-files';

/** The largest canvas. Some phones draw none larger. [pixels] */
const canvasCapPixels = 16_000_000;
/** Pictures inside a page above this stay blank. [pixels] */
const imageCapPixels = 64_000_000;

/** A PDF that is open in a worker of its own. */
export interface OpenPdf {
  pageCount: number;
  page(number: number): Promise<PdfPage>;
  close(): void;
}

export interface PdfPage {
  /** Upright, in points. */
  width: number;
  height: number;
  figures: PageFigure[];
  /** Whether the page has text at all; a scan has none. */
  hasText: boolean;
  /** Draws the page, turned by quarters, as wide as said in pixels of the screen; the promise can be given up. */
  draw(canvas: HTMLCanvasElement, how: { width: number; quarters: number }): { done: Promise<void>; stop(): void };
}

class OwnFiles {
  constructor(private readonly files: Record<string, string>) {}
  async fetch({ filename }: { filename: string }): Promise<Uint8Array> {
    const address = this.files[filename];
    if (!address) throw new Error(`${filename} is not shipped`);
    const response = await fetch(address);
    return new Uint8Array(await response.arrayBuffer());
  }
}
class OwnFonts extends OwnFiles {
  constructor() {
    super(ownFontFiles);
  }
}
class OwnWasm extends OwnFiles {
  constructor() {
    super(ownWasmFiles);
  }
}

/**
 * Opens a stranger's PDF. It is read in a worker that can reach nothing: no network, no page, no storage; scripts and
 * forms inside it are never run, and its fonts are drawn as outlines and not handed to the browser.
 *
 * @throws an error whose name says what is wrong: PasswordException, InvalidPDFException
 */
export async function openPdf(bytes: Uint8Array): Promise<OpenPdf> {
  const port = new Worker(workerUrl, { type: 'module' });
  const worker = new PDFWorker({ port } as never);
  const task = getDocument({
    data: bytes,
    worker,
    isEvalSupported: false,
    disableFontFace: true,
    enableXfa: false,
    useWorkerFetch: false,
    StandardFontDataFactory: OwnFonts,
    WasmFactory: OwnWasm,
    maxImageSize: imageCapPixels,
    canvasMaxAreaInBytes: canvasCapPixels * 4,
    verbosity: 0,
  });
  const close = () => {
    void task.destroy().finally(() => port.terminate());
  };
  const failed = new Promise<never>((_, reject) => {
    port.addEventListener('error', () => reject(new Error('The reader of PDF could not be started.')), { once: true });
  });
  try {
    const document = await Promise.race([task.promise, failed]);
    return { pageCount: document.numPages, page: (number) => openPage(document, number), close };
  } catch (error) {
    close();
    throw error;
  }
}

async function openPage(document: PDFDocumentProxy, number: number): Promise<PdfPage> {
  const page = await document.getPage(Math.min(Math.max(1, number), Math.min(document.numPages, shownPages)));
  const upright = page.getViewport({ scale: 1 });
  const runs = await runsOf(page);
  const size = { width: upright.width, height: upright.height };
  return { ...size, figures: figuresOfPage(runs, size, measured()), hasText: runs.length > 0, draw: drawing(page) };
}

/** Text of the page as it lies when the page is upright; text that runs up or down is left out. */
async function runsOf(page: PDFPageProxy): Promise<TextRun[]> {
  const [va = 1, vb = 0, vc = 0, vd = 1, ve = 0, vf = 0] = page.getViewport({ scale: 1 }).transform as number[];
  const content = await page.getTextContent();
  return content.items.flatMap((item): TextRun[] => {
    if (!('str' in item) || item.str.trim() === '') return [];
    const [a = 0, b = 0, c = 0, d = 0, e = 0, f = 0] = item.transform as number[];
    const along = { x: va * a + vc * b, y: vb * a + vd * b };
    if (along.x <= 0 || Math.abs(along.y) > 0.1 * along.x) return [];
    const height = Math.hypot(va * c + vc * d, vb * c + vd * d);
    const left = va * e + vc * f + ve;
    return [{ text: item.str, left, right: left + item.width, baseline: vb * e + vd * f + vf, height }];
  });
}

/** Widths of texts in a common face: only their ratios count. */
function measured(): (text: string) => number {
  const context = document.createElement('canvas').getContext('2d');
  if (!context) return (text) => text.length;
  context.font = '100px Arial, Helvetica, sans-serif';
  return (text) => context.measureText(text).width;
}

const drawing =
  (page: PDFPageProxy): PdfPage['draw'] =>
  (canvas, { width, quarters }) => {
    const rotation = (page.rotate + quarters * 90) % 360;
    const bare = page.getViewport({ scale: 1, rotation });
    const wanted = width / bare.width;
    const scale = Math.min(wanted, Math.sqrt(canvasCapPixels / (bare.width * bare.height)));
    const viewport = page.getViewport({ scale, rotation });
    // Drawn aside and shown when it is whole: what is on the screen stays until then.
    const aside = document.createElement('canvas');
    aside.width = Math.max(1, Math.floor(viewport.width));
    aside.height = Math.max(1, Math.floor(viewport.height));
    const task = page.render({ canvas: aside, viewport, background: '#ffffff' });
    const done = task.promise.then(() => {
      canvas.width = aside.width;
      canvas.height = aside.height;
      canvas.getContext('2d')?.drawImage(aside, 0, 0);
    });
    return { done, stop: () => task.cancel() };
  };
