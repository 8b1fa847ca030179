const powersOfTen = Array.from({ length: 16 }, (_, exponent) => 10 ** exponent);

/**
 * A plain number (sign, digits, one decimal mark) in text[start, end), spaces around it allowed. NaN if the cell is anything
 * else; the caller then tries `parseNumberText`. Exact: up to 15 digits the quotient of two exact doubles is rounded once.
 */
export function parseNumberAt(text: string, start: number, end: number, mark: number): number {
  let at = start;
  while (at < end && text.charCodeAt(at) === 32) at += 1;
  const negative = text.charCodeAt(at) === 45;
  if (negative) at += 1;
  let mantissa = 0;
  let digits = 0;
  let decimals = -1;
  for (; at < end; at += 1) {
    const code = text.charCodeAt(at);
    if (code >= 48 && code <= 57) {
      mantissa = mantissa * 10 + (code - 48);
      digits += 1;
      if (decimals >= 0) decimals += 1;
    } else if (code === mark && decimals < 0) decimals = 0;
    else if (code === 32) {
      while (at < end && text.charCodeAt(at) === 32) at += 1;
      if (at < end) return Number.NaN;
      break;
    } else return Number.NaN;
  }
  if (digits === 0 || digits > 15) return Number.NaN;
  const size = decimals > 0 ? mantissa / (powersOfTen[decimals] ?? Number.NaN) : mantissa;
  return negative ? -size : size;
}

const blankWords = new Set([
  '',
  '-',
  '--',
  '---',
  '—',
  '–',
  '.',
  'n/a',
  'na',
  'nan',
  'null',
  'none',
  'nil',
  '#n/a',
  'missing',
  '?',
  'n.a.',
  'no data',
  'nodata',
  '\\n',
  '#null!',
]);

/** Whether a cell says that there is no figure. Blank is not nought. */
export function isBlankWord(text: string): boolean {
  return blankWords.has(text.trim().toLowerCase());
}

/**
 * A number as people write it: thousands marks, brackets or a trailing minus for negatives, currency signs and codes, a
 * trailing per cent sign (the figure stays in per cent), exponent. NaN if the text is no number.
 */
export function parseNumberText(text: string, decimalMark: '.' | ','): number {
  let body = text.trim();
  if (body === '' || body.length > 60) return Number.NaN;
  let negative = false;
  if (/^\(.*\)$/.test(body)) {
    negative = true;
    body = body.slice(1, -1);
  }
  // Spaces (plain, non-breaking, thin), apostrophes as thousands marks, currency signs and codes.
  body = body.replace(/[\s\u00a0\u2009\u202f'’]/g, '').replace(/^[−–]/, '-');
  body = body
    .replace(/^([+-]?)([$€£¥₩₹]|US\$|C\$|A\$|R\$|[A-Z]{3})/, '$1')
    .replace(/([$€£¥₩₹%]|[A-Z]{3}|kr|zł|CR)$/, (unit) => {
      if (unit === 'CR') negative = !negative;
      return '';
    });
  if (/^\(.*\)$/.test(body)) {
    negative = !negative;
    body = body.slice(1, -1);
  }
  if (/^[\d.,]+-$/.test(body)) body = `-${body.slice(0, -1)}`;
  const thousands = decimalMark === ',' ? '.' : ',';
  const whole = body.split(decimalMark)[0] ?? '';
  if (whole.includes(thousands)) {
    if (!/^[+-]?\d{1,3}([.,]\d{2,3})*[.,]\d{3}$/.test(whole)) return Number.NaN;
    body = whole.replaceAll(thousands, '') + body.slice(whole.length);
  }
  if (decimalMark === ',') body = body.replace(',', '.');
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(body)) return Number.NaN;
  const size = Number(body);
  return Number.isFinite(size) ? (negative ? -size : size) : Number.NaN;
}

/** What the cells of a file say about the decimal mark. */
export interface DecimalVote {
  mark: '.' | ',';
  comma: number;
  point: number;
  sure: boolean;
}

/**
 * Decimal mark of a set of figures. A mark followed by other than three digits, or after the other mark, or after a lone
 * nought is a decimal mark; a mark met twice in one figure is a thousands mark; `1,234` alone says nothing.
 */
export function voteDecimalMark(cells: Iterable<string>, fallback: '.' | ','): DecimalVote {
  let comma = 0;
  let point = 0;
  let open = 0;
  for (const cell of cells) {
    const figure = cell.replace(/[^\d.,]/g, '');
    const marks = figure.replace(/\d/g, '');
    if (marks === '' || /[a-z]{4}/i.test(cell)) continue;
    const last = marks.at(-1);
    const repeated = marks.length > 1 && new Set(marks).size === 1;
    const decimals = figure.length - figure.lastIndexOf(last ?? '') - 1;
    const isDecimal = !repeated && (decimals !== 3 || marks.length > 1 || /^0?[.,]/.test(figure));
    if (repeated) {
      if (last === ',') point += 1;
      else comma += 1;
    } else if (!isDecimal) open += 1;
    else if (last === ',') comma += 1;
    else point += 1;
  }
  if (comma === 0 && point === 0) return { mark: fallback, comma, point, sure: open === 0 };
  const mark = comma > point ? ',' : '.';
  return { mark, comma, point, sure: Math.min(comma, point) === 0 };
}
