import type { TableBlock } from './block';
import type { Grid } from './grid';
import { unitMeaning, type UnitMeaning } from './units';

/** A unit standing alone in a cell above the table, or behind "unit:". */
export function preambleUnit(grid: Grid, block: TableBlock): UnitMeaning | null {
  for (let row = 0; row < (block.headerRow ?? block.firstRow); row += 1) {
    for (let column = 0; column < Math.min(grid.width(row), 40); column += 1) {
      const text = grid.text(row, column).replace(/^(unit|units|einheit|unité|unita|unità|unidad)\s*[:=]\s*/i, '');
      const meaning = text.length < 8 ? unitMeaning(text) : null;
      if (meaning) return meaning;
    }
  }
  return null;
}

/** A meter's multiplier that the rows above the table speak of. */
export interface Multiplier {
  /** As printed. */
  words: string;
  /** The number, or the product of the ratios of the transformers; null if none can be read. */
  factor: number | null;
  /** The words say that the figures are not multiplied yet. */
  isUnapplied: boolean;
}

const multiplierWords =
  /multiplier|meter constant|\b[cvp]t[\s-]*ratio|(?<!leistungs)faktor|moltiplicatore|wandler|transformation|trasformazione|transformaci[oó]n|transforma[cç][aã]o|multiplicateur|multiplicador|vermenigvuldig/i;
const unappliedWords =
  /not (yet )?(been )?(applied|included|multiplied)|unapplied|to be (applied|multiplied)|secondary (values|readings|side)|nicht (berücksichtigt|eingerechnet|angewandt|multipliziert)|sekundärwerte|non appliqué|sin aplicar|no aplicad|non applicat|niet toegepast|n[ãa]o aplicad/i;

/** The multiplier mentioned above the table; null if none is. */
export function preambleMultiplier(grid: Grid, block: TableBlock): Multiplier | null {
  const rows = Array.from({ length: block.headerRow ?? block.firstRow }, (_, row) =>
    Array.from({ length: Math.min(grid.width(row), 12) }, (_unused, column) => grid.text(row, column))
      .filter((cell) => cell !== '')
      .join(' '),
  );
  const own = rows.filter((row) => multiplierWords.test(row));
  if (own.length === 0) return null;
  return {
    words: own.join('; ').slice(0, 200),
    factor: factorIn(own.join(' ')),
    isUnapplied: rows.some((row) => unappliedWords.test(row)),
  };
}

/** The number behind a word for the multiplier, else the product of ratios such as 200/5 and 11000:110. */
function factorIn(words: string): number | null {
  const named =
    /(?:multiplier|constant|faktor|moltiplicatore|multiplicateur|multiplicador)\D{0,20}?(\d+(?:[.,]\d+)?)(?!\s*[/:\d])/i.exec(
      words,
    );
  const plain = Number((named?.[1] ?? '').replace(',', '.'));
  if (plain > 0) return plain;
  const ratios = [...words.matchAll(/(\d+(?:\.\d+)?)\s*[/:]\s*(\d+(?:\.\d+)?)/g)];
  const product = ratios.reduce((sofar, [, over, under]) => (sofar * Number(over)) / Number(under), 1);
  return ratios.length > 0 && Number.isFinite(product) && product > 0 ? product : null;
}
