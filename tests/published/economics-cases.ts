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
