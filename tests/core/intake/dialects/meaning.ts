import { wholeOf, type Carried, type Dialect } from './dialect';
import type { Series, TrueReading } from './series';
import { atBegin, channelNames, long, plainTable } from './write';

const step = { stepMinutes: 15 } as const;
const zoneOfKw = 4;

const inUnits = (name: string, names: string[], scale: (figure: number) => string): Dialect => ({
  ...step,
  name,
  write: (series) =>
    long(series, {
      header: ['Time', ...names],
      stamp: atBegin,
      figures: (one) => [one.kwh, one.lagging, one.leading].map(scale),
    }),
});

/** A decimal figure moved by a power of ten in its text, never in binary. */
function shifted(figure: number, places: number): string {
  const [whole = '', decimals = ''] = String(figure).split('.');
  const digits = (whole + decimals).padStart(places + 1 + decimals.length, '0');
  const mark = digits.length - decimals.length - places;
  return `${digits.slice(0, mark)}.${digits.slice(mark)}`;
}

/** Names of stamp and channels in the languages files come in. */
const languages: [language: string, names: string[]][] = [
  [
    'English',
    ['Interval start', 'Active energy (kWh)', 'Reactive energy lagging (kvarh)', 'Reactive energy leading (kvarh)'],
  ],
  ['German', ['Zeitstempel von', 'Wirkarbeit [kWh]', 'Blindarbeit induktiv [kvarh]', 'Blindarbeit kapazitiv [kvarh]']],
  [
    'French',
    [
      'Horodate début',
      'Énergie active (kWh)',
      'Énergie réactive inductive (kvarh)',
      'Énergie réactive capacitive (kvarh)',
    ],
  ],
  [
    'Spanish',
    [
      'Fecha y hora',
      'Energía activa (kWh)',
      'Energía reactiva inductiva (kVArh)',
      'Energía reactiva capacitiva (kVArh)',
    ],
  ],
  [
    'Italian',
    ['Data e ora', 'Energia attiva (kWh)', 'Energia reattiva induttiva (kvarh)', 'Energia reattiva capacitiva (kvarh)'],
  ],
  [
    'Portuguese',
    ['Data e hora', 'Energia ativa (kWh)', 'Energia reativa indutiva (kvarh)', 'Energia reativa capacitiva (kvarh)'],
  ],
  [
    'Dutch',
    [
      'Datum en tijd',
      'Afname actieve energie (kWh)',
      'Blindenergie inductief (kvarh)',
      'Blindenergie capacitief (kvarh)',
    ],
  ],
  ['German without units', ['Zeit', 'Wirkarbeit', 'Blindarbeit induktiv', 'Blindarbeit kapazitiv']],
  ['French without units', ['Date et heure', 'Consommation active', 'Réactif inductif', 'Réactif capacitif']],
  ['Spanish without units', ['Fecha', 'Consumo activa', 'Reactiva inductiva', 'Reactiva capacitiva']],
  ['Italian without units', ['Data', 'Prelievo attiva', 'Reattiva induttiva', 'Reattiva capacitiva']],
  ['Portuguese without units', ['Data', 'Consumo ativa', 'Reativa indutiva', 'Reativa capacitiva']],
  ['Dutch without units', ['Datum', 'Verbruik', 'Blind inductief', 'Blind capacitief']],
];

/** Readings of counters at the beginning of every interval and at the end of the last; blank within a gap. */
function counters(series: Series, from: { digits: number; start: number; multiplier: number }): string[][] {
  const sums = [from.start, from.start / 2, 10];
  const { readings } = series;
  return [...readings, null].map((one, at) => {
    const cells = sums.map((sum) => String(sum % 10 ** from.digits));
    const isLost = one?.grade === 'missing' && readings[at - 1]?.grade === 'missing';
    if (one)
      [one.kwh, one.lagging, one.leading].forEach(
        (figure, index) => (sums[index] = (sums[index] ?? 0) + figure / from.multiplier),
      );
    return isLost ? ['', '', ''] : cells;
  });
}

const counterTable =
  (
    from: { digits: number; start: number; multiplier: number },
    names: string[],
    preamble: string[] = [],
  ): Dialect['write'] =>
  (series) => {
    const last = series.readings.at(-1);
    const stamps = [...series.readings.map(({ begin }) => begin), ...(last ? [last.end] : [])].map(
      ({ date, time }) => `${date} ${time}`,
    );
    const rows = counters(series, from).map((cells, at) => [stamps[at], ...cells].join(','));
    return [...preamble, ['Time', ...names].join(','), ...rows].join('\n');
  };

/** Net reactive energy as one figure: lagging above nought, leading below. */
const signed = ({ lagging, leading }: TrueReading): number => lagging - leading;
const kvahOf = (one: TrueReading): number => Math.hypot(one.kwh, one.lagging - one.leading);
const factorOf = (one: TrueReading, digits: number): string => (one.kwh / kvahOf(one)).toFixed(digits);
const isLead = (one: TrueReading): boolean => one.leading > 0;
const derived = {
  fraction: 1e-5,
  why: 'a power factor of seven decimals: d(tan acos pf) = dpf / (pf^2 sqrt(1 - pf^2)), at most 5e-8 * 8 of the kWh here; the figure gives it room',
};
const factorTable = (name: string, header: string[], cells: (reading: TrueReading) => string[]): Dialect => ({
  ...step,
  name,
  tolerance: derived,
  notes: ['reactive-derived'],
  write: (series) =>
    long(series, {
      header: ['Time', 'Energy kWh', ...header],
      stamp: atBegin,
      figures: (one) => [String(one.kwh), ...cells(one)],
    }),
});

/** Reactive energy whose sense the text does not tell is taken as lagging. */
const allLagging = (series: Series): Carried => {
  const readings = series.readings.map((one) => ({ ...one, lagging: one.lagging + one.leading, leading: 0 }));
  return wholeOf({ ...series, readings }, { lacksLeading: true });
};

/** What figures measure and in which unit. */
export const meaningDialects: Dialect[] = [
  ...languages.map(([language, names]): Dialect => ({
    ...step,
    name: `names in ${language}`,
    write: (series) => long(series, { delimiter: ';', header: names, stamp: atBegin }),
  })),
  inUnits('Wh and varh', ['Energy Wh', 'Lagging varh', 'Leading varh'], (figure) => String(figure * 1000)),
  inUnits('MWh and Mvarh', ['Energy MWh', 'Lagging Mvarh', 'Leading Mvarh'], (figure) => shifted(figure, 3)),
  inUnits('average kW and kvar', ['Power kW', 'Lagging kvar', 'Leading kvar'], (figure) => String(figure * zoneOfKw)),
  inUnits('average W and var', ['Power W', 'Lagging var', 'Leading var'], (figure) => String(figure * zoneOfKw * 1000)),
  {
    ...step,
    name: 'one signed kvarh column',
    notes: ['reactive-signed'],
    write: (series) =>
      long(series, {
        header: ['Time', 'kWh', 'kvarh'],
        stamp: atBegin,
        figures: (one) => [one.kwh, signed(one)].map(String),
      }),
  },
  {
    ...step,
    name: 'signed kvar beside kW',
    notes: ['reactive-signed'],
    write: (series) =>
      long(series, {
        header: ['Time', 'P (kW)', 'Q (kvar)'],
        stamp: atBegin,
        figures: (one) => [one.kwh * 4, signed(one) * 4].map(String),
      }),
  },
  {
    ...step,
    name: 'import and export apart',
    notes: ['export-left-out'],
    write: (series) =>
      long(series, {
        header: ['Time', 'kWh import', 'kWh export', ...channelNames.slice(1)],
        stamp: atBegin,
        figures: (one) => [one.kwh, 0, one.lagging, one.leading].map(String),
      }),
  },
  {
    ...step,
    name: 'energy alone',
    lacksLeading: true,
    lacksLagging: true,
    notes: ['channel-absent'],
    write: (series) =>
      long(series, { header: ['Time', 'Energy kWh'], stamp: atBegin, figures: (one) => [String(one.kwh)] }),
  },
  {
    ...step,
    name: 'kVAh beside kWh',
    carried: allLagging,
    tolerance: {
      fraction: 1e-9,
      why: 'kVAh as printed by a double: the root of a difference of squares loses a few digits',
    },
    notes: ['reactive-derived'],
    write: (series) =>
      long(series, {
        header: ['Time', 'kWh', 'kVAh'],
        stamp: atBegin,
        figures: (one) => [one.kwh, kvahOf(one)].map(String),
      }),
  },
  {
    ...factorTable('power factor without a sense', ['Power factor'], (one) => [factorOf(one, 7)]),
    carried: allLagging,
  },
  factorTable('power factor with a column of its sense', ['Power factor', 'Lag/Lead'], (one) => [
    factorOf(one, 7),
    isLead(one) ? 'Lead' : 'Lag',
  ]),
  factorTable('power factor with a German column of its sense', ['Leistungsfaktor', 'ind/kap'], (one) => [
    factorOf(one, 7),
    isLead(one) ? 'kap' : 'ind',
  ]),
  factorTable('power factor with its sense behind', ['PF'], (one) => [
    `${factorOf(one, 7)} ${isLead(one) ? 'lead' : 'lag'}`,
  ]),
  factorTable('power factor with a letter behind', ['cos phi'], (one) => [
    `${factorOf(one, 7)}${isLead(one) ? 'c' : 'i'}`,
  ]),
  factorTable('power factor, negative where leading', ['PF'], (one) => [
    `${isLead(one) ? '-' : ''}${factorOf(one, 7)}`,
  ]),
  factorTable('power factor in per cent with its sense', ['PF %', 'Sense'], (one) => [
    (Number(factorOf(one, 9)) * 100).toFixed(6),
    isLead(one) ? 'leading' : 'lagging',
  ]),
  factorTable('kVAh with a power factor that tells its sense', ['kVAh', 'PF', 'Lag/Lead'], (one) => [
    String(kvahOf(one)),
    factorOf(one, 7),
    isLead(one) ? 'Lead' : 'Lag',
  ]),
  {
    ...step,
    name: 'registers',
    notes: ['register-differences'],
    write: counterTable({ digits: 9, start: 48_000, multiplier: 1 }, [
      'Register kWh',
      'Register lagging kvarh',
      'Register leading kvarh',
    ]),
  },
  {
    ...step,
    name: 'registers of nine digits that roll over',
    notes: ['register-falls'],
    write: counterTable({ digits: 9, start: 999_900_000, multiplier: 1 }, [
      'Register kWh',
      'Register lagging kvarh',
      'Register leading kvarh',
    ]),
  },
  {
    ...step,
    name: 'registers of seven digits behind transformers of 16',
    notes: ['register-falls'],
    write: counterTable(
      { digits: 7, start: 9_990_000, multiplier: 16 },
      ['Register kWh', 'Register lagging kvarh', 'Register leading kvarh'],
      ['Meter multiplier: 16 (not applied)', ''],
    ),
  },
  {
    ...step,
    name: 'energies before the ratio of the transformers, not applied',
    write: (series) =>
      plainTable(series, {
        preamble: ['CT ratio 80/5;VT ratio 1/1;multiplier not applied', ''],
        delimiter: ';',
        figures: (one) => [one.kwh, one.lagging, one.leading].map((figure) => String(figure / 16)),
      }),
  },
];
