import { KW_PER_HP, operatingPoint, unityField } from '@/core/machine';
import { brentRoot } from '@/core/machine/roots';
import type { BusLoad } from '@/core/plan';
import {
  atLoad,
  greatest,
  lagging,
  leading,
  motorOfOhms,
  round,
  toNeutral,
  torqueLbFt,
  torqueNm,
} from './machine-case';
import type { MachineCase } from './machine-case';

const OMEGA_60 = 2 * Math.PI * 60;

/** Mutual inductance of field and armature from the emf of a field current, and back: E = omega Laf If / sqrt 2. [mH], [A] */
const mutualMh = (emfV: number, fieldA: number) => (1000 * emfV * Math.SQRT2) / (OMEGA_60 * fieldA);
const fieldAmperes = (emfV: number, mh: number) => (1000 * emfV * Math.SQRT2) / (OMEGA_60 * mh);

/** Worked examples of round rotors at a given load: what field it needs. */
export const loadCases: MachineCase[] = [
  {
    // Delta: the phase stands between lines. A third of its ohms in wye, at the volts to neutral, gives the line amperes.
    id: 'CHP-EX1a',
    source:
      'S. J. Chapman, Electric Machinery Fundamentals, synchronous motors, first example: 15 hp at 0.8 leading; from memory',
    find: () => {
      const load = leading(15 * KW_PER_HP + 2.5, 0.8);
      const found = atLoad(208, load, round(2.5));
      const star = atLoad(toNeutral(208), load, round(2.5 / 3));
      return {
        Pin_kW: load.kw,
        IL_A: star.currentA,
        Ia_A: found.currentA,
        Ia_angle_deg: found.currentDeg,
        Ea_V: found.emfV,
        delta_deg: found.deltaDeg,
        Q_supplied_kvar: -load.kvar,
        P_pullout_kW: greatest(208, found.emfV, round(2.5)).kw,
      };
    },
    printed: { Pin_kW: 13.69, IL_A: 47.5, Ia_A: 27.4, Ia_angle_deg: 36.87, Ea_V: 255, delta_deg: -12.4 },
    tolerance: 0.01,
    recomputed: {
      Pin_kW: 13.69,
      IL_A: 47.5,
      Ia_A: 27.424,
      Ia_angle_deg: 36.87,
      Ea_V: 255.1,
      delta_deg: -12.416,
      Q_supplied_kvar: 10.267,
      P_pullout_kW: 63.673,
    },
  },
  {
    id: 'HUB-8-1',
    source: 'C. I. Hubert, Electric Machines, ex. 8.1, p. 317: 100 hp at 0.8 leading; read in the companion notebook',
    find: () => {
      const load = leading((100 * KW_PER_HP) / 0.96, 0.8);
      const found = atLoad(toNeutral(460), load, round(2.72));
      const most = greatest(toNeutral(460), found.emfV, round(2.72)).kw;
      return {
        T_lbft: torqueLbFt(load.kw, 1800),
        Ia_A: found.currentA,
        Ia_angle_deg: found.currentDeg,
        Ef_V: found.emfV,
        delta_deg: found.deltaDeg,
        P_pullout_kW: most,
        T_pullout_lbft: torqueLbFt(most, 1800),
        Q_supplied_kvar: -load.kvar,
      };
    },
    printed: { T_lbft: 303.9, Ia_A: 122, Ia_angle_deg: 36.9, Ef_V: 535, delta_deg: -29.7, T_pullout_lbft: 614 },
    tolerance: 0.01,
    // The source rounds emf and torque on the way to pull-out.
    within: { T_pullout_lbft: 1.2 },
    recomputed: {
      T_lbft: 303.94,
      Ia_A: 121.92,
      Ia_angle_deg: 36.87,
      Ef_V: 534.96,
      delta_deg: -29.729,
      P_pullout_kW: 156.7,
      T_pullout_lbft: 612.89,
      Q_supplied_kvar: 58.281,
    },
  },
  {
    id: 'FIT-5-1',
    source:
      'A. E. Fitzgerald, C. Kingsley and S. D. Umans, Electric Machinery, 6th ed., ex. 5.1, p. 254: 120 A at 0.95 lagging; read in the companion notebook',
    find: () => {
      const load = lagging((3 * toNeutral(460) * 120 * 0.95) / 1000, 0.95);
      const found = atLoad(toNeutral(460), load, round(1.68));
      return {
        Eaf_V_per_phase: found.emfV,
        delta_deg: found.deltaDeg,
        Laf_mH: mutualMh(found.emfV, 47),
        P_kW: load.kw,
        P_hp: load.kw / KW_PER_HP,
        Q_absorbed_kvar: load.kvar,
      };
    },
    printed: { Eaf_V_per_phase: 278.8, Laf_mH: 22.3, P_kW: 90.8, P_hp: 122 },
    tolerance: 0.01,
    recomputed: {
      Eaf_V_per_phase: 278.82,
      delta_deg: -43.385,
      Laf_mH: 22.254,
      P_kW: 90.829,
      P_hp: 121.75,
      Q_absorbed_kvar: 29.854,
    },
  },
  {
    id: 'FIT-5-2',
    source:
      "Fitzgerald et al., ex. 5.2, p. 255: the same motor brought to unity; read in the companion notebook. At 0.8 leading: an extension of the example, not the source's",
    find: () => {
      const at = (load: BusLoad) => atLoad(toNeutral(460), load, round(1.68));
      const unity = at(leading(90.6, 1));
      const before = lagging((3 * toNeutral(460) * 120 * 0.95) / 1000, 0.95);
      const exact = at({ kw: before.kw, kvar: 0 }).emfV;
      const over = at(leading(90.6, 0.8));
      return {
        delta_deg: unity.deltaDeg,
        If_unity_A: fieldAmperes(unity.emfV, 22.3),
        If_unity_exact_P_A: fieldAmperes(exact, mutualMh(at(before).emfV, 47)),
        If_08_lead_A: fieldAmperes(over.emfV, 22.3),
        Q_08_lead_supplied_kvar: -leading(90.6, 0.8).kvar,
        delta_08_lead_deg: over.deltaDeg,
      };
    },
    printed: { delta_deg: -35.7, If_unity_A: 55.04 },
    tolerance: 0.01,
    // The source rounds the emf on the way.
    within: { If_unity_A: 0.02 },
    recomputed: {
      delta_deg: -35.728,
      If_unity_A: 55.034,
      If_unity_exact_P_A: 55.195,
      If_08_lead_A: 75.916,
      Q_08_lead_supplied_kvar: 67.95,
      delta_08_lead_deg: -25.044,
    },
  },
  {
    id: 'FIT-5-7',
    source:
      'Fitzgerald et al., ex. 5.7, p. 272: pull-out of 2000 hp at unity, 30 poles; read in the companion notebook',
    find: () => {
      const kw = 2000 * KW_PER_HP;
      const { emfV } = atLoad(toNeutral(2300), { kw, kvar: 0 }, round(1.95));
      const most = greatest(toNeutral(2300), emfV, round(1.95)).kw;
      return { P_max_kW: most, T_max_kNm: torqueNm(most, 240) / 1000, Ef_V: emfV, P_max_over_rated: most / kw };
    },
    printed: { P_max_kW: 3096, T_max_kNm: 123.2 },
    tolerance: 0.01,
    recomputed: { P_max_kW: 3096, T_max_kNm: 123.19, Ef_V: 1515.5, P_max_over_rated: 2.0751 },
  },
  {
    // Any reactance gives these figures: the bottom of the V-curve stands at unity.
    id: 'MCP-2-4',
    source:
      'G. McPherson, An Introduction to Electrical Machines and Transformers, ex. 2-4, p. 20: the bottom of a V-curve at 8.8 A, then 0.8 leading; read in the companion notebook',
    find: () => {
      const motor = motorOfOhms({ kva: 40, lineV: 2300 }, round(120));
      const bottomA = (shaftKw: number) =>
        operatingPoint(motor, { shaftKw, fieldCurrentA: unityField(motor, { shaftKw }) }).lineCurrentA;
      const kw = brentRoot((shaftKw) => bottomA(shaftKw) - 8.8, 10, 39, 'load of a bottom');
      const { kvar, lineCurrentA } = operatingPoint(motor, { shaftKw: kw, powerFactor: 0.8, leading: true });
      return { P_kW: kw, P_hp: kw / KW_PER_HP, Q_supplied_kvar: -kvar, Ia_at_pf_A: lineCurrentA };
    },
    printed: { P_kW: 35.06, P_hp: 46.99, Q_supplied_kvar: 26.29 },
    tolerance: 0.01,
    recomputed: { P_kW: 35.057, P_hp: 46.993, Q_supplied_kvar: 26.293, Ia_at_pf_A: 11 },
  },
];
