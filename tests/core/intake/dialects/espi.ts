import type { Dialect } from './dialect';
import type { Series, TrueReading } from './series';

// Elements and codes of ESPI (NAESB REQ.21): uom 72 Wh, 73 varh, 38 W, 63 var; flow 1 forward, 2 lagging, 3 leading; quality 8
// estimated by a reference day. Starts are seconds since 1970 in UTC.
interface Layout {
  prefix?: string;
  power?: number;
  isPower?: boolean;
  isLatestFirst?: boolean;
}

const link = (rel: string, href: string): string => `<link rel="${rel}" href="${href}"/>`;

const channels: [name: string, flow: number, figure: (one: TrueReading) => number][] = [
  ['active', 1, (one) => one.kwh],
  ['lagging', 2, (one) => one.lagging],
  ['leading', 3, (one) => one.leading],
];

function readingXml(one: TrueReading, seconds: number, figure: number, p: string): string {
  const quality =
    one.grade === 'estimated' ? `<${p}ReadingQuality><${p}quality>8</${p}quality></${p}ReadingQuality>` : '';
  return `<${p}IntervalReading>${quality}<${p}timePeriod><${p}duration>${seconds}</${p}duration><${p}start>${one.utcMs / 1000}</${p}start></${p}timePeriod><${p}value>${figure}</${p}value></${p}IntervalReading>`;
}

function feed(series: Series, { prefix = 'espi:', power = 0, isPower = false, isLatestFirst = false }: Layout): string {
  const p = prefix;
  const seconds = series.stepMinutes * 60;
  const scale = (1000 / 10 ** power) * (isPower ? 60 / series.stepMinutes : 1);
  const kept = series.readings.filter((one) => one.grade !== 'missing');
  const ordered = isLatestFirst ? [...kept].reverse() : kept;
  const entries = channels.map(([name, flow, figure]) => {
    const self = `/UsagePoint/1/MeterReading/${name}`;
    const uom = name === 'active' ? (isPower ? 38 : 72) : isPower ? 63 : 73;
    const readings = ordered.map((one) => readingXml(one, seconds, figure(one) * scale, p)).join('');
    return `<entry>${link('self', `${self}/IntervalBlock/1`)}${link('up', `${self}/IntervalBlock`)}<content><${p}IntervalBlock>${readings}</${p}IntervalBlock></content></entry>
<entry>${link('self', self)}${link('related', `${self}/IntervalBlock`)}${link('related', `/ReadingType/${name}`)}<title>Energy Delivered (kWh)</title><content><${p}MeterReading/></content></entry>
<entry>${link('self', `/ReadingType/${name}`)}<content><${p}ReadingType><${p}accumulationBehaviour>4</${p}accumulationBehaviour><${p}flowDirection>${flow}</${p}flowDirection><${p}intervalLength>${seconds}</${p}intervalLength><${p}powerOfTenMultiplier>${power}</${p}powerOfTenMultiplier><${p}uom>${uom}</${p}uom></${p}ReadingType></content></entry>`;
  });
  const point = `<entry>${link('self', '/UsagePoint/1')}<title>Works</title><content><${p}UsagePoint/></content></entry>`;
  return `<?xml version="1.0"?><feed xmlns="http://www.w3.org/2005/Atom" xmlns:${p.slice(0, -1)}="http://naesb.org/espi">${entries.join('\n')}${point}</feed>`;
}

const written = (layout: Layout = {}): Pick<Dialect, 'write' | 'stepMinutes' | 'fileName' | 'marksEstimates'> => ({
  stepMinutes: 30,
  fileName: 'feed.xml',
  marksEstimates: true,
  write: (series) => feed(series, layout),
});

/** ESPI feeds. */
export const espiDialects: Dialect[] = [
  { name: 'ESPI in Wh and varh', ...written() },
  { name: 'ESPI with a multiplier of thousandths', ...written({ power: -3 }) },
  { name: 'ESPI with a multiplier of tens', ...written({ power: -1, prefix: 'ns0:' }) },
  { name: 'ESPI in W and var', ...written({ isPower: true }) },
  { name: 'ESPI with the latest reading first', ...written({ isLatestFirst: true }) },
];
