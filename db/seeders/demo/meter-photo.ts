import { formatNumber } from '../../../src/components/ui/format';
import type { BillView } from '../../../src/schemas/bill';
import { latoFile } from './statement';

/** The meter's display on the day it was read, as a hand-held camera sees it: askew, unevenly lit, grainy. */
function scene(maxKw: string, day: string): string {
  return `<svg xmlns="http://www.w3.org/2000/svg" width="900" height="1200" viewBox="0 0 900 1200" font-family="Lato">
  <defs>
    <radialGradient id="light" cx="0.35" cy="0.3" r="0.9"><stop offset="0" stop-color="#c9cbc6"/><stop offset="1" stop-color="#4e524f"/></radialGradient>
    <linearGradient id="glass" x1="0" y1="0" x2="1" y2="1"><stop offset="0" stop-color="#ffffff" stop-opacity="0.5"/><stop offset="0.35" stop-color="#ffffff" stop-opacity="0"/></linearGradient>
    <filter id="grain"><feTurbulence type="fractalNoise" baseFrequency="0.8" numOctaves="2" seed="7"/><feColorMatrix values="0 0 0 0 0.1  0 0 0 0 0.1  0 0 0 0 0.1  0.5 0 0 0 -0.12"/></filter>
  </defs>
  <rect width="900" height="1200" fill="url(#light)"/>
  <g transform="translate(450 600) rotate(-3.5) skewX(2) translate(-450 -600)">
    <rect x="130" y="190" width="640" height="800" rx="46" fill="#e8e7e1" stroke="#6d6f6b" stroke-width="6"/>
    <text x="180" y="270" font-size="30" font-weight="700" fill="#30343a">OSTRANDER VALLEY</text>
    <text x="180" y="312" font-size="26" fill="#30343a">Meter OV 5510-274</text>
    <rect x="180" y="360" width="540" height="230" rx="10" fill="#aab59b" stroke="#40463d" stroke-width="5"/>
    <text x="206" y="404" font-size="26" fill="#242b20">MAX kW</text>
    <text x="694" y="404" font-size="26" text-anchor="end" fill="#242b20">${day}</text>
    <text x="694" y="540" font-size="120" font-weight="700" text-anchor="end" fill="#1b2118">${maxKw}</text>
    <text x="180" y="680" font-size="24" fill="#30343a">3 x 120 V   5 A   CT 300:5   VT 60:1</text>
    <text x="180" y="722" font-size="24" fill="#30343a">60 Hz   class 0.2</text>
    <circle cx="246" cy="850" r="44" fill="#2c302d"/><circle cx="654" cy="850" r="30" fill="#9b2335"/>
    <rect x="130" y="190" width="640" height="800" rx="46" fill="url(#glass)"/>
  </g>
  <rect width="900" height="1200" filter="url(#grain)" opacity="0.5"/>
</svg>`;
}

/** A photo of the meter's display with the peak the bill prints. */
export async function meterPhoto(bill: BillView): Promise<Buffer> {
  const { Resvg } = await import('@resvg/resvg-js');
  const kw = formatNumber(bill.quantities.maxKw ?? 0, { upTo: 1 }).replace(',', '');
  const fontFiles = [latoFile('400Regular/Lato_400Regular'), latoFile('700Bold/Lato_700Bold')];
  const font = { fontFiles, loadSystemFonts: false, defaultFontFamily: 'Lato' };
  return new Resvg(scene(kw, bill.to.slice(5)), { font }).render().asPng();
}
