/**
 * Capability of over-excited motors in per unit on rated kVA: field-limited and armature-limited kvar delivered.
 *
 * Worked apart from this code from the power-angle equations without losses or armature resistance (phasor algebra of
 * Fitzgerald, Kingsley and Umans, Electric Machinery, ch. 5; the equations are common practice), to five digits.
 */
export interface CapabilityCase {
  id: string;
  powerFactor: number;
  xdPu: number;
  xqPu: number;
  emfPu: number;
  pullOutPu: number;
  /** [load on rated load, field-limited kvar, armature-limited kvar or null]; per unit of rated kVA. */
  loads: [number, number, number | null][];
}

export const capabilityCases: CapabilityCase[] = [
  {
    id: 'unity power factor, salient 1.0/0.65',
    powerFactor: 1,
    xdPu: 1,
    xqPu: 0.65,
    emfPu: 1.3834,
    pullOutPu: 1.474,
    loads: [
      [0, 0.38343, 1],
      [0.25, 0.36247, 0.96825],
      [0.5, 0.29765, 0.86603],
      [0.75, 0.18223, 0.66144],
      [1, 0, 0],
      [1.15, -0.15733, null],
      [1.25, -0.29494, null],
    ],
  },
  {
    id: '0.9 leading, salient 1.1/0.7',
    powerFactor: 0.9,
    xdPu: 1.1,
    xqPu: 0.7,
    emfPu: 1.7627,
    pullOutPu: 1.6781,
    loads: [
      [0, 0.6934, 1],
      [0.25, 0.67848, 0.97436],
      [0.5, 0.6329, 0.89303],
      [0.75, 0.55391, 0.73782],
      [1, 0.43589, 0.43589],
      [1.15, 0.3421, null],
    ],
  },
  {
    id: '0.8 leading, round 1.0',
    powerFactor: 0.8,
    xdPu: 1,
    xqPu: 1,
    emfPu: 1.7889,
    pullOutPu: 1.7889,
    loads: [
      [0, 0.78885, 1],
      [0.25, 0.77764, 0.9798],
      [0.5, 0.74356, 0.91652],
      [0.75, 0.68523, 0.8],
      [1, 0.6, 0.6],
      [1.15, 0.53414, 0.39192],
    ],
  },
  {
    id: '0.8 leading, salient 1.0/0.65',
    powerFactor: 0.8,
    xdPu: 1,
    xqPu: 0.65,
    emfPu: 1.7789,
    pullOutPu: 1.8529,
    loads: [
      [0, 0.77888, 1],
      [0.25, 0.76821, 0.9798],
      [0.5, 0.73583, 0.91652],
      [0.75, 0.68052, 0.8],
      [1, 0.6, 0.6],
      [1.15, 0.53804, 0.39192],
    ],
  },
  {
    id: '0.8 leading, salient 1.3/0.8',
    powerFactor: 0.8,
    xdPu: 1.3,
    xqPu: 0.8,
    emfPu: 2.0466,
    pullOutPu: 1.6409,
    loads: [
      [0, 0.80506, 1],
      [0.25, 0.793, 0.9798],
      [0.5, 0.75629, 0.91652],
      [0.75, 0.69313, 0.8],
      [1, 0.6, 0.6],
      [1.15, 0.52724, 0.39192],
    ],
  },
];

/** Terminal voltage against field-limited and armature-limited kvar at rated load, and field-limited at no load. */
export const voltageCase = {
  powerFactor: 0.8,
  xdPu: 1,
  xqPu: 0.65,
  rows: [
    { voltagePu: 0.95, field: 0.59712, armature: 0.51235, fieldAtNoLoad: 0.78743 },
    { voltagePu: 1, field: 0.6, armature: 0.6, fieldAtNoLoad: 0.77888 },
    { voltagePu: 1.05, field: 0.59662, armature: 0.68007, fieldAtNoLoad: 0.76532 },
  ],
};

/** Least emf for a pull-out ratio at a load, and the kvar then delivered: salient 1.0/0.65 without losses, 1 pu voltage. */
export const leastEmfCases = [
  { loadPu: 0.4, ratio: 1, emfPu: 0.17584, kvarDeliveredPu: null },
  { loadPu: 0.4, ratio: 1.25, emfPu: 0.30148, kvarDeliveredPu: -0.89327 },
  { loadPu: 0.4, ratio: 1.5, emfPu: 0.4221, kvarDeliveredPu: -0.72652 },
  { loadPu: 0.8, ratio: 1, emfPu: 0.65325, kvarDeliveredPu: null },
  { loadPu: 0.8, ratio: 1.25, emfPu: 0.87562, kvarDeliveredPu: -0.51369 },
  { loadPu: 0.8, ratio: 1.5, emfPu: 1.0924, kvarDeliveredPu: -0.20619 },
];

/**
 * Variable losses of a 2000 hp, 0.8 power factor motor (1942.7 kVA, Xd 1.1, Xq 0.7) at 0.6 pu armature power, worked apart
 * from this code: armature 1.0 %, stray 0.4 %, field 0.9 % of kVA at rated point, exciter efficiency 0.85. The field follows
 * the emf without armature resistance, so the exciter's figures carry 1 % of tolerance, the others 5 digits.
 */
export const lossCase = {
  ratedHp: 2000,
  efficiency: 0.96,
  points: [
    { kvarDelivered: 0, armatureKw: 6.9937, strayKw: 2.7975, exciterInputKw: 8.182 },
    { kvarDelivered: 582.81, armatureKw: 8.7422, strayKw: 3.4969, exciterInputKw: 12.801 },
    { kvarDelivered: 1165.6, armatureKw: 13.987, strayKw: 5.595, exciterInputKw: 18.675 },
    { kvarDelivered: 1330.8, armatureKw: 16.11, strayKw: 6.4439, exciterInputKw: 20.57 },
  ],
};

/**
 * [FIT] ex. 5.8, p. 279 (companion notebook): a 45 kVA, 220 V motor taking its rated current at 0.8 leading. The field is
 * fed apart from the armature. Digits as printed.
 */
export const lossSegregationCase = {
  armatureKva: 45,
  voltageV: 220,
  powerFactor: 0.8,
  fieldCurrentA: 5.5,
  fieldResistanceOhm: 35.5,
  armatureResistanceOhm: 0.0399,
  coreKw: 1.8,
  frictionWindageKw: 0.91,
  strayKw: 0.37,
  expected: { armatureKw: 1.67, fieldKw: 1.07, inputKw: 37.1, efficiencyPercent: 84.3 },
};
