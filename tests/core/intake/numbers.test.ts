import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseNumberAt, parseNumberText, voteDecimalMark } from '@/core/intake/numbers';
import { civilDay, StampScanner } from '@/core/intake/stamps';
import { readText } from './files';

const point = 46;

describe('parseNumberAt', () => {
  it('agrees with the platform to the bit on every figure of up to 15 digits', () => {
    const figures = fc.tuple(fc.boolean(), fc.integer({ min: 0, max: 99_999_999 }), fc.stringMatching(/^\d{0,7}$/));
    fc.assert(
      fc.property(figures, ([isNegative, whole, decimals]) => {
        const text = `${isNegative ? '-' : ''}${whole}${decimals === '' ? '' : `.${decimals}`}`;
        expect(parseNumberAt(text, 0, text.length, point)).toBe(Number(text));
      }),
      { numRuns: 2000 },
    );
  });

  it('reads within bounds only', () => {
    expect(parseNumberAt('9912.50,77', 2, 7, point)).toBe(12.5);
  });

  it.each(['', '-', '.', '1.2.3', '1,5', '1 2', '12a', '1e3', '1234567890123456'])(
    'leaves “%s” to the slow reader',
    (text) => {
      expect(parseNumberAt(text, 0, text.length, point)).toBeNaN();
    },
  );
});

describe('parseNumberText', () => {
  it.each([
    ['$1,234.56', '.', 1234.56],
    ['(12.30)', '.', -12.3],
    ['($1,234.00)', '.', -1234],
    ['1.234,56', ',', 1234.56],
    ['1.528,53700', ',', 1528.537],
    ['12,30-', ',', -12.3],
    ['1 234 567,8 €', ',', 1_234_567.8],
    ['1\u00a0234,5', ',', 1234.5],
    ["1'234.5", '.', 1234.5],
    ['USD 12.5', '.', 12.5],
    ['.145', '.', 0.145],
    ['1e3', '.', 1000],
    ['−4', '.', -4],
    ['+4', '.', 4],
    ['88%', '.', 88],
    ['12,34,567', '.', 1_234_567],
  ] as const)('reads %s', (text, mark, figure) => {
    expect(parseNumberText(text, mark)).toBeCloseTo(figure, 12);
  });

  it.each(['1,23', '1,2345', 'abc', '12 kWh', '1..2', '--1', 'NaN', 'Infinity', '0x10', '01.02.2025'])(
    'refuses %s',
    (text) => {
      expect(parseNumberText(text, '.')).toBeNaN();
    },
  );
});

describe('voteDecimalMark', () => {
  it.each([
    [['1,5', '2,25'], ',', true],
    [['1.5', '1,234.5'], '.', true],
    [['1.234.567', '2,5'], ',', true],
    [['0,123'], ',', true],
    [['1,234', '5,678'], '.', false],
    [['12', '13'], '.', true],
  ] as const)('of %j is %s', (cells, mark, sure) => {
    expect(voteDecimalMark(cells, '.')).toMatchObject({ mark, sure });
  });
});

describe('civilDay', () => {
  it('agrees with the platform on every day from 1970 to 2199', () => {
    for (let day = 0; day < 84_000; day += 1) {
      const date = new Date(day * 86_400_000);
      expect(civilDay(date.getUTCFullYear(), date.getUTCMonth() + 1, date.getUTCDate())).toBe(day);
    }
  });

  it.each([
    [2025, 2, 29],
    [2100, 2, 29],
    [2025, 4, 31],
    [2025, 13, 1],
    [2025, 0, 1],
    [2025, 1, 0],
  ])('knows no %d-%d-%d', (year, month, day) => {
    expect(civilDay(year, month, day)).toBeNaN();
  });
});

describe('StampScanner', () => {
  const scanner = new StampScanner();
  const minuteOf = (text: string): number =>
    scanner.scan(text, 0, text.length) && scanner.resolve('DMY') ? scanner.day * 1440 + scanner.minute : Number.NaN;

  it('reads any minute in many spellings alike', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 60_000_000 }), (minute) => {
        const iso = new Date(minute * 60_000).toISOString();
        const [date = '', time = ''] = iso.split('T');
        const [year, month, day] = date.split('-');
        const clock = time.slice(0, 5);
        const spellings = [
          iso,
          `${date} ${clock}`,
          `${day}/${month}/${year} ${clock}`,
          `${day}.${month}.${year} ${clock}:00`,
          `${year}${month}${day}${clock.replace(':', '')}`,
          `${year}${month}${day} ${clock.replace(':', '')}`,
        ];
        expect(spellings.map(minuteOf)).toEqual(spellings.map(() => minute));
      }),
    );
  });

  it('reads stamps that differ in their clock time alone as it reads them one by one', () => {
    const steady = new StampScanner();
    steady.steadyOrder = 'YMD';
    const cell = fc.record({
      day: fc.integer({ min: 1, max: 3 }),
      hour: fc.integer({ min: 0, max: 25 }),
      minute: fc.integer({ min: 0, max: 61 }),
      tail: fc.constantFrom('', '', ':00', ':59', '+02:00', '+01:00', ':00Z', ' PM'),
    });
    const two = (figure: number): string => String(figure).padStart(2, '0');
    fc.assert(
      fc.property(fc.array(cell, { minLength: 2, maxLength: 30 }), (cells) => {
        for (const { day, hour, minute, tail } of cells) {
          const text = `2025-03-0${day} ${two(hour)}:${two(minute)}${tail}`;
          const alone = new StampScanner();
          const expected = alone.scan(text, 0, text.length) && alone.resolve('YMD');
          expect(steady.scan(text, 0, text.length) && steady.resolve('YMD')).toBe(expected);
          if (!expected) continue;
          expect([steady.day, steady.offsetMinutes]).toEqual([alone.day, alone.offsetMinutes]);
          expect(steady.minute).toBeCloseTo(alone.minute, 9);
        }
      }),
      { numRuns: 500 },
    );
  });

  it.each([
    '25:00',
    '2025-03-13 24:15',
    '2025-03-13 12:60',
    '13/13/2025 10:00',
    '31/04/2025 10:00',
    'soon',
    '2025-03-13 13:00 PM',
    '',
  ])('refuses “%s”', (text) => {
    expect(minuteOf(text)).toBeNaN();
  });
});

describe('two styles of numbers in one column', () => {
  const rows = (figures: string[]) =>
    figures.map(
      (figure, at) =>
        `2025-06-10 ${String(Math.floor(at / 4)).padStart(2, '0')}:${String((at % 4) * 15).padStart(2, '0')};${figure}`,
    );
  const read = (figures: string[]) => readText(['Time;Energy kWh', ...rows(figures)].join('\n'), 'UTC');

  it('are refused by their place where they contradict each other', async () => {
    const mixed = Array.from({ length: 40 }, (_, at) => (at % 2 === 0 ? '1.234,5' : '1,234.5'));
    await expect(read(mixed)).rejects.toThrow(/hold words.*row \d+, column B/);
  });

  it('are left missing by name where they are few, and the mark is asked', async () => {
    const { report } = await read(Array.from({ length: 40 }, (_, at) => (at === 7 ? '12.75' : '12,5')));
    expect(report).toMatchObject({ missing: 1, totalKwh: 39 * 12.5 });
    const codes = report.notes.map((note) => note.code);
    expect(codes).toEqual(expect.arrayContaining(['value-unreadable', 'decimal-mark-assumed']));
  });
});
