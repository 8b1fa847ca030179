/** Colours of a chart. In the browser they are the page's tokens; on the server literal values of one theme. */
export interface Palette {
  ground: string;
  ink: string;
  ink2: string;
  rule2: string;
  grid: string;
  copper: string;
  copperWash: string;
  verdigris: string;
  verdigrisWash: string;
  ochre: string;
  madder: string;
}

export type Tone = 'ink' | 'ink2' | 'copper' | 'verdigris' | 'ochre' | 'madder';

/** The page's own tokens: follows day and night by itself. */
export const pagePalette: Palette = {
  ground: 'var(--ground)',
  ink: 'var(--color-ink)',
  ink2: 'var(--color-ink-2)',
  rule2: 'var(--color-rule-2)',
  grid: 'var(--color-grid)',
  copper: 'var(--color-copper)',
  copperWash: 'var(--color-copper-wash)',
  verdigris: 'var(--color-verdigris)',
  verdigrisWash: 'var(--color-verdigris-wash)',
  ochre: 'var(--color-ochre)',
  madder: 'var(--color-madder)',
};

export const lightPalette: Palette = {
  ground: '#fffdf8',
  ink: '#1c2a30',
  ink2: '#4f5b60',
  rule2: '#857b6a',
  grid: '#ebe5d8',
  copper: '#a34e1f',
  copperWash: '#f7e9de',
  verdigris: '#1b6f63',
  verdigrisWash: '#e0efe9',
  ochre: '#8a6100',
  madder: '#9b2335',
};

export const darkPalette: Palette = {
  ground: '#1c2327',
  ink: '#e9e4d8',
  ink2: '#aeb4b1',
  rule2: '#7f8b8e',
  grid: '#283136',
  copper: '#e08a55',
  copperWash: '#3a2b22',
  verdigris: '#5bbfae',
  verdigrisWash: '#1d3835',
  ochre: '#e0b84c',
  madder: '#ee7a88',
};

/** For paper and PDF: the light set on white. */
export const printPalette: Palette = {
  ...lightPalette,
  ground: '#ffffff',
  ink: '#000000',
  ink2: '#333333',
  rule2: '#6f675a',
  grid: '#e4e4e4',
};

/** Palette by name, for jobs that carry plain JSON. */
export const palettes = { page: pagePalette, light: lightPalette, dark: darkPalette, print: printPalette };
export type PaletteName = keyof typeof palettes;
