/** A small PDF written out by hand after ISO 32000-1, section 7.5: its objects and no table of them, which readers rebuild. */
export function handPdf(objects: string[], trailer = '<< /Root 1 0 R >>'): Buffer {
  const numbered = objects.map((body, index) => `${index + 1} 0 obj\n${body}\nendobj\n`);
  return Buffer.from(`%PDF-1.7\n${numbered.join('')}trailer\n${trailer}\n%%EOF\n`, 'latin1');
}

const page = (more = '') =>
  `<< /Type /Page /Parent 2 0 R /MediaBox [0 0 400 300] /Contents 4 0 R /Resources << /Font << /F1 5 0 R >> >> ${more}>>`;
const font = '<< /Type /Font /Subtype /Type1 /BaseFont /Helvetica >>';
const stream = (content: string) => `<< /Length ${content.length} >>\nstream\n${content}\nendstream`;
const said = stream('BT /F1 18 Tf 40 200 Td (Amount due 1,234.56) Tj ET');

/** One page with a line of text. */
export const textPdf = () =>
  handPdf(['<< /Type /Catalog /Pages 2 0 R >>', '<< /Type /Pages /Kids [3 0 R] /Count 1 >>', page(), said, font]);

/** One page that is a picture and has no text. */
export const scanPdf = () =>
  handPdf([
    '<< /Type /Catalog /Pages 2 0 R >>',
    '<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
    page(),
    stream('0.5 g 40 40 200 100 re f'),
    font,
  ]);

/** A page that wants to run scripts, open an address and send itself away. */
export const scriptPdf = (address: string) =>
  handPdf([
    `<< /Type /Catalog /Pages 2 0 R /OpenAction 6 0 R /AA << /WC 6 0 R >> /Names << /JavaScript << /Names [(a) 6 0 R] >> >> >>`,
    '<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
    page('/AA << /O 6 0 R >> /Annots [7 0 R] '),
    said,
    font,
    `<< /S /JavaScript /JS (app.alert\\("ran"\\); this.submitForm\\("${address}"\\); app.launchURL\\("${address}"\\);) >>`,
    `<< /Type /Annot /Subtype /Link /Rect [0 0 400 300] /A << /S /URI /URI (${address}) >> >>`,
  ]);

/** A page locked with a password nobody here knows: standard handler of 128 bits, its check values made up. */
export const lockedPdf = () =>
  handPdf(
    [
      '<< /Type /Catalog /Pages 2 0 R >>',
      '<< /Type /Pages /Kids [3 0 R] /Count 1 >>',
      page(),
      said,
      font,
      `<< /Filter /Standard /V 2 /R 3 /Length 128 /P -3904 /O <${'a1'.repeat(32)}> /U <${'b2'.repeat(32)}> >>`,
    ],
    `<< /Root 1 0 R /Encrypt 6 0 R /ID [<${'c3'.repeat(16)}> <${'c3'.repeat(16)}>] >>`,
  );
