import { KW_PER_HP, capability, leastField, operatingPoint } from '@/core/machine';
import { buildLosslessMotor, buildMotor } from '../core/machine/build-motor';
import { greatest } from './machine-case';
import type { Figures, MachineCase } from './machine-case';

/** The rotor and rating of a motor without losses, per unit on 1000 kVA. */
interface Plate {
  ratedPowerFactor: number;
  xdPu: number;
  xqPu: number;
}

/** Loads of the derivation, as a share of rated. */
export const loadShares = [0, 0.25, 0.5, 0.75, 1, 1.15, 1.25];

/** One limit at a time: the others are far away. */
const fieldAlone = { armatureCurrentA: 1e6, pullOutMargin: 1 };
const armatureAlone = { fieldCurrentA: 1e4, pullOutMargin: 1 };
const bothLimits = { pullOutMargin: 1 };

const perUnit = (kvar: number | null) => (kvar === null ? null : kvar / 1000);
const hundredths = (share: number) => String(Math.round(100 * share)).padStart(3, '0');

/** Figures of a load: kvar by the field's limit and by the armature's; as a percentage of rated horsepower by the field's and by both. */
type LoadRow = (number | null)[];

function byLoad(rows: LoadRow[]): Figures {
  const names = ['Qfield_pu', 'Qarm_pu', 'kvar_pct_of_rated_hp_const_field', 'kvar_pct_of_rated_hp_both_limits'];
  const entries = rows.flatMap((row, i) =>
    names.map((name, k) => [`${name}_load${hundredths(loadShares[i]!)}`, row[k]!] as const),
  );
  return Object.fromEntries(entries);
}

/** Kvar a motor may deliver over its load, horsepower by an efficiency of 95 %. */
function loadRows(plate: Plate): LoadRow[] {
  const motor = buildLosslessMotor(plate);
  const percentOfHp = (pu: number | null) =>
    pu === null ? null : (100 * pu * KW_PER_HP) / (0.95 * plate.ratedPowerFactor);
  return loadShares.map((share) => {
    const shaftKw = share * motor.ratedOutputKw;
    const [field, armature, both] = [fieldAlone, armatureAlone, bothLimits].map((limits) =>
      perUnit(capability({ ...motor, limits }, { shaftKw }).kvarDelivered),
    );
    return [field!, armature!, percentOfHp(field!), percentOfHp(both!)];
  });
}

/** What the rated point of a plate tells. */
function ratedFigures(plate: Plate): Figures {
  const at = { shaftKw: 1000 * plate.ratedPowerFactor, powerFactor: plate.ratedPowerFactor, leading: true };
  const rated = operatingPoint(buildLosslessMotor(plate), at);
  const most = greatest(1, rated.emfPu, { raOhm: 0, xdOhm: plate.xdPu, xqOhm: plate.xqPu });
  const mostPu = (most.kw * 1000) / 3;
  return {
    E_rated_pu: rated.emfPu,
    delta_rated_deg: -rated.loadAngleDeg,
    P_pullout_pu: mostPu,
    P_pullout_over_rated: mostPu / plate.ratedPowerFactor,
    delta_pullout_deg: most.deltaDeg,
  };
}

function nameplateCase(id: string, plate: Plate, rated: Figures, rows: LoadRow[]): MachineCase & { plate: Plate } {
  return {
    id,
    plate,
    source: 'Own derivation of both limits from the nameplate; worked apart from this code',
    find: () => ({ ...ratedFigures(plate), ...byLoad(loadRows(plate)) }),
    tolerance: 0.01,
    recomputed: { ...rated, ...byLoad(rows) },
  };
}

function voltages(all: number[]): Figures {
  const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: 1, xqPu: 0.65 });
  const figures: Figures = {};
  for (const voltagePu of all) {
    const within = (limits: typeof motor.limits, shaftKw: number) =>
      perUnit(capability({ ...motor, limits }, { shaftKw, voltagePu }).kvarDelivered);
    figures[`Qfield_pu_V${hundredths(voltagePu)}`] = within(fieldAlone, 800);
    figures[`Qarm_pu_V${hundredths(voltagePu)}`] = within(armatureAlone, 800);
    figures[`Qfield_noload_pu_V${hundredths(voltagePu)}`] = within(fieldAlone, 0);
  }
  return figures;
}

function leastExcitation(loadsPu: number[], ratios: number[]): Figures {
  const figures: Figures = {};
  const leastAt = (xqPu: number, shaftKw: number, pullOutMargin: number) => {
    const limits = { pullOutMargin, armatureCurrentA: 1e6 };
    const motor = buildLosslessMotor({ ratedPowerFactor: 0.8, xdPu: 1, xqPu, limits });
    return operatingPoint(motor, { shaftKw, fieldCurrentA: leastField(motor, { shaftKw })!.fieldCurrentA });
  };
  for (const load of loadsPu) {
    const name = `P${hundredths(load).slice(0, 2)}`;
    for (const ratio of ratios) {
      const point = leastAt(0.65, 1000 * load, ratio);
      figures[`E_min_pu_${name}_k${hundredths(ratio)}`] = point.emfPu;
      if (ratio > 1) figures[`Q_supplied_pu_at_${name}_k${hundredths(ratio)}`] = -point.kvar / 1000;
    }
    figures[`round_E_min_pu_${name}`] = leastAt(1, 1000 * load, 1).emfPu;
  }
  return figures;
}

/**
 * What over-excited motors may deliver, in per unit on rated kVA, losses and armature resistance left out: the power-angle equations of
 * [FIT] ch. 5, common practice. Rows by load.
 */
export const nameplateCases = [
  nameplateCase(
    'CAP-1.0pf-round-X1.0',
    { ratedPowerFactor: 1, xdPu: 1, xqPu: 1 },
    {
      E_rated_pu: 1.4142,
      delta_rated_deg: -45,
      P_pullout_pu: 1.4142,
      P_pullout_over_rated: 1.4142,
      delta_pullout_deg: -90,
    },
    [
      [0.41421, 1, 32.527, 32.527],
      [0.39194, 0.96825, 30.778, 30.778],
      [0.32288, 0.86603, 25.354, 25.354],
      [0.19896, 0.66144, 15.623, 15.623],
      [0, 0, 0, 0],
      [-0.1769, null, -13.891, null],
      [-0.33856, null, -26.586, null],
    ],
  ),
  nameplateCase(
    'CAP-1.0pf-salient-1.0-0.65',
    { ratedPowerFactor: 1, xdPu: 1, xqPu: 0.65 },
    {
      E_rated_pu: 1.3834,
      delta_rated_deg: -33.024,
      P_pullout_pu: 1.474,
      P_pullout_over_rated: 1.474,
      delta_pullout_deg: -71.762,
    },
    [
      [0.38343, 1, 30.109, 30.109],
      [0.36247, 0.96825, 28.463, 28.463],
      [0.29765, 0.86603, 23.374, 23.374],
      [0.18223, 0.66144, 14.31, 14.31],
      [0, 0, 0, 0],
      [-0.15733, null, -12.354, null],
      [-0.29494, null, -23.161, null],
    ],
  ),
  nameplateCase(
    'CAP-0.9pf-salient-1.1-0.7',
    { ratedPowerFactor: 0.9, xdPu: 1.1, xqPu: 0.7 },
    {
      E_rated_pu: 1.7627,
      delta_rated_deg: -25.767,
      P_pullout_pu: 1.6781,
      P_pullout_over_rated: 1.8645,
      delta_pullout_deg: -74.032,
    },
    [
      [0.6934, 1, 60.5, 60.5],
      [0.67848, 0.97436, 59.199, 59.199],
      [0.6329, 0.89303, 55.222, 55.222],
      [0.55391, 0.73782, 48.33, 48.33],
      [0.43589, 0.43589, 38.032, 38.032],
      [0.3421, null, 29.849, null],
      [0.26768, null, 23.356, null],
    ],
  ),
  nameplateCase(
    'CAP-0.8pf-round-X1.0',
    { ratedPowerFactor: 0.8, xdPu: 1, xqPu: 1 },
    {
      E_rated_pu: 1.7889,
      delta_rated_deg: -26.565,
      P_pullout_pu: 1.7889,
      P_pullout_over_rated: 2.2361,
      delta_pullout_deg: -90,
    },
    [
      [0.78885, 1, 77.432, 77.432],
      [0.77764, 0.9798, 76.331, 76.331],
      [0.74356, 0.91652, 72.986, 72.986],
      [0.68523, 0.8, 67.261, 67.261],
      [0.6, 0.6, 58.895, 58.895],
      [0.53414, 0.39192, 52.431, 38.47],
      [0.48324, 0, 47.434, 0],
    ],
  ),
  nameplateCase(
    'CAP-0.8pf-salient-1.0-0.65',
    { ratedPowerFactor: 0.8, xdPu: 1, xqPu: 0.65 },
    {
      E_rated_pu: 1.7789,
      delta_rated_deg: -20.511,
      P_pullout_pu: 1.8529,
      P_pullout_over_rated: 2.3161,
      delta_pullout_deg: -74.85,
    },
    [
      [0.77888, 1, 76.453, 76.453],
      [0.76821, 0.9798, 75.406, 75.406],
      [0.73583, 0.91652, 72.227, 72.227],
      [0.68052, 0.8, 66.799, 66.799],
      [0.6, 0.6, 58.895, 58.895],
      [0.53804, 0.39192, 52.813, 38.47],
      [0.49033, 0, 48.13, 0],
    ],
  ),
  nameplateCase(
    'CAP-0.8pf-salient-1.3-0.8',
    { ratedPowerFactor: 0.8, xdPu: 1.3, xqPu: 0.8 },
    {
      E_rated_pu: 2.0466,
      delta_rated_deg: -23.385,
      P_pullout_pu: 1.6409,
      P_pullout_over_rated: 2.0511,
      delta_pullout_deg: -74.745,
    },
    [
      [0.80506, 1, 79.023, 79.023],
      [0.793, 0.9798, 77.839, 77.839],
      [0.75629, 0.91652, 74.236, 74.236],
      [0.69313, 0.8, 68.036, 68.036],
      [0.6, 0.6, 58.895, 58.895],
      [0.52724, 0.39192, 51.752, 38.47],
      [0.47043, 0, 46.176, 0],
    ],
  ),
];

/** Voltage, least excitation, a trade chart. */
export const capabilityCases: MachineCase[] = [
  {
    id: 'CAP-VDEP',
    source:
      'Own derivation: terminal voltage at rated load and at none, 0.8 leading, salient 1.0/0.65; worked apart from this code',
    find: () => voltages([0.95, 1, 1.05]),
    tolerance: 0.01,
    recomputed: {
      Qfield_pu_V095: 0.59712,
      Qarm_pu_V095: 0.51235,
      Qfield_noload_pu_V095: 0.78743,
      Qfield_pu_V100: 0.6,
      Qarm_pu_V100: 0.6,
      Qfield_noload_pu_V100: 0.77888,
      Qfield_pu_V105: 0.59662,
      Qarm_pu_V105: 0.68007,
      Qfield_noload_pu_V105: 0.76532,
    },
  },
  {
    // Round rotor of 1.0: the emf that holds a load at 90 degrees is the load.
    id: 'CAP-UEL',
    source: 'Own derivation: least excitation for a pull-out ratio, salient 1.0/0.65; worked apart from this code',
    find: () => leastExcitation([0.4, 0.8], [1, 1.25, 1.5]),
    tolerance: 0.01,
    recomputed: {
      E_min_pu_P04_k100: 0.17584,
      E_min_pu_P04_k125: 0.30148,
      Q_supplied_pu_at_P04_k125: -0.89327,
      E_min_pu_P04_k150: 0.4221,
      Q_supplied_pu_at_P04_k150: -0.72652,
      round_E_min_pu_P04: 0.4,
      E_min_pu_P08_k100: 0.65325,
      E_min_pu_P08_k125: 0.87562,
      Q_supplied_pu_at_P08_k125: -0.51369,
      E_min_pu_P08_k150: 1.0924,
      Q_supplied_pu_at_P08_k150: -0.20619,
      round_E_min_pu_P08: 0.8,
    },
  },
  {
    // At the rated point the kvar go with 1/efficiency, so 0.6 kvar per hp tells an efficiency.
    id: 'EM-F14',
    source:
      'A trade chart of the reactive power of synchronous motors, publisher not named: 250 hp, 0.8 leading, full load, field held, factor 0.6',
    find: () => {
      const motor = buildMotor({
        ratedOutputKw: 250 * KW_PER_HP,
        ratedVoltageV: 2300,
        ratedEfficiency: 0.93,
        ratedFieldCurrentA: 40,
        fieldResistanceOhm: 1.5,
      });
      const kvar = capability(motor, { shaftKw: motor.ratedOutputKw }).kvarDelivered!;
      return { kvar_per_hp: kvar / 250, Q_kvar: kvar, efficiency_implied_by_0p6: (0.93 * kvar) / 250 / 0.6 };
    },
    printed: { kvar_per_hp: 0.6, Q_kvar: 150 },
    tolerance: 0.01,
    // Read from a graph: 1 %.
    within: { kvar_per_hp: 0.006, Q_kvar: 1.5 },
    recomputed: { kvar_per_hp: 0.60161, Q_kvar: 150.4, efficiency_assumed: 0.93, efficiency_implied_by_0p6: 0.9325 },
    outside: { efficiency_assumed: 'Given to the core.' },
  },
];
