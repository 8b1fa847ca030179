import { buildSeries, type Powers } from '../core/tariff/build';
import { figure, ownInputs, type FormCase } from './form-case';

const period = { from: '2026-01-14', to: '2026-01-15' };
const none: Powers = [0, 0, 0];

/** One Wednesday, the powers given by hour of the local clock. */
function oneDay(timeZone: string, stepMinutes: number, powers: (hour: number) => Powers) {
  return buildSeries({ ...period, timeZone, stepMinutes, powers: (local) => powers(local.getUTCHours()) });
}

/** Rules settled within the period, from intervals. */
export const intervalCases: FormCase[] = [
  {
    // 60 - 50 = 10; 45 < 50; 8 capacitive: 18 kvarh x 150 x M 3 = 8,100. M is the number of months in a row: two months before this one.
    id: 'CO-hourly-M3',
    form: 'hourly-excess-escalating',
    source: `EPM, Energia reactiva (CREG 015/2018, 199/2019): inductive above 50 % of the hour's kWh plus all capacitive, times M; price ours. ${ownInputs}`,
    period,
    load: oneDay('America/Bogota', 60, (hour) => {
      if (hour === 9) return [100, 60, 0];
      return hour === 10 ? [100, 45, 0] : hour === 22 ? [10, 0, 8] : none;
    }),
    options: { history: { excessKvarh: [0, 7, 4] } },
    figures: [
      figure('over', 10),
      figure('capacitive', 8),
      figure('excessKvarh', 18, 'kvarh'),
      figure('run', 3),
      figure('reactive', 8100, 'charge'),
      figure('reactiveCost', 8100),
    ],
    within: 1e-6,
  },
  {
    // 14 hours of the day: ten with 1,000 kW and 600 kvar, four idle; 50 kvar delivered in the ten hours of vazio. 10,000 kWh, 6,000 kvarh:
    // 1,000 x 0.33 + 1,000 + 1,000 x 3 = 4,330 kvarh x 0.025 = 108.25; 500 x 0.019 = 9.50.
    id: 'PT-MV-day',
    form: 'kvarh-daily-bands',
    source: `Tarifa MT 2019 and reactive FAQ, EDP Servico Universal (ERSE Despachos 7253/2010, 10/2010): factors 0.33 / 1 / 3 by day outside vazio, every capacitive kvarh inside; marginal bands and both prices from memory. ${ownInputs}`,
    period,
    load: oneDay('Europe/Lisbon', 15, (hour) => {
      if (hour >= 22 || hour < 8) return [0, 0, 50];
      return hour < 18 ? [1000, 600, 0] : none;
    }),
    figures: [
      figure('band1', 1000, 'bands_kvarh.0'),
      figure('band2', 1000, 'bands_kvarh.1'),
      figure('band3', 1000, 'bands_kvarh.2'),
      figure('weighted', 4330, 'weighted'),
      figure('inductive', 108.25, 'inductive'),
      figure('capacitive', 9.5, 'capacitive'),
    ],
    within: 1e-6,
  },
  {
    // 36.448 + 0 + 6.342 kWh (from fT 0.857493, 0.960824, 0.83205) x 0.30 = 12.84.
    id: 'BR-ERE-three-hours',
    form: 'hourly-rescaled-to-reference',
    source: `Energia reativa, EDP Escelsa (REN 414/2010): sum of kWh x (0.92 / fT - 1) over hours, lagging 06-24 h, leading 00-06 h; price ours. ${ownInputs}`,
    period,
    load: oneDay('America/Sao_Paulo', 60, (hour) => {
      if (hour === 3) return [60, 0, 40];
      return hour === 10 ? [500, 300, 0] : hour === 11 ? [520, 150, 0] : none;
    }),
    figures: [
      figure('lagKwh', 36.448, 'ere_kwh.0', 0.0005),
      figure('leadKwh', 6.342, 'ere_kwh.2', 0.0005),
      figure('excess', 12.84, 'ERE'),
      figure('reactiveCost', 12.84),
    ],
    within: 1e-6,
    inside: {
      fT: { values: [0.857493, 0.960824, 0.83205], why: "the hours' power factors stand inside the sums" },
      'ere_kwh.1': { values: [0], why: 'the second hour adds nothing to lagKwh, which is the first hour alone' },
    },
  },
];
