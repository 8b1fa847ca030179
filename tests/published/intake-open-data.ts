/** Facts about a file of open data, worked out from it with a separate program. */
export interface OpenDataCase {
  source: string;
  given: { folder: string; file: string; timeZone: string };
  expected: {
    format: string;
    intervals: number;
    missing: number;
    stepMinutes: number;
    /** Beginnings of the first and last interval. */
    first: string;
    last: string;
    totalKwh: number;
    totalKvarhLagging: number;
    totalKvarhLeading: number;
    maxKw: number;
    /** Beginning of the interval of the highest power, where the source names it. */
    peak?: string;
    estimated?: number;
  };
  /** Half a unit of the last digit printed in the facts: energy, then power. */
  tolerance: { energy: number; power: number };
}

export const openDataCases: OpenDataCase[] = [
  {
    source:
      'Steel Industry Energy Consumption, UCI Machine Learning Repository, dataset 851 (V E Sathishkumar, C Shin, Y Cho), CC BY 4.0',
    given: { folder: 'steel-plant', file: 'steel-plant-2018.csv', timeZone: 'Asia/Seoul' },
    expected: {
      format: 'delimited',
      intervals: 35_040,
      missing: 0,
      stepMinutes: 15,
      first: '2017-12-31T15:00:00.000Z',
      last: '2018-12-31T14:45:00.000Z',
      totalKwh: 959_636.71,
      totalKvarhLagging: 456_759.84,
      totalKvarhLeading: 135_638.04,
      maxKw: 628.72,
      peak: '2018-11-22T00:30:00.000Z',
    },
    tolerance: { energy: 0.005, power: 0.005 },
  },
  {
    source: 'patrickvorgers, sample files of energy exports, MIT: a day a row, 96 columns, decimal comma',
    given: { folder: 'intervals', file: 'it_wide_96cols_decimal_comma.csv', timeZone: 'Europe/Rome' },
    expected: {
      format: 'delimited',
      intervals: 2880,
      missing: 0,
      stepMinutes: 15,
      first: '2024-08-31T22:00:00.000Z',
      last: '2024-09-30T21:45:00.000Z',
      totalKwh: 269.281,
      totalKvarhLagging: Number.NaN,
      totalKvarhLeading: Number.NaN,
      maxKw: 2.396,
    },
    tolerance: { energy: 0.0005, power: 0.0005 },
  },
  {
    source: 'jnghf/guiEDF, MIT: two header blocks, average watts, ISO stamps with offset that name the end',
    given: { folder: 'intervals', file: 'fr_two_headers_watts_isooffset.csv', timeZone: 'Europe/Paris' },
    expected: {
      format: 'delimited',
      intervals: 16_848,
      missing: 0,
      stepMinutes: 30,
      first: '2023-08-08T22:00:00.000Z',
      last: '2024-07-24T21:30:00.000Z',
      totalKwh: 5830.467,
      totalKvarhLagging: Number.NaN,
      totalKvarhLeading: Number.NaN,
      maxKw: 6.048,
    },
    tolerance: { energy: 0.0005, power: 0.0005 },
  },
  {
    source:
      'GreenButtonAlliance/OpenESPI-Common-java, src/test/resources/fixtures/test_usage_data.xml, Apache-2.0: ESPI, Wh, a 23-hour day',
    given: { folder: 'intervals', file: 'gba_15min_14days_dstday.xml', timeZone: 'America/New_York' },
    expected: {
      format: 'espi',
      intervals: 1340,
      missing: 0,
      stepMinutes: 15,
      first: '2012-03-01T05:00:00.000Z',
      last: '2012-03-15T03:45:00.000Z',
      totalKwh: 1391.666,
      totalKvarhLagging: Number.NaN,
      totalKvarhLeading: Number.NaN,
      maxKw: 6.64,
      estimated: 2,
    },
    tolerance: { energy: 0.0005, power: 0.0005 },
  },
  {
    source: 'aguinane/nem-reader, examples/nem12, MIT: NEM12 in a ZIP, E1, B1 in kWh and Q1, K1 in kvarh',
    given: { folder: 'intervals', file: 'zip_e1b1q1k1_30min.zip', timeZone: 'Australia/Sydney' },
    expected: {
      format: 'nem12',
      intervals: 192,
      missing: 0,
      stepMinutes: 30,
      first: '2005-02-28T14:00:00.000Z',
      last: '2005-03-04T13:30:00.000Z',
      totalKwh: 135.359,
      // Sums of the 300 records of Q1 and K1, added with a separate program (awk).
      totalKvarhLagging: 135.359,
      totalKvarhLeading: 128.256,
      maxKw: 3.554,
    },
    tolerance: { energy: 0.0005, power: 0.0005 },
  },
];
