import { describe, expect, it } from 'vitest';
import { previewIntervals, readBills, readIntervals, type ColumnMap } from '@/core/intake';
import { feed, start, type Channel } from './espi-feeds';
import { bytesOf } from './files';

const read = (text: string, columnMap?: ColumnMap) =>
  readIntervals(bytesOf(text), {
    fileName: 'feed.xml',
    timeZone: 'America/Chicago',
    ...(columnMap ? { columnMap } : {}),
  });

describe('ESPI', () => {
  const wh: Channel = { id: '1', values: [1000, 2000, 1500, 500] };

  it.each(['espi:', 'ns0:', ''])('matches names by namespace, prefix “%s”', async (prefix) => {
    const { load, report } = await read(feed([wh], prefix));
    expect(load.startMs).toBe(start * 1000);
    expect([...load.kwh]).toEqual([1, 2, 1.5, 0.5]);
    expect(report).toMatchObject({ format: 'espi', rowsRead: 4, maxKw: 8 });
  });

  it('pairs channels by their links and applies the power of ten', async () => {
    const { load } = await read(
      feed([
        { id: '9', uom: '73', flow: '3', power: 3, values: [1, 0, 1, 0], title: 'Energy Delivered (kWh)' },
        { id: '3', uom: '73', flow: '2', power: 0, values: [400, 300, 200, 100], title: 'Energy Delivered (kWh)' },
        { ...wh, id: '5', power: 3, values: [1, 2, 1, 2], title: 'Energy Delivered (kWh)' },
        { id: '7', uom: '169', values: [5, 5, 5, 5], title: 'Gas' },
      ]),
    );
    expect([...load.kwh]).toEqual([1, 2, 1, 2]);
    expect([...load.kvarhLagging]).toEqual([0.4, 0.3, 0.2, 0.1]);
    expect([...load.kvarhLeading]).toEqual([1, 0, 1, 0]);
  });

  it('reads average power and leaves reverse flow out', async () => {
    const { load, report } = await read(
      feed([
        { id: '1', uom: '38', values: [4000, 8000, 4000, 8000] },
        { id: '2', flow: '19', values: [100, 100, 100, 100] },
      ]),
    );
    expect([...load.kwh]).toEqual([1, 2, 1, 2]);
    expect(report.notes.find((note) => note.code === 'export-left-out')?.message).toContain('0.4 kWh');
  });

  it('marks codes 7 to 13 and 15 as estimated, others as measured', async () => {
    const codes = [0, 7, 8, 13, 14, 15, 17, 19];
    const quality = (at: number) =>
      `<espi:ReadingQuality><espi:quality>${codes[at]}</espi:quality></espi:ReadingQuality>`;
    const { load } = await read(feed([{ ...wh, values: codes.map(() => 1000), quality }]));
    expect([...load.quality]).toEqual([0, 1, 1, 1, 0, 1, 0, 0]);
  });

  it('lays channels that take turns into each other and counts what two of them name', async () => {
    const values = Array.from({ length: 60 }, (_, at) => 1000 + at * (at % 2 === 0 ? 1 : -1));
    const { load, report } = await read(
      feed([
        { ...wh, id: '1', values: values.slice(0, 31) },
        { ...wh, id: '2', values: values.slice(30), from: start + 30 * 900 },
      ]),
    );
    expect([...load.kwh]).toEqual(values.map((value) => value / 1000));
    expect(report).toMatchObject({ duplicates: 1, missing: 0 });
  });

  it('adds channels that run together', async () => {
    const { load } = await read(feed([wh, { ...wh, id: '2' }]));
    expect([...load.kwh]).toEqual([2, 4, 3, 1]);
  });

  it('takes differences of readings that only grow', async () => {
    const values = Array.from({ length: 12 }, (_, at) => 5_000_000 + at * 250);
    const { load } = await read(feed([{ ...wh, values }]));
    expect([...load.kwh]).toEqual(Array.from({ length: 11 }, () => 0.25));
  });

  it('asks for the unit where no type tells it, and takes the map at its word', async () => {
    const nameless = feed([{ ...wh, type: false }]);
    await expect(read(nameless)).rejects.toThrow(/No reading type tells the unit/);
    const { load } = await read(nameless, {
      kind: 'intervals',
      columns: [{ index: 0, name: 'Energy', role: 'active', unit: 'Wh' }],
    });
    expect([...load.kwh]).toEqual([1, 2, 1.5, 0.5]);
  });

  it('lists several meters and reads the one picked', async () => {
    const two = feed([wh, { ...wh, id: '2', point: 'B', values: [100, 100, 100, 100] }]);
    await expect(read(two)).rejects.toThrow(/2 meters: Meter A, Meter B/);
    expect((await read(two, { kind: 'intervals', meter: 'Meter B' })).report.totalKwh).toBeCloseTo(0.4, 9);
    expect((await previewIntervals(bytesOf(two), { fileName: 'f.xml', timeZone: 'UTC' })).meters).toEqual([
      'Meter A',
      'Meter B',
    ]);
  });

  it('reads a feed that runs backwards on one line behind a mark', async () => {
    const turned = feed([wh])
      .replace(/\n/g, '')
      .replace(/(<espi:IntervalReading>.*?<\/espi:IntervalReading>)+/, (all) =>
        (all.match(/<espi:IntervalReading>.*?<\/espi:IntervalReading>/g) ?? []).reverse().join(''),
      );
    const { load } = await read(`\uFEFF${turned}`);
    expect([...load.kwh]).toEqual([1, 2, 1.5, 0.5]);
  });

  it.each([
    ['a document type', feed([wh], 'espi:', '<!DOCTYPE feed [<!ENTITY a "aaaa">]>'), /document type/],
    ['a feed that is cut off', feed([wh]).slice(0, -200), /broken.*line \d/s],
    ['other XML', '<?xml version="1.0"?><note><to>you</to></note>', /no ESPI feed/],
    ['deep nesting', `<?xml version="1.0"?>${'<a>'.repeat(60)}${'</a>'.repeat(60)}`, /nested too deep/],
    ['a sentinel in place of a unit', feed([{ ...wh, uom: '65535', power: 4096 }]), /none of energy or power/],
  ])('refuses %s', async (_name, text, message) => {
    await expect(read(text)).rejects.toThrow(message);
  });

  it('takes a reading with several codes as estimated if any of them is', async () => {
    const code = (quality: number) =>
      `<espi:ReadingQuality><espi:quality>${quality}</espi:quality></espi:ReadingQuality>`;
    const qualities = [code(8) + code(17), code(14), code(17) + code(15), code(18)];
    const { load } = await read(feed([{ ...wh, quality: (at) => qualities[at] ?? '' }]));
    expect([...load.quality]).toEqual([1, 0, 1, 0]);
  });

  it('does not count average power beside the energy it repeats', async () => {
    const watts = { id: '2', uom: '38', values: [4000, 8000, 6000, 2000] };
    const { report } = await read(feed([wh, watts]));
    expect(report.totalKwh).toBe(5);
    expect(report.notes.map((note) => note.code)).toContain('channel-left-out');
  });

  it('tells meters apart by their links where their titles are alike', async () => {
    const xml = feed([wh, { ...wh, point: 'B' }])
      .replace('Meter A', 'Main')
      .replace('Meter B', 'Main');
    await expect(read(xml)).rejects.toThrow('2 meters: Main (A), Main (B)');
    const { report } = await read(xml, { kind: 'intervals', meter: 'Main (B)' });
    expect(report.totalKwh).toBe(5);
  });

  it('lays short channels that take turns into each other', async () => {
    const parts = [0, 4, 7].map((from, at) => ({ ...wh, id: String(at), from: start + from * 900 }));
    const { report } = await read(feed(parts));
    // 5 kWh three times, less the first reading (1 kWh) of the third, which the second has filled.
    expect(report).toMatchObject({ intervals: 11, missing: 0, duplicates: 1, totalKwh: 14 });
  });

  it('takes cumulative readings as a register, and an export beside them that stands still', async () => {
    const xml = feed([
      { id: '1', power: 3, values: [500, 504, 508, 513] },
      { id: '2', flow: '19', power: 3, values: [7, 7, 7, 7] },
    ]).replaceAll('accumulationBehaviour>1<', 'accumulationBehaviour>3<');
    const { load, report } = await read(xml);
    expect([...load.kwh]).toEqual([4, 4, 5]);
    expect(report.missing).toBe(0);
  });

  it('works kvarh out from a power factor channel: 4 kWh at 0.8 are 3 kvarh', async () => {
    const factor = { id: '2', uom: '65', flow: '0', power: -2, values: [80, 80, 80, 80] };
    const { load, report } = await read(feed([{ id: '1', values: [4000, 4000, 4000, 4000] }, factor]));
    expect(load.kvarhLagging[0]).toBeCloseTo(3, 9);
    expect(report.notes.map((note) => note.code)).toContain('reactive-derived');
  });

  it.each(['constructor', '__proto__', 'toString'])('leaves a channel with the unit code “%s” out', async (uom) => {
    await expect(read(feed([{ ...wh, uom }]))).rejects.toThrow('holds no energy that is known');
  });

  it('holds no bills', async () => {
    await expect(readBills(bytesOf(feed([wh])), { fileName: 'feed.xml', timeZone: 'UTC' })).rejects.toThrow(
      /intervals, not bills/,
    );
  });
});
