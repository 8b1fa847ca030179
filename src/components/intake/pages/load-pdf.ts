import type { OpenPdf } from './pdf';

const locked =
  'This PDF is locked with a password. Print it to PDF without one, or save a copy that is open, and attach that.';
const broken = 'This PDF cannot be read: it is damaged or was cut short on its way. Ask for it again.';
const old = 'This browser cannot read PDF here. Bring it up to date, or open the original beside the form.';

/** Opens a PDF, or says in words why not. The reader itself is loaded only now. */
export async function openedPdf(bytes: Uint8Array): Promise<{ pdf: OpenPdf } | { fault: string }> {
  if (import.meta.env.SSR) throw new Error('PDF is read in the browser');
  try {
    const { openPdf } = await import('./pdf');
    return { pdf: await openPdf(bytes) };
  } catch (error) {
    const { name } = error as Error;
    if (name === 'PasswordException') return { fault: locked };
    return { fault: /^(InvalidPDF|UnknownError|FormatError|ResponseException)/.test(name) ? broken : old };
  }
}

/** Pages of a file that is about to be sent; null where it is a PDF that cannot be opened. A photo is one page. */
export async function countPages(file: File): Promise<number | null> {
  const head = new TextDecoder('latin1').decode(await file.slice(0, 1024).arrayBuffer());
  if (!head.includes('%PDF-')) return 1;
  const opened = await openedPdf(new Uint8Array(await file.arrayBuffer()));
  if ('fault' in opened) return null;
  const { pageCount } = opened.pdf;
  opened.pdf.close();
  return pageCount;
}
