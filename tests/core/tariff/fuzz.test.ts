import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { outcomeOf, type Outcome } from './outcome';
import { kestrel, millrace, millracePlain, tidewater } from './worked-schedules';

// A file from a stranger prices, or is refused with place and words; it never crashes, hangs or changes the machine. Seeded throughout.

const folder = path.resolve('tariffs');
const library = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.yaml'));
const seeds = [
  ...library.map((name) => readFileSync(path.join(folder, name), 'utf8')),
  millrace,
  millracePlain.replace('2026-10:', '2026-07:'),
  kestrel.replace('2026-04:', '2026-07:').replace('{ unit: kW }', '{ unit: kW, default: 900 }'),
  tidewater,
];

function random(seed: number): (below: number) => number {
  let state = seed;
  return (below) => (state = (state * 48_271) % 2_147_483_647) % below;
}

const oddValues = [
  '0',
  '-1',
  '1e308',
  '-1e308',
  '1e-320',
  '.inf',
  '.nan',
  '0x1F',
  '0o17',
  'null',
  '~',
  'true',
  '""',
  '[]',
  '{}',
  '99999999999999999999',
  '2026-02-30',
  '24:00-24:00',
  '00:00-24:00',
  'rest',
  'removed',
  'all above',
  'kwh',
  'not',
  '((1))',
  '1/0',
  'daysSince(kwh)',
  'toString',
  '__proto__',
  'constructor',
  'hasOwnProperty',
  '&a 1',
  '*a',
  '!!js/function x',
  '!!binary aGk=',
  '<<: *a',
  '"\\u0000"',
  '\u0007',
  '\ufeff',
  '\u2028',
  'é',
  '𝄞',
  '|\n    x',
  '>-\n  y',
  '? x',
  '%TAG',
  '---',
  '...',
  '#',
  "'",
  '"',
  '`',
  '@',
  '{ a: ',
  '[',
  ']',
  '}',
  ': :',
  '- -',
  '\t',
];

/** One mutation of a text, by lines, words, numbers or marks. */
function mutate(text: string, next: (below: number) => number): string {
  const lines = text.split('\n');
  const at = next(lines.length);
  const other = next(lines.length);
  const odd = oddValues[next(oddValues.length)]!;
  switch (next(12)) {
    case 0:
      return lines.toSpliced(at, 1).join('\n');
    case 1:
      return lines.toSpliced(at, 0, lines[at]!).join('\n');
    case 2:
      return lines.toSpliced(at, 1).toSpliced(other, 0, lines[at]!).join('\n');
    case 3:
      return lines.with(at, lines[other]!).with(other, lines[at]!).join('\n');
    case 4:
      return lines.with(at, lines[at]!.replace(/:.*$/, `: ${odd}`)).join('\n');
    case 5:
      return lines.with(at, lines[at]!.replace(/-?\d+(\.\d+)?/, odd)).join('\n');
    case 6:
      return lines
        .with(
          at,
          lines[at]!.replace(/\d+(\.\d+)?/, () => String((next(2_000_001) - 1_000_000) / 10 ** next(7))),
        )
        .join('\n');
    case 7:
      return lines.with(at, lines[at]!.replace(/[a-z]\w*/, odd)).join('\n');
    case 8:
      return lines.with(at, ' '.repeat(next(6)) + lines[at]!.trimStart()).join('\n');
    case 9:
      return text.slice(0, next(text.length));
    case 10:
      return lines.with(at, lines[at]!.replace(/(\w+)([^\w]+)(\w+)/, '$3$2$1')).join('\n');
    default: {
      const place = next(text.length);
      return text.slice(0, place) + odd + text.slice(place);
    }
  }
}

describe('2,000 mutated schedules and more', () => {
  const perSeed = Math.ceil(2000 / seeds.length);
  const outcomes = new Map<Outcome, number>();

  it.each(seeds.map((text, i) => [/^schedule: (.*)$/m.exec(text)![1]!, text, i] as const))(
    '%s prices or is refused with place and words',
    (_, text, i) => {
      const next = random(20_260_710 + i);
      for (let run = 0; run < perSeed; run++) {
        let mutant = text;
        for (let times = next(3); times >= 0; times--) mutant = mutate(mutant, next);
        const begun = performance.now();
        const outcome = outcomeOf(mutant);
        outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1);
        expect(performance.now() - begun, mutant).toBeLessThan(20_000);
      }
    },
  );

  it('come to both ends often', () => {
    const priced = outcomes.get('priced') ?? 0;
    const notRead = outcomes.get('not read') ?? 0;
    expect(priced + notRead + (outcomes.get('not priced') ?? 0)).toBeGreaterThanOrEqual(2000);
    expect(Math.min(priced, notRead)).toBeGreaterThan(400);
  });
});
