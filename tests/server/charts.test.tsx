import { JSDOM } from 'jsdom';
import type { ReactElement } from 'react';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { packCarpet } from '@/components/charts/carpet';
import { lightPalette } from '@/components/charts/palette';
import { ledgerCsv } from '@/components/ui/ledger';
import { investmentYears } from '@/core/economics';

const borrowed = [
  'document',
  'HTMLElement',
  'SVGElement',
  'Element',
  'Node',
  'requestAnimationFrame',
  'cancelAnimationFrame',
  'getComputedStyle',
] as const;

const dom = new JSDOM('<!doctype html><div id="root"></div>', { pretendToBeVisual: true });

/** Draws one chart the way the server's worker does, and gives its svg element. */
async function draw(element: ReactElement): Promise<SVGSVGElement> {
  const { createRoot } = await import('react-dom/client');
  const { flushSync } = await import('react-dom');
  const holder = dom.window.document.createElement('div');
  const root = createRoot(holder);
  flushSync(() => root.render(element));
  await new Promise((resolve) => setTimeout(resolve, 30));
  const svg = holder.querySelector('svg')?.cloneNode(true) as SVGSVGElement | undefined;
  root.unmount();
  if (!svg) throw new Error('The chart drew no svg.');
  return svg;
}

const words = (svg: SVGSVGElement) => [...svg.querySelectorAll('text')].map((text) => text.textContent);
const size = { width: 592, height: 300, palette: lightPalette };

const bills = [
  { label: 'Nov', year: '2025', before: 30_000, after: 25_000 },
  { label: 'Dec', before: 31_000, after: 24_000 },
];

beforeAll(() => {
  const target = globalThis as Record<string, unknown>;
  target.window = dom.window;
  for (const name of borrowed) target[name] = dom.window[name];
  if (!('navigator' in globalThis)) target.navigator = dom.window.navigator;
});

afterAll(() => dom.window.close());

describe('charts drawn without a browser', () => {
  it('PaybackChart marks the payback and carries literal colours', async () => {
    const { PaybackChart } = await import('@/components/charts/PaybackChart');
    const { paybackTable } = await import('@/components/charts/payback');
    const data = {
      currency: 'USD',
      capitalCost: 100_000,
      points: [0, 1, 2, 3].map((year) => ({
        year,
        cumulative: -100_000 + 50_000 * year,
        p10: -100_000 + 45_000 * year,
        p90: -100_000 + 55_000 * year,
        yours: -100_000 + 40_000 * year,
      })),
      paybackYears: 2,
      paybackRange: { fromYears: 1.8, toYears: 2.25 },
      editionName: 'edition 1',
    };
    const svg = await draw(<PaybackChart {...data} {...size} />);
    expect(svg.outerHTML).not.toContain('var(');
    expect(words(svg)).toEqual(expect.arrayContaining(['paid back after 24 months', 'edition 1', 'your figures']));
    expect(svg.querySelectorAll('.recharts-line-curve').length).toBe(5);
    expect(paybackTable(data).rows).toHaveLength(4);
  });

  it('BillsBeforeAfterChart prints the saving above each bill', async () => {
    const { BillsBeforeAfterChart, billsBeforeAfterTable } = await import('@/components/charts/BillsBeforeAfterChart');
    const data = { currency: 'USD', bills, what: 'all lines', planName: 'plan A' };
    const svg = await draw(<BillsBeforeAfterChart {...data} {...size} />);
    expect(words(svg)).toEqual(expect.arrayContaining(['5,000', '7,000', 'Nov', '2025']));
    expect(svg.querySelectorAll(`rect[stroke="${lightPalette.verdigris}"]`).length).toBe(2);
    expect(billsBeforeAfterTable(data).total).toMatchObject({ before: 61_000, after: 49_000, saved: 12_000 });
  });

  it('ReactiveCostChart draws a solid and an outlined part of each bill', async () => {
    const { ReactiveCostChart, reactiveCostTable } = await import('@/components/charts/ReactiveCostChart');
    const data = { currency: 'USD', bills: [{ label: 'Nov', demand: 4000, reactive: 1500 }] };
    const svg = await draw(<ReactiveCostChart {...data} {...size} />);
    expect(words(svg)).toContain('5,500');
    const rects = [...svg.querySelectorAll('rect')].map((rect) => Number(rect.getAttribute('height')));
    const [solid, outlined] = rects.filter((height) => height > 0).slice(-2);
    expect(solid! / outlined!).toBeCloseTo(4000 / 1500, 2);
    expect(reactiveCostTable(data).total).toMatchObject({ demand: 4000, reactive: 1500, total: 5500 });
  });

  it('VCurveChart names limits, loads and marks', async () => {
    const { VCurveChart } = await import('@/components/charts/VCurveChart');
    const { vCurveTable } = await import('@/components/charts/v-curve');
    const curve = [60, 100, 140, 180].map((fieldA) => ({
      fieldA,
      armatureA: 120 + Math.abs(fieldA - 100),
      leading: fieldA > 100,
    }));
    const data = {
      motorName: 'M-1',
      curves: [{ loadPercent: 75, points: curve }],
      unity: [{ fieldA: 100, armatureA: 120 }],
      usualLoadPercent: 75,
      limits: { armatureA: 270, fieldA: 204, pullOut: [{ fieldA: 50, armatureA: 200 }] },
      today: { fieldA: 109, armatureA: 129 },
      plan: { fieldA: 164, armatureA: 184 },
      planName: 'plan A',
    };
    const svg = await draw(<VCurveChart {...data} {...size} />);
    const expected = ['stator, 270\u00a0A', 'field, 204\u00a0A', 'today 109\u00a0A', 'plan A 164\u00a0A', '75 % load'];
    expect(words(svg)).toEqual(expect.arrayContaining(expected));
    expect(svg.querySelectorAll('path[stroke-dasharray="6 3"]').length).toBe(1);
    const row = vCurveTable(data).rows.find((entry) => entry.id === '120');
    expect(row?.cells['load-75']).toBeCloseTo(140, 9);
  });

  it('FieldControlChart says delivers and absorbs instead of signs', async () => {
    const { FieldControlChart } = await import('@/components/charts/FieldControlChart');
    const { fieldControlTable } = await import('@/components/charts/field-control');
    const points = (kvar: number) => [0, 50, 100].map((loadPercent) => ({ loadPercent, kvarDelivered: kvar }));
    const data = {
      motorName: 'M-1',
      loadPercents: [0, 50, 100, 125],
      most: [0, 25, 50, 75, 100].map((loadPercent) => ({ loadPercent, kvarDelivered: 900, binding: 'field' as const })),
      least: points(-700).map((p) => ({ ...p, binding: 'pull-out' as const })),
      fieldBy: 'exciter',
      lines: [
        { name: 'held 164 A', points: points(600), strong: true },
        { name: 'held kvar', points: points(-300), dash: '8 4' },
      ],
      usualLoadPercent: 50,
      marks: [
        { name: 'today', shape: 'circle' as const, kvarDelivered: -300 },
        { name: 'plan A', shape: 'diamond' as const, kvarDelivered: 600 },
      ],
    };
    const svg = await draw(<FieldControlChart {...data} {...size} />);
    const expected = ['today absorbs 300', 'plan A delivers 600', 'exciter', 'held 164 A', 'held kvar'];
    expect(words(svg)).toEqual(expect.arrayContaining(expected));
    expect(words(svg).join(' ')).not.toMatch(/[-\u2212]\d/);
    const table = fieldControlTable(data);
    expect(table.rows.at(-1)?.cells).toMatchObject({ most: 'not admissible', 'line-0': 'cannot run' });
    expect(table.rows[1]?.cells).toMatchObject({ limit: 'exciter', 'line-1': '300 absorbed' });
  });

  it('PqPlaneChart draws hours as squares, filled where the motor absorbs', async () => {
    const { PqPlaneChart } = await import('@/components/charts/PqPlaneChart');
    const { deliveryEdge, pqPlaneTable } = await import('@/components/charts/pq-plane');
    const half = Array.from({ length: 13 }, (_, i) => (Math.PI * i) / 12);
    const data = {
      motorName: 'M-1',
      squareKw: 25,
      squareKvar: 25,
      limits: {
        armature: half.map((angle) => ({ kw: 1000 * Math.sin(angle), kvarDelivered: 1000 * Math.cos(angle) })),
        field: [0, 500, 900, 1100].map((kw) => ({ kw, kvarDelivered: 800 })),
        fieldBy: 'field',
        pullOut: [200, 500, 900].map((kw) => ({ kw, kvarDelivered: kw - 1000 })),
        pullOutName: 'pull-out 1.5',
      },
      nameplate: { kw: 800, kvarDelivered: 600 },
      usualKw: 600,
      usualName: 'usual load, 75 %',
      clouds: [
        {
          name: 'today 109 A',
          shape: 'circle' as const,
          usual: { kw: 600, kvarDelivered: -300 },
          squares: [{ kw: 600, kvarDelivered: -300, hours: 400, beyond: 'pull-out' }],
        },
        {
          name: 'plan A 164 A',
          shape: 'diamond' as const,
          usual: { kw: 610, kvarDelivered: 500 },
          squares: [
            { kw: 600, kvarDelivered: 500, hours: 400, beyond: '' },
            { kw: 500, kvarDelivered: 525, hours: 100, beyond: '' },
          ],
        },
      ],
    };
    // At 900 kW the circle of 1000 kVA leaves sqrt(1 - 0.81) x 1000 = 435.9 kvar, below the 800 of the field; 1100 kW lies outside
    const edge = deliveryEdge(data.limits).map((p) => p.kvarDelivered);
    expect(edge).toHaveLength(3);
    expect(edge[1]).toBe(800);
    expect(edge[2]).toBeCloseTo(435.9, 1);
    const svg = await draw(<PqPlaneChart {...data} {...size} />);
    const expected = ['absorbs 300', 'delivers 500', 'stator', 'field', 'pull-out 1.5', 'nameplate', 'plan A 164 A'];
    expect(words(svg)).toEqual(expect.arrayContaining(expected));
    expect(words(svg).join(' ')).not.toMatch(/[-\u2212]\d/);
    const areas = [...svg.querySelectorAll('rect[stroke-width="1.3"]')].map(
      (r) => Number(r.getAttribute('width')) ** 2,
    );
    expect(areas[0]! / areas[1]!).toBeCloseTo(4, 6);
    expect(svg.querySelectorAll('rect[stroke-width="0.5"]')).toHaveLength(1);
    expect(pqPlaneTable(data).rows[0]?.cells).toMatchObject({ hours: 400, kvar: '300 absorbed', beyond: 'pull-out' });
  });

  it('LossChart marks today, the setting tried and the least loss', async () => {
    const { LossChart } = await import('@/components/charts/LossChart');
    const { lossTable } = await import('@/components/charts/loss-per-kvar');
    const at = (kvarDelivered: number) => ({
      kvarDelivered,
      fieldA: 120 + kvarDelivered / 10,
      lossKw: 40 + kvarDelivered / 100,
      marginalWPerKvar: 10 + kvarDelivered / 100,
      averageWPerKvar: 8 + kvarDelivered / 200,
    });
    const data = {
      motorName: 'M-1',
      fieldName: 'Field current',
      fieldDecimals: 0,
      points: [-900, -600, -300, 0, 300, 600, 900].map(at),
      least: at(-900),
      today: at(-300),
      tried: { ...at(600), name: 'plan A' },
      most: { kvarDelivered: 800, name: 'field' },
    };
    const svg = await draw(<LossChart {...data} {...size} />);
    const expected = [
      'today 7.0\u00a0W',
      'plan A 16.0\u00a0W',
      'the next kvar',
      'mean since today',
      'absorbs kvar',
      'field',
    ];
    expect(words(svg)).toEqual(expect.arrayContaining(expected));
    expect(words(svg)).toContain('least loss, 31.0\u00a0kW');
    expect(lossTable(data).rows[1]?.cells).toMatchObject({ kvar: '600 delivered', marginal: 16 });
  });

  it('CostCurveChart says that its axis is cut', async () => {
    const { CostCurveChart, costCurveTable } = await import('@/components/charts/CostCurveChart');
    const data = {
      currency: 'USD',
      points: [100, 150, 200].map((fieldA) => ({ fieldA, yearCost: 2_100_000 - fieldA * 100 })),
      chosen: { fieldA: 150, yearCost: 2_085_000 },
      limitFieldA: 204,
      reserveFieldA: 194,
      axisName: 'Field current of M-1, A',
    };
    const svg = await draw(<CostCurveChart {...data} {...size} />);
    expect(words(svg).some((text) => text?.includes('axis cut'))).toBe(true);
    expect(words(svg)).toEqual(expect.arrayContaining(['chosen 150\u00a0A', '2,085,000', 'reserve, 194\u00a0A']));
    expect(costCurveTable(data).rows.map((row) => row.cells.note)).toEqual(['', 'chosen', 'within the reserve']);
  });

  it('DayChart marks the interval that set the peak', async () => {
    const { DayChart, dayTable } = await import('@/components/charts/DayChart');
    const points = Array.from({ length: 96 }, (_, index) => ({ minute: index * 15, kw: 100 + index, kvarLagging: 60 }));
    const data = { dayName: 'Mon 4 Aug 2025', stepMinutes: 15, points, peak: { minute: 1425, kw: 195 } };
    const svg = await draw(<DayChart {...data} {...size} />);
    expect(words(svg)).toContain('195\u00a0kW, 23:45 to 24:00');
    expect(dayTable(data).rows.at(-1)?.kind).toBe('chosen');
  });

  it('DayChart keeps the words of the peak clear of the line that dips beside it', async () => {
    const { DayChart } = await import('@/components/charts/DayChart');
    const points = Array.from({ length: 96 }, (_, index) => ({
      minute: index * 15,
      kw: 4500,
      kvarLagging: index >= 44 && index < 50 ? 1500 : 2800,
    }));
    const peak = { minute: 885, kw: 4500, kvarLagging: 2800, powerFactor: 0.85 };
    const svg = await draw(
      <DayChart dayName="Mon 1 Jun 2026" stepMinutes={15} points={points} peak={peak} {...size} />,
    );
    const label = [...svg.querySelectorAll('text')].find((one) => /kvar lagging, pf/.test(one.textContent ?? ''));
    const paths = [...svg.querySelectorAll('path.recharts-curve')].map((path) => path.getAttribute('d') ?? '');
    const heights = paths.flatMap((d) => [...d.matchAll(/,([\d.]+)/g)].map((match) => Number(match[1])));
    // Letters of 12 rise about 9 above their line: the lowest point drawn stays above them.
    expect(heights.length).toBeGreaterThan(96);
    expect(Number(label?.getAttribute('y')) - 9).toBeGreaterThan(Math.max(...heights));
  });

  it('CashFlowChart draws spending below the line and saving above it', async () => {
    const { CashFlowChart } = await import('@/components/charts/CashFlowChart');
    const { cashFlowTable, stepsOf } = await import('@/components/charts/cash-flow');
    // Saved 70,000 less upkeep 10,000: 60,000 remain, -40,000 so far, 5,000 a month.
    const investment = { capitalCost: 100_000, saving: { demand: 70_000 }, growth: {}, yearlyUpkeep: 10_000 };
    const years = investmentYears({ ...investment, discountRate: 0, years: 1 });
    const svg = await draw(<CashFlowChart steps={stepsOf(years, 'years')} by="years" currency="USD" {...size} />);
    expect(words(svg)).toEqual(expect.arrayContaining(['\u2212100,000', '60,000']));
    const table = cashFlowTable({ currency: 'USD', years }, 'years');
    expect(table.columns.map(({ head }) => head)).toEqual(['Year', 'Work', 'Saved', 'Upkeep', 'Remains', 'So far']);
    expect(table.rows.at(-1)?.cells).toMatchObject({
      saving: 70_000,
      upkeep: -10_000,
      net: 60_000,
      cumulative: -40_000,
    });
    const monthly = cashFlowTable({ currency: 'USD', years }, 'months');
    expect(monthly.rows).toHaveLength(13);
    expect(monthly.rows.at(-1)?.cells).toMatchObject({ step: '12', net: 5000, cumulative: -40_000 });
    const months = await draw(<CashFlowChart steps={stepsOf(years, 'months')} by="months" currency="USD" {...size} />);
    expect(words(months)).toContain('12');
  });

  it('RankingChart puts what, from and to, and the paybacks beside the bars', async () => {
    const { RankingChart } = await import('@/components/charts/RankingChart');
    const { rankingFinding, rankingTable } = await import('@/components/charts/ranking');
    const work = {
      name: 'The cost of the work',
      unit: 'USD',
      low: { words: '80,000', npv: 120_000, paybackYears: 1.25 },
      high: { words: '130,000', npv: 70_000, paybackYears: 2 },
    };
    const hours = {
      name: 'Operating hours',
      unit: '% of last year',
      low: { words: '94', npv: -5000, paybackYears: null },
      high: { words: '107', npv: 40_000, paybackYears: 1.5 },
    };
    const data = { currency: 'USD', npv: 95_000, paybackYears: 1.6, rows: [work, hours] };
    const svg = await draw(<RankingChart {...data} {...size} />);
    expect(words(svg).map((one) => one.replaceAll('\u00a0', ' '))).toEqual(
      expect.arrayContaining([
        'The cost of the work',
        '80,000 to 130,000 USD',
        '15 to 24 months',
        '18 months to never',
      ]),
    );
    expect(rankingFinding(data).replaceAll('\u00a0', ' ')).toBe(
      'The cost of the work moves the result most, from 70,000 USD to 120,000 USD in present value. Operating hours alone can make the plan a loss.',
    );
    expect(rankingTable(data).rows[1]?.cells).toMatchObject({
      npvLow: -5000,
      paybackLow: 'never',
      paybackHigh: '18 months',
    });
  });

  it('PaybackChart names where the reader’s own line is paid back', async () => {
    const { PaybackChart } = await import('@/components/charts/PaybackChart');
    const points = [0, 1, 2, 3].map((year) => ({ year, cumulative: -100 + 60 * year, yours: -100 + 50 * year }));
    const data = { currency: 'USD', capitalCost: 120, incentive: 20, points, paybackYears: 5 / 3 };
    const svg = await draw(<PaybackChart {...data} editionName="edition 1" yoursPaybackYears={2} {...size} />);
    expect(words(svg)).toEqual(expect.arrayContaining(['yours: 24 months', 'paid back after 20 months']));
    expect(words(svg).join(' ')).toContain('120\u00a0USD paid once, 20 of it a grant');
  });

  it('CarpetChart draws a year of quarter-hours with few nodes', async () => {
    const { CarpetChart, carpetTable } = await import('@/components/charts/CarpetChart');
    const days = Array.from({ length: 365 }, (_, day) => ({
      date: new Date(Date.UTC(2025, 6, 10 + day)).toISOString().slice(0, 10),
      readings: Array.from({ length: 96 }, (_, at) =>
        day === 56 && at < 30 ? null : 1000 + 20 * at + (day % 7) * 100,
      ),
    }));
    const data = packCarpet({ unit: 'kW', stepMinutes: 15, days });
    expect(data.days[56]).toMatchObject({ missing: 30 });
    const svg = await draw(<CarpetChart {...data} {...size} />);
    expect(svg.querySelectorAll('*').length).toBeLessThan(200);
    expect(words(svg)).toEqual(expect.arrayContaining(['Aug', 'missing']));
    expect(carpetTable(data).rows).toHaveLength(365);
  });

  it('CarpetChart tells the steps of a small plant apart', async () => {
    const { CarpetChart } = await import('@/components/charts/CarpetChart');
    // Even from 0 to 6 kW: six thresholds about 1 kW apart, which whole kilowatts could not name.
    const readings = Array.from({ length: 96 }, (_, at) => (6 * at) / 95);
    const data = packCarpet({ unit: 'kW', stepMinutes: 15, days: [{ date: '2025-07-10', readings }] });
    expect(new Set(data.thresholds).size).toBe(6);
    const svg = await draw(<CarpetChart {...data} {...size} />);
    const named = words(svg).filter((word) => /^\d+\.\d+( and above, kW)?$/.test(word));
    expect(new Set(named).size).toBe(6);
  });
});

describe('the carpet of kvar and power factor', () => {
  const input = {
    stepMinutes: 360,
    days: [
      { date: '2026-03-01', readings: [400, 300, 0, null], kvar: [300, -400, 0, null], estimated: [1] },
      { date: '2026-03-02', readings: [600, 600, 600, 600], kvar: [800, 0, 80, -80] },
    ],
  };

  it('packs three pictures where reactive energy is carried, else one', async () => {
    const { packCarpets } = await import('@/components/charts/carpet');
    const [kw, kvar, pf] = packCarpets(input);
    expect([kw!.unit, kvar!.unit, pf!.unit]).toEqual(['kW', 'kvar', 'pf']);
    // 400 and 300 make 500: pf 0.8 lagging, step 4 (below 0.98, 0.95, 0.9, 0.85, not below 0.8); 300 and -400: pf 0.6 leading, the
    // poorest step; nothing flows: 1; 600 and 800 make 1,000: 0.6 lagging; 600 and 80 make 605.3: 0.991.
    expect(pf!.days.map(({ steps }) => steps)).toEqual(['4g0-', '600a']);
    expect(kvar!.days[0]).toMatchObject({ least: -400, greatest: 300, missing: 1, estimated: [[1, 1]] });
    expect(kvar!.days[0]!.steps).toMatch(/^[1-6][b-g]0-$/);
    expect(packCarpets({ ...input, days: [{ date: '2026-03-01', readings: [1, 2] }] })).toHaveLength(1);
  });

  it('draws lagging in copper, leading in verdigris and hatched, what is estimated hatched, each named in the key', async () => {
    const { packCarpets } = await import('@/components/charts/carpet');
    const { CarpetChart, carpetTable } = await import('@/components/charts/CarpetChart');
    const [, kvar] = packCarpets(input);
    const svg = await draw(<CarpetChart {...kvar!} {...size} />);
    const fills = [...svg.querySelectorAll('path')].map((path) => path.getAttribute('fill'));
    expect(fills).toEqual(expect.arrayContaining([lightPalette.copper, lightPalette.verdigris]));
    expect(fills.filter((fill) => fill?.startsWith('url(#hatch-s')).length).toBeGreaterThan(0);
    expect(fills.filter((fill) => fill?.startsWith('url(#hatch-p')).length).toBeGreaterThan(0);
    expect(words(svg)).toEqual(expect.arrayContaining(['lagging', 'leading', 'estimated', 'missing']));
    const [first] = carpetTable(kvar!).rows;
    expect(first!.cells).toMatchObject({ least: { value: -400, tone: 'leading' }, estimated: 1, missing: 1 });
  });
});

describe('ledgerCsv', () => {
  it('keeps text that a spreadsheet would run as a formula as text', () => {
    const columns = [
      { key: 'name', head: '=cmd' },
      { key: 'kvar', head: 'kvar', kind: 'number' as const },
    ];
    const rows = ['=1+1', '+1', '-x', '@sum'].map((name, index) => ({ id: String(index), cells: { name, kvar: -5 } }));
    const csv = ledgerCsv({ columns, rows });
    expect(csv).toBe("'=cmd,kvar\r\n'=1+1,-5\r\n'+1,-5\r\n'-x,-5\r\n'@sum,-5\r\n");
  });

  it('writes money in major units with a point and quotes what needs it', () => {
    const columns = [
      { key: 'bill', head: 'Bill' },
      { key: 'due', head: 'Due', kind: 'money' as const, currency: 'USD' },
    ];
    const csv = ledgerCsv({ columns, rows: [{ id: '1', cells: { bill: 'Aug, "late"', due: 1552491 } }] });
    expect(csv).toBe('Bill,Due (USD)\r\n"Aug, ""late""",15524.91\r\n');
  });
});
