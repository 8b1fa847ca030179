/** A part of the guide: what it teaches, and a schedule that shows it with a bill worked by hand. */
export interface Lesson {
  id: string;
  title: string;
  words: string[];
  text: string;
}

const head = (id: string, more = '') => `schedule: ${id}
currency: EUR
timeZone: Europe/Lisbon
inForce: 2026-01-01
source: { publisher: Millrace Power, title: Sheet 1, date: 2026-01-01, status: invented }
${more}`;

const july = `    from: 2026-07-01
    to: 2026-08-01`;

/** The lessons in order. Every amount a text asks for is worked by hand; the steps stand in its comments. */
export const lessons: readonly Lesson[] = [
  {
    id: 'smallest',
    title: 'The smallest schedule',
    words: [
      'A schedule reads from top to bottom, like the bill: first the head, then quantities (what is measured or worked out), then charges (the lines of the bill). A name is used only below where it is made.',
      'The last part, examples, holds bills that must come out to the cent. Change a rate: the bill no longer comes out, and the text would not be kept.',
    ],
    text: `${head('smallest')}
quantities:
  kwh: { sum: kwh }

charges:
  service: { amount: 120.00, group: fixed }
  energy: { per: kwh, rate: 0.0950, group: energy }

examples:
  - title: July 2026 # 400,000 x 0.0950 = 38,000.00
${july}
    quantities: { kwh: 400000 }
    expect: { service: 120.00, energy: 38000.00, total: 38120.00 }
`,
  },
  {
    id: 'windows',
    title: 'Seasons and hours of use',
    words: [
      'Seasons say both ends and together fill the year; rest is what the others leave. Windows are hours of use: weekdays leave holidays out, 22:00-06:00 runs over midnight, rest is all time outside the windows named.',
      'inEach makes one quantity per window: kwhPeak, kwhDay, kwhNight. A charge per such a family makes one line each; its rate is given by window, by season, or both.',
    ],
    text: `${head('windows', 'holidays: { calendar: PT }\nstraddle: intervals\n')}
seasons: { summer: 05-01 to 10-31, winter: rest }

windows:
  peak: { days: weekdays, hours: 10:00-20:00 }
  night: { days: every day, hours: 22:00-06:00 }
  day: { rest: [peak, night] }

quantities:
  kwh: { sum: kwh, inEach: [peak, day, night] }

charges:
  energy:
    per: kwh
    rate:
      peak: { summer: 0.1500, winter: 0.1300 }
      day: 0.1000
      night: 0.0700
    group: energy

examples:
  - title: July 2026 # 200,000 x 0.15 + 150,000 x 0.10 + 250,000 x 0.07
${july}
    quantities: { kwhPeak: 200000, kwhDay: 150000, kwhNight: 250000 }
    expect: { energyPeak: 30000.00, energyDay: 15000.00, energyNight: 17500.00, total: 62500.00 }
`,
  },
  {
    id: 'share',
    title: 'Reactive energy beyond a share of the active',
    words: [
      'excess(a; b) is what a exceeds b by, and never below nought. Values of a function stand apart by a semicolon. Numbers that a sheet may change have names under rates.',
      'Counterlag prices every bill again at unity power factor: the difference is what reactive demand costs. Ask for it as reactiveCost.',
    ],
    text: `${head('share')}
rates:
  allowance: 0.40 # kvarh free per kWh

quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  excessKvarh: { formula: excess(kvarh; allowance * kwh), unit: kvarh }

charges:
  energy: { per: kwh, rate: 0.0900, group: energy }
  reactive: { per: excessKvarh, rate: 0.0180, group: reactive }

examples:
  - title: July 2026 # 320,000 less 0.40 x 500,000 = 120,000 kvarh x 0.0180
${july}
    quantities: { kwh: 500000, kvarh: 320000 }
    expect: { energy: 45000.00, reactive: 2160.00, total: 47160.00, reactiveCost: 2160.00 }
`,
  },
  {
    id: 'ratchet',
    title: 'Demand in kVA, and a ratchet',
    words: [
      'highest takes the highest mean of the demand window, with its instant. past looks back over the bills before; history tells the ones no bill of the year shows.',
      'A line in kVA carries reactive demand without a word of it. Here the ratchet still stands on an earlier month: at unity the bill would fall by 20 kVA only.',
    ],
    text: `${head('ratchet', 'demandWindow: 15 min\n')}
contract:
  contractKva: { unit: kVA, default: 3000, range: [100, 50000], label: Contract power }

quantities:
  maxKw: { highest: kw }
  maxKva: { highest: kva }
  yearKva: { past: maxKva, take: highest, over: last 11 periods }
  billedKva: { formula: max(maxKva; 0.80 * yearKva; 0.50 * contractKva), unit: kVA }

charges:
  demand: { per: billedKva, rate: 11.50, group: demand }

examples:
  - title: July 2026, 2,600 kVA in June # the highest of 2,100, 2,080 and 1,500; at unity of 1,700, 2,080 and 1,500
${july}
    history: { maxKva: [2600] }
    quantities: { maxKw: 1700, maxKva: 2100 }
    expect: { billedKva: 2100, demand: 24150.00, reactiveCost: 230.00 }
`,
  },
  {
    id: 'points',
    title: 'A surcharge by points of power factor',
    words: [
      'percentOf takes a percentage of lines above; per multiplies it, here by the points below 0.90. Tiers apply one after the other: 1 % for each of the first five points, 2 % for each further one.',
      'round belongs to a named quantity, so that every rounding is seen and explained. zeroKwh says what the power factor is where no energy was used: the schedule must say it.',
    ],
    text: `${head('points', 'zeroKwh: { pf: 1 }\n')}
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  maxKw: { highest: kw, each: interval }
  pf: { formula: pf(kwh; kvarh), round: 0.01 }
  pointsBelow: { formula: 100 * excess(0.90; pf), unit: points }

charges:
  energy: { per: kwh, rate: 0.0800, group: energy }
  demand: { per: maxKw, rate: 10.00, group: demand }
  surcharge:
    percentOf: [energy, demand]
    per: pointsBelow
    tiers:
      - { to: 5, rate: 1 }
      - { rate: 2 }
    group: reactive

examples:
  - title: July 2026 # pf 800 / hypot(800, 600) = 0.80: ten points, 5 x 1 % + 5 x 2 % = 15 % of 84,000.00
${july}
    quantities: { kwh: 800000, kvarh: 600000, maxKw: 2000 }
    expect: { pf: 0.80, energy: 64000.00, demand: 20000.00, surcharge: 12600.00, total: 96600.00, reactiveCost: 12600.00 }
`,
  },
  {
    id: 'hourly',
    title: 'Hour by hour, without netting',
    words: [
      'each says over what a measure is settled. Inside an hour lagging and leading may net; one hour never pays for another. An over-excited motor at night is charged by such lines: price them before a field is raised.',
      'readings give an example a stretch of meter readings instead of printed figures.',
    ],
    text: `${head('hourly')}
windows:
  night: { days: every day, hours: 22:00-06:00 }

quantities:
  kwh: { sum: kwh }
  leadNight: { sum: excess(kvarhLeading; 0.20 * kwh), each: hour, in: night }

charges:
  energy: { per: kwh, rate: 0.0800, group: energy }
  leading: { per: leadNight, rate: 0.0120, group: reactive }

examples:
  - title: Three hours of a night # 50 less 20 = 30; 15 is within 20; 0. 30 x 0.0120
    from: 2026-07-14
    to: 2026-07-15
    readings:
      begin: 2026-07-14 21:00
      step: 60 min
      kwh: [100, 100, 120]
      kvarhLagging: [10, 0, 0]
      kvarhLeading: [0, 50, 15]
    expect: { leadNight: 30, energy: 25.60, leading: 0.36, total: 25.96, reactiveCost: 0.36 }
`,
  },
  {
    id: 'minimum',
    title: 'Minimum, cap and tax',
    words: [
      'topUp raises lines above to an amount, cap lowers them, percentOf: all above is a tax on everything printed so far: order decides what is taxed. when makes a line depend on a condition; it stays on the bill with nought and says why.',
    ],
    text: `${head('minimum')}
quantities:
  kwh: { sum: kwh }

charges:
  service: { amount: 100.00, group: fixed }
  energy: { per: kwh, rate: 0.0900, group: energy }
  minimum: { topUp: [service, energy], to: 1500.00, group: adjustment }
  credit: { percentOf: [energy], rate: -2, when: kwh > 100000, group: adjustment }
  tax: { percentOf: all above, rate: 20, group: tax }

examples:
  - title: A small month # 100 + 900 raised by 500; no credit; 20 % of 1,500.00
${july}
    quantities: { kwh: 10000 }
    expect: { minimum: 500.00, credit: 0, tax: 300.00, total: 1800.00 }
  - title: A large month # 100 + 18,000; credit 360; 20 % of 17,740.00
${july}
    quantities: { kwh: 200000 }
    expect: { minimum: 0, credit: -360.00, tax: 3548.00, total: 21288.00 }
`,
  },
  {
    id: 'versions',
    title: 'A new sheet, in the middle of a bill',
    words: [
      'A version says only what changes, from its day on. What it adds must say before which line it stands. straddle decides how a bill across two texts is shared: by days, by the readings in each part, or by the text of its first or last day.',
    ],
    text: `${head('versions', 'straddle: days\n')}
quantities:
  kwh: { sum: kwh }

charges:
  service: { amount: 100.00, group: fixed }
  energy: { per: kwh, rate: 0.1000, group: energy }

versions:
  2026-07-01:
    note: Sheet 2
    charges:
      energy: { rate: 0.1200 }
      levy: { per: kwh, rate: 0.0020, group: tax, before: end }

examples:
  - title: 16 June to 15 July # 15 of 30 days each: 300,000 x 0.10 / 2 + 300,000 x 0.12 / 2; levy 600 / 2
    from: 2026-06-16
    to: 2026-07-16
    quantities: { kwh: 300000 }
    expect: { service: 100.00, energy: 33000.00, levy: 300.00, total: 33400.00 }
`,
  },
];

/** A text with a slip in it, to see how errors read. */
export const slippedText = `${head('slips')}
quantities:
  kwh: { sum: kwh }
  kvarh: { sum: kvarhLagging }
  excessKvarh: { formula: excess(kvahr; 0.40 * kwh), unit: kvarh }

charges:
  energy: { per: kwh, rate: 0,09, group: energy }
  reactive: { per: excessKvarh, rate: 0.0180, gruop: reactive }
`;
