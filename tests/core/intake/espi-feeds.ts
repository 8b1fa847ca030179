// Elements and codes of ESPI (NAESB REQ.21): uom 72 Wh, 73 varh, 38 W, 169 therm; flow 1 forward, 19 reverse, 2 lagging, 3 leading.
/** Beginning of the first reading unless a channel says otherwise. [s] */
export const start = Date.parse('2025-06-02T05:00:00Z') / 1000;

/** A channel of an invented feed. */
export interface Channel {
  id: string;
  title?: string;
  uom?: string;
  flow?: string;
  power?: number;
  values: number[];
  from?: number;
  minutes?: number;
  quality?: (at: number) => string;
  point?: string;
  type?: boolean;
  /** Further elements of its reading type. */
  typed?: string;
}

export const link = (rel: string, href: string) => `<link rel="${rel}" href="${href}"/>`;

function channelXml(channel: Channel, p: string): string {
  const { id, point = 'A', minutes = 15, from = start } = channel;
  const self = `/UsagePoint/${point}/MeterReading/${id}`;
  const step = minutes * 60;
  const readings = channel.values
    .map(
      (figure, at) =>
        `<${p}IntervalReading>${channel.quality?.(at) ?? ''}<${p}timePeriod><${p}duration>${step}</${p}duration><${p}start>${from + at * step}</${p}start></${p}timePeriod><${p}value>${figure}</${p}value></${p}IntervalReading>`,
    )
    .join('');
  const type =
    channel.type === false
      ? ''
      : `<entry>${link('self', `/ReadingType/${id}`)}<content><${p}ReadingType><${p}accumulationBehaviour>1</${p}accumulationBehaviour><${p}flowDirection>${channel.flow ?? '1'}</${p}flowDirection><${p}intervalLength>${step}</${p}intervalLength><${p}powerOfTenMultiplier>${channel.power ?? 0}</${p}powerOfTenMultiplier><${p}uom>${channel.uom ?? '72'}</${p}uom>${channel.typed ?? ''}</${p}ReadingType></content></entry>`;
  // The block stands before what it belongs to: only links tell.
  return `<entry>${link('self', `${self}/IntervalBlock/1`)}${link('up', `${self}/IntervalBlock`)}<content><${p}IntervalBlock><${p}interval><${p}duration>86400</${p}duration><${p}start>${from}</${p}start></${p}interval>${readings}</${p}IntervalBlock></content></entry>
<entry>${link('self', self)}${link('up', `/UsagePoint/${point}/MeterReading`)}${link('related', `${self}/IntervalBlock`)}${link('related', `/ReadingType/${id}`)}<title>${channel.title ?? 'Energy'}</title><content><${p}MeterReading/></content></entry>${type}`;
}

/** An invented feed of channels; `more` are further entries. */
export function feed(channels: Channel[], prefix = 'espi:', head = '', more = ''): string {
  const points = [...new Set(channels.map((channel) => channel.point ?? 'A'))];
  const pointsXml = points.map(
    (point) =>
      `<entry>${link('self', `/UsagePoint/${point}`)}<title>Meter ${point}</title><content><${prefix}UsagePoint/></content></entry>`,
  );
  const namespace = prefix === '' ? '' : ` xmlns:${prefix.slice(0, -1)}="http://naesb.org/espi"`;
  const body = [...channels.map((channel) => channelXml(channel, prefix)), ...pointsXml, more].join('\n');
  const inner =
    prefix === ''
      ? body.replace(
          /<(UsagePoint|MeterReading|ReadingType|IntervalBlock)(\/?)>/g,
          '<$1 xmlns="http://naesb.org/espi"$2>',
        )
      : body;
  return `<?xml version="1.0"?>${head}<feed xmlns="http://www.w3.org/2005/Atom"${namespace}>${inner}</feed>`;
}
