import { createRequire } from 'node:module';
import { Resvg } from '@resvg/resvg-js';
import { JSDOM } from 'jsdom';
import type { Drawing, DrawnChart } from '../reports/draw';

const require = createRequire(import.meta.url);
const fontFiles = ['400Regular/Lato_400Regular', '700Bold/Lato_700Bold', '900Black/Lato_900Black'].map((face) =>
  require.resolve(`@expo-google-fonts/lato/${face}.ttf`),
);

/** React and Recharts look for a browser when they are first imported: give them one before that. */
function pretendBrowser(): JSDOM {
  const dom = new JSDOM('<!doctype html><body></body>', { pretendToBeVisual: true });
  const { window } = dom;
  const names = ['window', 'document', 'navigator', 'HTMLElement', 'SVGElement', 'Element', 'Node'] as const;
  const globals = names.map((name) => [name, name === 'window' ? window : window[name]] as const);
  for (const [name, value] of globals) Object.defineProperty(globalThis, name, { value, configurable: true });
  globalThis.requestAnimationFrame = window.requestAnimationFrame.bind(window);
  globalThis.cancelAnimationFrame = window.cancelAnimationFrame.bind(window);
  globalThis.getComputedStyle = window.getComputedStyle.bind(window);
  return dom;
}

const settle = () => new Promise((resolve) => setTimeout(resolve, 25));

async function drawAll(drawings: Drawing[]): Promise<DrawnChart[]> {
  const { window } = pretendBrowser();
  const [{ createRoot }, { flushSync }, { drawnChart }] = await Promise.all([
    import('react-dom/client'),
    import('react-dom'),
    import('../../components/charts/drawn-chart'),
  ]);
  const drawn: DrawnChart[] = [];
  for (const drawing of drawings) {
    const place = window.document.createElement('div');
    window.document.body.append(place);
    const root = createRoot(place, { identifierPrefix: drawing.name.replace(/[^a-z0-9]/gi, '') });
    flushSync(() => root.render(drawnChart(drawing)));
    await settle();
    const svg = place.querySelector('svg');
    if (!svg) throw new Error(`The chart ${drawing.chart} drew nothing.`);
    drawn.push(toImages(drawing, new window.XMLSerializer().serializeToString(svg)));
    flushSync(() => root.unmount());
    place.remove();
  }
  return drawn;
}

function toImages({ name, pngWidth, background }: Drawing, svg: string): DrawnChart {
  if (!pngWidth) return { name, svg };
  const font = { fontFiles, loadSystemFonts: false, defaultFontFamily: 'Lato' };
  const png = new Resvg(svg, { font, fitTo: { mode: 'width', value: pngWidth }, background }).render().asPng();
  return { name, svg, png: new Uint8Array(png) };
}

process.on('message', (drawings: Drawing[]) => {
  drawAll(drawings).then(
    (charts) => process.send?.({ charts }),
    (error: unknown) =>
      process.send?.({ error: error instanceof Error ? (error.stack ?? error.message) : String(error) }),
  );
});
