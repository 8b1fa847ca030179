import { combineLoads, correctiveKvar, resonanceOrder, upstreamLossSavedShare, voltageRisePu } from '@/core/plan';
import { lagging } from './machine-case';
import type { MachineCase } from './machine-case';

/** A multiplier of kW and the kvar it gives. */
function multiplied(demandKw: number, fromPowerFactor: number, toPowerFactor: number) {
  const kvar = correctiveKvar({ demandKw, fromPowerFactor, toPowerFactor });
  return { mult: kvar / demandKw, Q_kvar: kvar };
}

/** A table of multipliers by rows: from and to in hundredths, as printed, recomputed. Its makers subtract rounded tangents: one unit of the last digit. */
function multiplierCase(
  table: Pick<MachineCase, 'id' | 'source' | 'tolerance' | 'wrong'>,
  rows: number[][],
): MachineCase {
  const byName = (figure: (row: number[]) => number) =>
    Object.fromEntries(rows.map((row) => [`m_${row[0]}_${String(row[1]).padStart(3, '0')}`, figure(row)]));
  const multiplier = ([from, to]: number[]) =>
    correctiveKvar({ demandKw: 1, fromPowerFactor: from! / 100, toPowerFactor: to! / 100 });
  return {
    ...table,
    find: () => byName(multiplier),
    printed: byName((row) => row[2]!),
    within: 0.001,
    recomputed: byName((row) => row[3]!),
  };
}

/** Rules of the network: multipliers, losses upstream, rise of voltage, resonance. */
export const networkCases: MachineCase[] = [
  {
    id: 'NET-LL38',
    source: 'Trade literature (sudikglobal.com): 0.75 to 0.95 cuts the losses of distribution by about 38 %',
    find: () => ({ loss_reduction_pct: 100 * upstreamLossSavedShare(0.75, 0.95) }),
    printed: { loss_reduction_pct: 38 },
    tolerance: 0.02,
    recomputed: { loss_reduction_pct: 37.673 },
  },
  {
    id: 'NET-M65',
    source: 'Trade article (elmeasure.com): 650 kW from 0.65 to unity, multiplier 1.169',
    find: () => multiplied(650, 0.65, 1),
    printed: { mult: 1.169, Q_kvar: 759.85 },
    tolerance: 0.01,
    // The multiplier rounded, times 650.
    within: { Q_kvar: 0.33 },
    recomputed: { mult: 1.1691, Q_kvar: 759.93 },
  },
  {
    id: 'NET-M75',
    source: 'Trade article (zxpress.in): 100 kW from 0.75 to 0.9, multiplier 0.398',
    find: () => multiplied(100, 0.75, 0.9),
    printed: { mult: 0.398, Q_kvar: 39.8 },
    tolerance: 0.01,
    recomputed: { mult: 0.39759, Q_kvar: 39.759 },
  },
  {
    id: 'NET-VR',
    source:
      'Own numbers in the rise of voltage at a transformer, three forms of a formula of a trade page (controllix.com)',
    find: () => {
      const xOhm = (0.0575 * 480 ** 2) / 1.5e6;
      const behindPlate = { kvar: 400, shortCircuitKva: 1500 / 0.0575 };
      const behindOhm = { kvar: 400, shortCircuitKva: (1000 * 0.48 ** 2) / xOhm };
      return {
        dV_pct: 100 * voltageRisePu(behindPlate),
        X_ohm: xOhm,
        dV_pct_ohm_form: 100 * voltageRisePu(behindOhm),
        kVA_sc_at_secondary: behindOhm.shortCircuitKva,
        dV_pct_sc_form: 100 * voltageRisePu({ kvar: 400, shortCircuitKva: 26087 }),
        resonance_order_if_capacitor: resonanceOrder(behindPlate),
      };
    },
    tolerance: 0.01,
    recomputed: {
      dV_pct: 1.5333,
      X_ohm: 0.008832,
      dV_pct_ohm_form: 1.5333,
      kVA_sc_at_secondary: 26087,
      dV_pct_sc_form: 1.5333,
      resonance_order_if_capacitor: 8.0757,
    },
  },
  {
    id: 'NET-PLANT',
    source: 'Own worked example: 1000 kW from 0.70 to 0.90, 25 kW lost upstream before; worked apart from this code',
    find: () => {
      const before = combineLoads([lagging(1000, 0.7)]).kva;
      const kvar = correctiveKvar({ demandKw: 1000, fromPowerFactor: 0.7, toPowerFactor: 0.9 });
      const after = combineLoads([lagging(1000, 0.7), { kw: 0, kvar: -kvar }]).kva;
      const saved = upstreamLossSavedShare(0.7, 0.9);
      return {
        S1_kVA: before,
        S2_kVA: after,
        released_kVA: before - after,
        Q_added_kvar: kvar,
        loss_reduction_pct: 100 * saved,
        upstream_saving_kW: 25 * saved,
      };
    },
    tolerance: 0.01,
    recomputed: {
      S1_kVA: 1428.6,
      S2_kVA: 1111.1,
      released_kVA: 317.46,
      Q_added_kvar: 535.88,
      loss_reduction_pct: 39.506,
      upstream_saving_kW: 9.8765,
    },
  },
  multiplierCase(
    {
      id: 'NET-MULT',
      source: 'Eaton, technical data SA02607001E, Nov. 2010, table 6, rows 0.50 to 0.62; read in a scanned copy',
      tolerance: 0.0025,
    },
    [
      [50, 80, 0.982, 0.98205],
      [50, 85, 1.112, 1.1123],
      [50, 90, 1.248, 1.2477],
      [50, 95, 1.403, 1.4034],
      [50, 100, 1.732, 1.7321],
      [52, 80, 0.893, 0.89263],
      [52, 90, 1.159, 1.1583],
      [52, 95, 1.314, 1.3139],
      [54, 85, 0.939, 0.93889],
      [54, 90, 1.075, 1.0743],
      [54, 95, 1.23, 1.23],
      [55, 80, 0.769, 0.76848],
      [55, 85, 0.899, 0.89874],
      [55, 90, 1.035, 1.0342],
      [55, 92, 1.093, 1.0925],
      [55, 95, 1.19, 1.1898],
      [55, 98, 1.316, 1.3154],
      [55, 100, 1.519, 1.5185],
      [56, 90, 0.996, 0.99513],
      [56, 95, 1.151, 1.1508],
      [57, 90, 0.958, 0.95716],
      [57, 95, 1.113, 1.1128],
      [58, 85, 0.785, 0.78477],
      [58, 90, 0.921, 0.92019],
      [58, 95, 1.076, 1.0758],
      [59, 90, 0.885, 0.88416],
      [59, 95, 1.04, 1.0398],
      [60, 80, 0.583, 0.58333],
      [60, 85, 0.713, 0.71359],
      [60, 90, 0.849, 0.84901],
      [60, 92, 0.907, 0.90734],
      [60, 95, 1.004, 1.0046],
      [60, 98, 1.13, 1.1303],
      [60, 100, 1.333, 1.3333],
      [61, 90, 0.815, 0.8147],
      [61, 95, 0.97, 0.97033],
      [62, 80, 0.516, 0.51549],
      [62, 85, 0.646, 0.64574],
      [62, 90, 0.782, 0.78116],
      [62, 92, 0.84, 0.83949],
    ],
  ),
  multiplierCase(
    {
      id: 'NET-MULT-M',
      source: 'The usual three-decimal multiplier table of electrical handbooks, rows 0.65 to 0.95; from memory',
      tolerance: 0.004,
      wrong: {
        m_85_090: 'A difference of rounded tangents, one unit of the last digit high.',
        m_90_095: 'A difference of rounded tangents, one unit of the last digit low.',
      },
    },
    [
      [65, 90, 0.685, 0.68481],
      [65, 95, 0.84, 0.84045],
      [70, 80, 0.27, 0.2702],
      [70, 85, 0.4, 0.40046],
      [70, 90, 0.536, 0.53588],
      [70, 95, 0.691, 0.69152],
      [70, 100, 1.02, 1.0202],
      [72, 90, 0.48, 0.47953],
      [72, 95, 0.635, 0.63517],
      [75, 85, 0.262, 0.26217],
      [75, 90, 0.398, 0.39759],
      [75, 95, 0.553, 0.55323],
      [75, 100, 0.882, 0.88192],
      [78, 90, 0.318, 0.31796],
      [78, 95, 0.473, 0.4736],
      [80, 90, 0.266, 0.26568],
      [80, 95, 0.421, 0.42132],
      [80, 100, 0.75, 0.75],
      [82, 95, 0.369, 0.36932],
      [85, 90, 0.136, 0.13542],
      [85, 95, 0.291, 0.29106],
      [85, 100, 0.62, 0.61974],
      [88, 95, 0.211, 0.21106],
      [90, 95, 0.155, 0.15564],
      [90, 100, 0.484, 0.48432],
      [92, 95, 0.097, 0.097314],
      [92, 100, 0.426, 0.426],
      [95, 100, 0.329, 0.32868],
    ],
  ),
];
