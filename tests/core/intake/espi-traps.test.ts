import { describe, expect, it } from 'vitest';
import { previewIntervals, readIntervals, traceInterval, type ColumnMap } from '@/core/intake';
import { feed, link, start, type Channel } from './espi-feeds';
import { bytesOf } from './files';

const options = { fileName: 'feed.xml', timeZone: 'America/Chicago' };
const readBytes = (bytes: Uint8Array, columnMap?: ColumnMap) =>
  readIntervals(bytes, { ...options, ...(columnMap ? { columnMap } : {}) });
const read = (text: string, columnMap?: ColumnMap) => readBytes(bytesOf(text), columnMap);
const codes = ({ notes }: { notes: { code: string }[] }) => notes.map((note) => note.code);

const wh: Channel = { id: '1', values: [1000, 2000, 1500, 500] };
const kwh = [1, 2, 1.5, 0.5];

/** Text in UTF-16 behind its mark. */
function utf16(text: string, isBigEndian: boolean): Uint8Array {
  const bytes = Buffer.from(`\uFEFF${text}`, 'utf16le');
  return new Uint8Array(isBigEndian ? bytes.swap16() : bytes);
}

const timeParameters = (fields: string) =>
  `<entry>${link('self', '/LocalTimeParameters/1')}<content><espi:LocalTimeParameters>${fields}</espi:LocalTimeParameters></content></entry>`;

describe('traps of ESPI feeds', () => {
  it.each([
    ['little', false],
    ['big', true],
  ])('reads UTF-16 %s end first, pieces cut anywhere', async (_name, isBigEndian) => {
    // Longer than the pieces a feed is decoded in.
    const values = Array.from({ length: 900 }, (_, at) => 1000 + ((at * 7) % 13));
    const { load } = await readBytes(utf16(feed([{ ...wh, values }]), isBigEndian));
    expect([...load.kwh]).toEqual(values.map((value) => value / 1000));
  });

  it('reads words beyond ASCII across the pieces of a feed', async () => {
    const values = Array.from({ length: 900 }, () => 1000);
    const titled = Array.from({ length: 40 }, (_, at) => ({
      ...wh,
      id: String(at),
      values,
      title: 'Zähler – große Säge',
    }));
    const { report } = await read(feed(titled.slice(0, 1).concat({ ...titled[1]!, flow: '19' })));
    expect(report.notes.some((note) => note.message.includes('�'))).toBe(false);
    const preview = await previewIntervals(bytesOf(feed(titled)), options);
    expect(new Set(preview.columns.map((column) => column.name))).toEqual(new Set(['Zähler – große Säge']));
  });

  it.each([
    ['every Atom id the same', (xml: string) => xml.replaceAll('<entry>', '<entry><id>urn:uuid:1</id>')],
    [
      'a duration of nought: the length of the type holds',
      (xml: string) => xml.replaceAll('duration>900<', 'duration>0<'),
    ],
    [
      'a length of nought: the duration of the reading holds',
      (xml: string) => xml.replaceAll('intervalLength>900<', 'intervalLength>0<'),
    ],
    [
      'no length anywhere: the step from one to the next holds',
      (xml: string) =>
        xml.replaceAll('duration>900<', 'duration>0<').replaceAll('intervalLength>900<', 'intervalLength>0<'),
    ],
    ['a title that lies about its unit', (xml: string) => xml.replace('Energy', 'Energy Delivered (therm)')],
    [
      'a child the standard does not know',
      (xml: string) => xml.replace('<espi:uom>', '<espi:timezone>EST</espi:timezone><espi:uom>'),
    ],
    ['another prefix', (xml: string) => xml.replaceAll('espi:', 'ns:').replace('xmlns:espi', 'xmlns:ns')],
  ])('stands %s', async (_name, spoil) => {
    const { load } = await read(spoil(feed([wh])));
    expect([...load.kwh]).toEqual(kwh);
  });

  it('gives readings without a start their place after the one before', async () => {
    const xml = feed([wh]).replace(/<espi:duration>900<\/espi:duration><espi:start>\d+<\/espi:start>/g, '');
    const { load } = await read(xml);
    expect([...load.kwh]).toEqual(kwh);
    expect(load.startMs).toBe(start * 1000);
  });

  it('counts readings of blocks that overlap as duplicates', async () => {
    const block = /<entry>[^]*?IntervalBlock\/1"\/>[^]*?<\/entry>/.exec(feed([wh]))![0];
    const { load, report } = await read(feed([wh], 'espi:', '', block));
    expect([...load.kwh]).toEqual(kwh);
    expect(report).toMatchObject({ duplicates: 4, missing: 0, rowsRead: 8 });
  });

  it('takes the least number of 48 bits as no value', async () => {
    const { load, report } = await read(feed([{ ...wh, values: [1000, -(2 ** 47), 1500, 500] }]));
    expect(load.kwh[1]).toBeNaN();
    expect(report).toMatchObject({ missing: 1, totalKwh: 3 });
  });

  it('takes the quality of the type where a reading has none', async () => {
    const typed = '<espi:defaultQuality>8</espi:defaultQuality>';
    const quality = (at: number) =>
      at === 0 ? '<espi:ReadingQuality><espi:quality>17</espi:quality></espi:ReadingQuality>' : '';
    const { load } = await read(feed([{ ...wh, typed, quality }]));
    expect([...load.quality]).toEqual([0, 1, 1, 1]);
  });

  it.each([
    ['gas by its commodity', { typed: '<espi:commodity>7</espi:commodity>' }, /Commodity 7 is no electricity/],
    ['cubic metres', { uom: '42' }, /cubic metres/],
    ['a temperature', { uom: '6' }, /a temperature/],
    [
      'a maximum within the interval',
      { uom: '38', typed: '<espi:dataQualifier>8</espi:dataQualifier>' },
      /the maximum/,
    ],
    ['a power of ten out of reach', { power: 4096 }, /power of ten 4096/],
  ])('leaves out %s and says why', async (_name, channel, why) => {
    const { load, report } = await read(feed([wh, { ...wh, id: '2', ...channel }]));
    expect([...load.kwh]).toEqual(kwh);
    expect(report.notes.find((note) => note.code === 'channel-left-out')?.message).toMatch(why);
  });

  it('leaves the readings of a gas meter out by the service of its usage point', async () => {
    const xml = feed([wh, { ...wh, id: '2', point: 'B' }]).replace(
      /(<title>Meter B<\/title><content>)<espi:UsagePoint\/>/,
      '$1<espi:UsagePoint><espi:ServiceCategory><espi:kind>1</espi:kind></espi:ServiceCategory></espi:UsagePoint>',
    );
    const { load } = await read(xml);
    expect([...load.kwh]).toEqual(kwh);
  });

  it('does not count a register beside the energies it sums up', async () => {
    const register = Array.from({ length: 12 }, (_, at) => 5_000_000 + at * 250);
    const { report } = await read(
      feed([
        { ...wh, values: register.map((_, at) => (at % 2 === 0 ? 200 : 300)) },
        { ...wh, id: '2', values: register },
      ]),
    );
    // 6 x 0.2 kWh and 6 x 0.3 kWh, once
    expect(report.totalKwh).toBe(3);
  });

  it('brings lengths that change within a feed to the longer, and leaves strays out with a note', async () => {
    const hourly = { ...wh, id: '1', minutes: 60, values: [4000, 4000], from: start - 7200 };
    const joined = await read(feed([hourly, { ...wh, id: '2', values: [1000, 1000, 1000, 1000] }]));
    expect([...joined.load.kwh]).toEqual([4, 4, 4]);
    expect(joined.load.stepMinutes).toBe(60);
    const values = Array.from({ length: 200 }, () => 1000);
    const stray = feed([{ ...wh, values }]).replace(
      '<espi:duration>900</espi:duration>',
      '<espi:duration>600</espi:duration>',
    );
    const { report } = await read(stray);
    expect(report).toMatchObject({ stepMinutes: 15, intervals: 199 });
    expect(codes(report)).toContain('length-odd');
  });

  it.each([
    ['of the wrong sign', '<espi:tzOffset>18000</espi:tzOffset>', /UTC\+5 where America\/Chicago has UTC-6/],
    ['with rules cut to 16 bits', '<espi:dstStartRule>360E</espi:dstStartRule>', /no 32 bits \(360E\)/],
  ])('notes local time parameters %s and reads the instants all the same', async (_name, fields, message) => {
    const { load, report } = await read(feed([wh], 'espi:', '', timeParameters(fields)));
    expect(load.startMs).toBe(start * 1000);
    expect(report.notes.find((note) => note.code === 'local-time-odd')?.message).toMatch(message);
  });

  it('says nothing of local time parameters that fit', async () => {
    // Central time: UTC-6, second Sunday of March and first of November at 02:00 (15 U.S.C. 260a), coded as REQ.21 does.
    const fields =
      '<espi:dstEndRule>B40E2000</espi:dstEndRule><espi:dstOffset>3600</espi:dstOffset><espi:dstStartRule>360E2000</espi:dstStartRule><espi:tzOffset>-21600</espi:tzOffset>';
    const { report } = await read(feed([wh], 'espi:', '', timeParameters(fields)));
    expect(codes(report)).not.toContain('local-time-odd');
  });

  it('gives a complete map that a person can correct, and reads the same with it', async () => {
    const nameless = feed([{ ...wh, type: false }]);
    const preview = await previewIntervals(bytesOf(nameless), options);
    expect(preview.problems).toHaveLength(1);
    const [column] = preview.columnMap.columns ?? [];
    expect(column).toMatchObject({ index: 0, role: 'ignore' });
    const columns = [{ ...column!, role: 'active' as const, unit: 'Wh', measure: 'energy' as const }];
    const first = await read(nameless, { ...preview.columnMap, columns });
    expect([...first.load.kwh]).toEqual(kwh);
    const again = await read(nameless, first.report.columnMap);
    expect([...again.load.kwh]).toEqual(kwh);
  });

  it('keeps the power of ten of a type when its own map is given back', async () => {
    const xml = feed([{ ...wh, power: 3, values: [1, 2, 1.5, 0.5] }]);
    const { report } = await read(xml);
    expect([...(await read(xml, report.columnMap)).load.kwh]).toEqual(kwh);
  });

  it('traces an interval to its line', async () => {
    const xml = feed([wh]).replaceAll('<espi:IntervalReading>', '\n<espi:IntervalReading>');
    const { fileName, unit, rows } = await traceInterval(bytesOf(xml), options, (start + 900) * 1000);
    const [row] = rows;
    expect({ fileName, unit, count: rows.length }).toEqual({ fileName: 'feed.xml', unit: 'line', count: 1 });
    expect(xml.split('\n')[row!.number - 1]).toContain('<espi:value>2000</espi:value>');
    expect(row!.cells).toContainEqual({ name: 'value', text: '2000' });
  });
});
