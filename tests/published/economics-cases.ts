/** Worked examples of present value and rate of return, digits as printed; all from memory of the source named. */
export const npvCases = [
  {
    source: 'NumPy Financial 1.0, documentation of npv: 8 %, flows -40000, 5000, 8000, 12000, 30000',
    capitalCost: 40000,
    yearlySaving: [5000, 8000, 12000, 30000],
    discountRate: 0.08,
    expected: 3065.22267,
    tolerance: 0.000005,
  },
  {
    // The spreadsheet function puts the first flow at the end of year 1: its result is the present value over 1.1.
    source: 'Microsoft Excel, documentation of NPV: 10 %, flows -10000, 3000, 4200, 6800 give 1188.44 a year earlier',
    capitalCost: 10000,
    yearlySaving: [3000, 4200, 6800],
    discountRate: 0.1,
    expected: 1188.44 * 1.1,
    tolerance: 0.005 * 1.1,
  },
];

export const irrCases = [
  {
    source: 'NumPy Financial 1.0, documentation of irr',
    capitalCost: 100,
    yearlySaving: [39, 59, 55, 20],
    expected: 0.28095,
    tolerance: 0.000005,
  },
  {
    source: 'NumPy Financial 1.0, documentation of irr: a negative rate',
    capitalCost: 100,
    yearlySaving: [0, 0, 74],
    expected: -0.0955,
    tolerance: 0.00005,
  },
  {
    source: 'Microsoft Excel, documentation of IRR: five years',
    capitalCost: 70000,
    yearlySaving: [12000, 15000, 18000, 21000, 26000],
    expected: 0.087,
    tolerance: 0.0005,
  },
  {
    source: 'Microsoft Excel, documentation of IRR: four years',
    capitalCost: 70000,
    yearlySaving: [12000, 15000, 18000, 21000],
    expected: -0.021,
    tolerance: 0.0005,
  },
];

/** The oil pump of J. H. Lorie and L. J. Savage, "Three problems in rationing capital", J. Business, 1955: rates 25 % and 400 %. */
export const pumpCase = { flows: [-1600, 10000, -10000], rates: [0.25, 4] };

/** Worked examples of paybacks in textbooks, digits as printed. Years within half a unit of the last digit. */
export const paybackCases = [
  {
    source:
      'S. A. Ross, R. W. Westerfield and B. D. Jordan, Fundamentals of Corporate Finance, ch. 9, review problem 9.1, as quoted at transtutors.com/questions/9-1-in-the-following-table-1309389: 10 %',
    capitalCost: 200,
    yearlySaving: [50, 60, 70, 200],
    discountRate: 0.1,
    simpleYears: { expected: 3.1, tolerance: 0.005 },
    // Printed: between years 3 and 4. (200 - 147.63)/136.60 of the discounted flows it prints: 3.383.
    discountedYears: { expected: 3.383, tolerance: 0.0005 },
    npv: { expected: 84.23, tolerance: 0.05 },
  },
  {
    source:
      'CFA Institute, programme curriculum, level I, discounted payback, as quoted at gaodun.com/q/500s5h: 12 %, its table of discounted flows',
    capitalCost: 200_000,
    yearlySaving: [60_000, 80_000, 70_000, 60_000, 50_000],
    discountRate: 0.12,
    // 60,000 + 80,000 = 140,000 after 2 years, 60,000 of 70,000 in the third.
    simpleYears: { expected: 2 + 6 / 7, tolerance: 1e-9 },
    // Printed: -32,828.44 after 3 years, 38,131.08 in the fourth.
    discountedYears: { expected: 3 + 32_828.44 / 38_131.08, tolerance: 1e-6 },
    npv: { expected: 33_673.98, tolerance: 0.005 },
  },
];

/** Present values and rates of return printed for the same flows. */
export const npvAndIrrCases = [
  {
    source: 'CFA level I practice, avatto.com, quantitative methods, section 1, p. 2: 10 %',
    capitalCost: 750_000,
    yearlySaving: [200_000, 300_000, 400_000],
    discountRate: 0.1,
    npv: { expected: -19_722, tolerance: 0.5 },
    // Printed as 8.65 %, cut off rather than rounded: the polynomial's root by numpy 2.4 (numpy.roots) is this.
    irr: { expected: 0.0865525481, tolerance: 1e-9 },
  },
  {
    source: 'Textbook question on present value, sciemce.com/qa/ohyLACCGHLmO: 8 %, its rate of return given as 9.70 %',
    capitalCost: 100_000,
    yearlySaving: [40_000, 40_000, 40_000],
    discountRate: 0.08,
    npv: { expected: 3_083.88, tolerance: 0.005 },
    irr: { expected: 0.097, tolerance: 0.00005 },
  },
];

/** Escalating charges: [CAP] example 4.14, present worth of energy costs that rise by 25 % a year, at 4 % real or 30 % combined. */
export const escalationCase = {
  source: '[CAP] example 4.14, p. 158',
  firstYear: 31_250,
  growth: 0.25,
  discountRate: 0.3,
  yearly: [31_250, 39_063, 48_828],
  presentWorth: { expected: 69_377, tolerance: 0.5 },
};

/** After tax with straight-line depreciation. */
export const afterTaxCase = {
  source:
    'Exercise after W. G. Sullivan, E. M. Wicks and C. P. Koelling, Engineering Economy, ex. 7-21, worked at qammunity.org/6592220: 85,000, four years, 45 %, 15 %',
  capitalCost: 85_000,
  revenues: 60_000,
  expenses: 26_000,
  years: 4,
  taxRate: 0.45,
  discountRate: 0.15,
  tax: { expected: 5_738, tolerance: 0.5 },
  afterTaxFlow: { expected: 28_263, tolerance: 0.5 },
  // Printed as -85,000/2.8549 + 28,263 = 1510, the sign of the result lost: by its own figures -1510.
  annualWorth: { expected: -1_510, tolerance: 1 },
};
