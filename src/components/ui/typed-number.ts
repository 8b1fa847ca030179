const grouped = /^-?\d{1,3}(,\d{3})+(\.\d*)?$/;
const plain = /^-?(\d+\.?\d*|\.\d+)$/;

/**
 * A number as people type it: grouping commas or blanks, a point for decimals, a true minus. Empty is absent; anything
 * else is NaN, a decimal comma among it: whether "1,5" means 1.5 or 15 is not guessed.
 *
 * @example typedNumber('1,334.5') // => 1334.5
 */
export function typedNumber(text: string): number | undefined {
  const bare = text.replace(/[\s\u00a0\u202f']/g, '').replace(/^\u2212/, '-');
  if (bare === '') return undefined;
  if (grouped.test(bare)) return Number(bare.replaceAll(',', ''));
  return plain.test(bare) ? Number(bare) : NaN;
}
