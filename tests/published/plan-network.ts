/**
 * Published worked examples of plants with synchronous motors and capacitors. Loads in kW and kvar absorbed; digits as printed.
 * "Companion notebook": read in FOSSEE, Python Textbook Companions.
 */
const lagging = (kw: number, powerFactor: number) => ({ kw, kvar: kw * Math.tan(Math.acos(powerFactor)) });
const leading = (kw: number, powerFactor: number) => ({ kw, kvar: -kw * Math.tan(Math.acos(powerFactor)) });

export const plantCases = [
  {
    source: 'I. L. Kosow, Electric Machinery and Transformers, ex. 8-7, p. 244, companion notebook: induction motor',
    loads: [lagging(2000, 0.6), lagging((1000 * 0.746) / 0.92, 0.8)],
    expected: { powerFactor: 0.6513, currentA: { volts: 6000, printed: 415.3 } },
    tolerance: { powerFactor: 0.00005, currentA: 0.05 },
  },
  {
    source:
      'Kosow, ex. 8-7, p. 244: synchronous motor at 0.8 leading (the source prints the power factor to one digit, 0.807 in its text)',
    loads: [lagging(2000, 0.6), leading((1000 * 0.746) / 0.92, 0.8)],
    expected: { powerFactor: 0.807, currentA: { volts: 6000, printed: 335.3 } },
    tolerance: { powerFactor: 0.0005, currentA: 0.06 },
  },
  {
    source:
      'S. J. Chapman, Electric Machinery Fundamentals, plant example, from memory: synchronous motor at 0.85 lagging',
    loads: [lagging(100, 0.78), lagging(200, 0.8), lagging(150, 0.85)],
    expected: { kvar: 323.2, powerFactor: 0.812 },
    tolerance: { kvar: 0.05, powerFactor: 0.0005 },
  },
  {
    source:
      'S. J. Chapman, the same plant, from memory: synchronous motor at 0.85 leading (the source rounds on the way: 0.1)',
    loads: [lagging(100, 0.78), lagging(200, 0.8), leading(150, 0.85)],
    expected: { kvar: 137.2, powerFactor: 0.957 },
    tolerance: { kvar: 0.1, powerFactor: 0.0006 },
  },
  {
    source:
      'G. McPherson, An Introduction to Electrical Machines and Transformers, ex. 2-5, p. 23, companion notebook (kvar rounded on the way: 1)',
    loads: [lagging(5000, 0.8), { kw: -388.54, kvar: -188.18 }, leading(388.54, 0.8)],
    expected: { kvar: 3271, powerFactor: 0.837 },
    tolerance: { kvar: 1, powerFactor: 0.0005 },
  },
  {
    source:
      'Peerless Pump, Technical Information Bulletin 21: 600 kW at 0.7 with a motor at 0.8 leading (read from a graph: 1.2 %)',
    loads: [lagging(600, 0.7), leading(203, 0.8)],
    expected: { kvar: 455, powerFactor: 0.868 },
    tolerance: { kvar: 455 * 0.012, powerFactor: 0.0005 },
  },
  {
    source:
      'B. S. Guru and H. R. Hiziroglu, Electric Machinery and Transformers, ex. 8.7, p. 499, companion notebook (pf printed cut: 0.006)',
    loads: [lagging(60, 0.6), leading(10, 0.5)],
    expected: { powerFactor: 0.74 },
    tolerance: { powerFactor: 0.006 },
  },
];

/** kvar a synchronous motor must deliver so that the plant reaches a power factor, motor kW counted; its kVA as printed. */
export const motorKvarCases = [
  {
    source: 'U. A. and M. V. Bakshi, DC Machines and Synchronous Machines, ex. 7.5, p. 44, companion notebook',
    loads: [lagging(800, 0.6)],
    motorKw: 200 / 0.91,
    toPowerFactor: 0.92,
    expected: { kva: 669.353, powerFactor: 0.3283 },
    tolerance: { kva: 0.01, powerFactor: 0.0001 },
  },
  {
    source: 'V. K. and R. Mehta, Principles of Power System, ex. 6.9, p. 113, companion notebook',
    loads: [lagging(200, 0.8)],
    motorKw: 80,
    toPowerFactor: 0.9,
    expected: { kva: 81.28, powerFactor: 0.984 },
    tolerance: { kva: 0.005, powerFactor: 0.0005 },
  },
  {
    source: 'Bakshi, ex. 7.22, p. 71, companion notebook: 18 A, 440 V, 0.8 lagging brought to unity',
    loads: [lagging((Math.sqrt(3) * 440 * 18 * 0.8) / 1000, 0.8)],
    motorKw: 6 / 0.88,
    toPowerFactor: 1,
    expected: { kva: 10.688, powerFactor: 0.6379 },
    tolerance: { kva: 0.0005, powerFactor: 0.00005 },
  },
  {
    source:
      'Mehta, ex. 6.11, p. 114, companion notebook: five loads brought to unity (the source rounds on the way: 0.002)',
    loads: [lagging(500, 1), lagging(400, 0.707), leading(800, 0.8), lagging(500, 0.6)],
    motorKw: 540 / 0.9,
    toPowerFactor: 1,
    expected: { powerFactor: 0.79 },
    tolerance: { powerFactor: 0.002 },
  },
  {
    source: 'Bakshi, ex. 7.26, p. 75, companion notebook: a condenser for 1800 kW, 0.6 to 0.95',
    loads: [lagging(1800, 0.6)],
    motorKw: 0,
    toPowerFactor: 0.95,
    expected: { kva: 1808.369 },
    tolerance: { kva: 0.0005 },
  },
];

/** Multipliers [from, to, printed] of kW to kvar. */
export const multiplierTables = [
  {
    source:
      'Eaton, technical data SA02607001E, Nov. 2010, table 6 (read in a scanned copy; one unit of the last digit)',
    tolerance: 0.001,
    rows: [
      [0.5, 0.8, 0.982],
      [0.5, 0.85, 1.112],
      [0.5, 0.9, 1.248],
      [0.5, 0.95, 1.403],
      [0.5, 1, 1.732],
      [0.52, 0.9, 1.159],
      [0.54, 0.95, 1.23],
      [0.55, 0.92, 1.093],
      [0.55, 0.98, 1.316],
      [0.56, 0.95, 1.151],
      [0.58, 0.9, 0.921],
      [0.6, 0.8, 0.583],
      [0.6, 0.95, 1.004],
      [0.6, 1, 1.333],
      [0.61, 0.9, 0.815],
      [0.62, 0.92, 0.84],
    ] as [number, number, number][],
  },
  {
    source:
      'The usual three-decimal multiplier table of electrical handbooks, from memory (differences of rounded tangents: one unit of the last digit)',
    tolerance: 0.001,
    rows: [
      [0.65, 0.9, 0.685],
      [0.65, 0.95, 0.84],
      [0.7, 0.9, 0.536],
      [0.7, 0.95, 0.691],
      [0.7, 1, 1.02],
      [0.75, 0.9, 0.398],
      [0.75, 0.95, 0.553],
      [0.8, 0.9, 0.266],
      [0.8, 0.95, 0.421],
      [0.8, 1, 0.75],
      [0.85, 0.95, 0.291],
      [0.9, 0.95, 0.155],
      [0.95, 1, 0.329],
    ] as [number, number, number][],
  },
];
