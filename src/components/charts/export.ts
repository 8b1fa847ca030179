/** Starts a download of something the page has made itself. */
function save(blob: Blob, fileName: string): void {
  const address = URL.createObjectURL(blob);
  const link = document.createElement('a');
  link.href = address;
  link.download = fileName;
  link.click();
  setTimeout(() => URL.revokeObjectURL(address), 1000);
}

/** Saves comma-separated text, with a byte-order mark so that spreadsheets read it as UTF-8. */
export function saveCsv(text: string, fileName: string): void {
  save(new Blob(['\ufeff', text], { type: 'text/csv;charset=utf-8' }), `${fileName}.csv`);
}

const copiedStyles = ['fill', 'stroke', 'font-variant-numeric'] as const;

/** A copy of the picture that stands alone: tokens of the page become literal colours, a ground is laid. */
function standAlone(svg: SVGSVGElement): SVGSVGElement {
  const copy = svg.cloneNode(true) as SVGSVGElement;
  const originals = [svg, ...svg.querySelectorAll('*')];
  [copy, ...copy.querySelectorAll<SVGElement>('*')].forEach((element, index) => {
    const style = getComputedStyle(originals[index]!);
    for (const name of copiedStyles) element.style.setProperty(name, style.getPropertyValue(name));
    for (const name of ['fill', 'stroke'] as const) element.removeAttribute(name);
  });
  const { width, height } = svg.getBoundingClientRect();
  const ground = document.createElementNS('http://www.w3.org/2000/svg', 'rect');
  ground.setAttribute('width', '100%');
  ground.setAttribute('height', '100%');
  ground.setAttribute('fill', groundBehind(svg));
  copy.insertBefore(ground, copy.firstChild);
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg');
  copy.setAttribute('width', String(width));
  copy.setAttribute('height', String(height));
  return copy;
}

/** First opaque background behind an element. */
function groundBehind(element: Element): string {
  for (let at: Element | null = element; at; at = at.parentElement) {
    const colour = getComputedStyle(at).backgroundColor;
    if (colour && colour !== 'transparent' && !/^rgba\(.*, 0\)$/.test(colour)) return colour;
  }
  return '#ffffff';
}

async function asDataUrl(blob: Blob): Promise<string> {
  return new Promise((resolve, reject) => {
    const reader = new FileReader();
    reader.onload = () => resolve(String(reader.result));
    reader.onerror = () => reject(reader.error ?? new Error('The font could not be read.'));
    reader.readAsDataURL(blob);
  });
}

/** The page's own Lato, regular and bold, as rules inside the picture: an image reads no fonts of the page. */
async function fontRules(): Promise<string> {
  const rules = [...document.styleSheets]
    .flatMap((sheet) => [...sheet.cssRules])
    .filter((rule) => rule instanceof CSSFontFaceRule)
    .filter((rule) => /lato/i.test(rule.style.getPropertyValue('font-family')))
    .filter((rule) => /normal/.test(rule.style.getPropertyValue('font-style')))
    .filter((rule) => ['400', '700'].includes(rule.style.getPropertyValue('font-weight')))
    .filter((rule) => /U\+0-FF|U\+0000-00FF/i.test(rule.style.getPropertyValue('unicode-range')));
  const made = rules.map(async (rule) => {
    const source = /url\(["']?([^"')]+\.woff2[^"')]*)["']?\)/.exec(rule.style.getPropertyValue('src'))?.[1];
    if (!source) return '';
    const base = rule.parentStyleSheet?.href ?? location.href;
    const answer = await fetch(new URL(source, base));
    const font = await asDataUrl(await answer.blob());
    const weight = rule.style.getPropertyValue('font-weight');
    return `@font-face{font-family:Lato;font-weight:${weight};src:url(${font}) format("woff2")}`;
  });
  return (await Promise.all(made)).join('');
}

/** Saves a chart as a PNG of twice its pixels, through a canvas. */
export async function saveSvgAsPng(svg: SVGSVGElement, fileName: string): Promise<void> {
  const copy = standAlone(svg);
  const style = document.createElementNS('http://www.w3.org/2000/svg', 'style');
  style.textContent = await fontRules();
  copy.insertBefore(style, copy.firstChild);
  const { width, height } = svg.getBoundingClientRect();
  const image = new Image();
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(new XMLSerializer().serializeToString(copy))}`;
  await image.decode();
  const canvas = document.createElement('canvas');
  canvas.width = Math.round(width * 2);
  canvas.height = Math.round(height * 2);
  canvas.getContext('2d')?.drawImage(image, 0, 0, canvas.width, canvas.height);
  const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, 'image/png'));
  if (!blob) throw new Error('The canvas gave no picture.');
  save(blob, `${fileName}.png`);
}
