import { KW_PER_HP, leastField, operatingPoint } from '@/core/machine';
import { powerOverAngle, valueAt } from '@/core/machine/angle-power';
import { brentRoot } from '@/core/machine/roots';
import { atEmf, atLoad, lagging, leading, motorOfOhms, round, toNeutral, torqueNm } from './machine-case';
import type { MachineCase } from './machine-case';

/** Worked examples of round rotors at a held field: what the motor then takes and delivers. */
export const emfCases: MachineCase[] = [
  {
    id: 'CHP-EX1b',
    source:
      'S. J. Chapman, Electric Machinery Fundamentals, synchronous motors, first example at 30 hp and the same field; from memory',
    find: () => {
      const kw = 30 * KW_PER_HP + 2.5;
      const { emfV } = atLoad(208, leading(15 * KW_PER_HP + 2.5, 0.8), round(2.5));
      const found = atEmf(208, kw, emfV, round(2.5));
      return {
        Pin_kW: kw,
        delta_deg: found.deltaDeg,
        Ia_A: found.currentA,
        Ia_angle_deg: found.currentDeg,
        IL_A: atEmf(toNeutral(208), kw, toNeutral(emfV), round(2.5 / 3)).currentA,
        pf: found.powerFactor,
        pf_sense: found.sense,
        Q_supplied_kvar: found.kvarDelivered,
      };
    },
    printed: { delta_deg: -23, Ia_A: 41.2, Ia_angle_deg: 15, IL_A: 71.4, pf: 0.966 },
    tolerance: 0.01,
    // The source rounds emf and angle on the way, so its amperes are low; it prints -23.0 and 15.0 degrees.
    within: { delta_deg: 0.05, Ia_A: 0.1, Ia_angle_deg: 0.07, IL_A: 0.13 },
    recomputed: {
      Pin_kW: 24.88,
      delta_deg: -23.001,
      Ia_A: 41.29,
      Ia_angle_deg: 15.06,
      IL_A: 71.516,
      pf: 0.96565,
      pf_sense: 'leading',
      Q_supplied_kvar: 6.6945,
    },
  },
  {
    id: 'CHP-EX2',
    source: 'Chapman, second example: the same motor at 0.85 lagging, its emf raised by a quarter; from memory',
    find: () => {
      const load = lagging(13.69, 0.85);
      const first = atLoad(208, load, round(2.5));
      const second = atEmf(208, load.kw, 1.25 * first.emfV, round(2.5));
      return {
        Ia1_A: first.currentA,
        Ia1_angle_deg: first.currentDeg,
        Ea1_V: first.emfV,
        delta1_deg: first.deltaDeg,
        Ea2_V: 1.25 * first.emfV,
        delta2_deg: second.deltaDeg,
        Ia2_A: second.currentA,
        Ia2_angle_deg: second.currentDeg,
        pf2: second.powerFactor,
        pf2_sense: second.sense,
        Q1_supplied_kvar: -load.kvar,
        Q2_supplied_kvar: second.kvarDelivered,
      };
    },
    printed: {
      Ia1_A: 25.8,
      Ia1_angle_deg: -31.8,
      Ea1_V: 182,
      delta1_deg: -17.5,
      Ea2_V: 227.5,
      delta2_deg: -13.9,
      Ia2_A: 22.5,
      Ia2_angle_deg: 13.2,
      pf2: 0.974,
    },
    tolerance: 0.01,
    // The source rounds the first emf to 182 V and goes on from there.
    within: { Ea2_V: 0.6, Ia2_A: 0.1, pf2: 0.003 },
    wrong: { Ia2_angle_deg: 'The emf rounded to 182 V moves the angle by half a degree.' },
    recomputed: {
      Ia1_A: 25.811,
      Ia1_angle_deg: -31.788,
      Ea1_V: 182.45,
      delta1_deg: -17.495,
      Ea2_V: 228.06,
      delta2_deg: -13.916,
      Ia2_A: 22.581,
      Ia2_angle_deg: 13.696,
      pf2: 0.97157,
      pf2_sense: 'leading',
      Q1_supplied_kvar: -8.4843,
      Q2_supplied_kvar: 3.3362,
    },
  },
  {
    id: 'HUB-8-2',
    source:
      'C. I. Hubert, Electric Machines, ex. 8.2, p. 322: least excitation for 40 hp; read in the companion notebook',
    find: () => {
      const wide = { pullOutMargin: 1, armatureCurrentA: 1e6 };
      const motor = motorOfOhms({ kva: 40, lineV: 220 }, round(1.27), { limits: wide });
      const kw = 40 * KW_PER_HP;
      const least = leastField(motor, { shaftKw: kw })!;
      const emfV = operatingPoint(motor, { shaftKw: kw, fieldCurrentA: least.fieldCurrentA }).emfPu * toNeutral(220);
      return { Ef_min_V: emfV, delta_at_175pct_deg: atEmf(toNeutral(220), kw, 1.75 * emfV, round(1.27)).deltaDeg };
    },
    printed: { Ef_min_V: 99.5, delta_at_175pct_deg: -34.8 },
    tolerance: 0.01,
    // Printed cut.
    within: { delta_at_175pct_deg: 0.06 },
    recomputed: { Ef_min_V: 99.453, delta_at_175pct_deg: -34.85 },
  },
  {
    id: 'GUR-8-3',
    source:
      'B. S. Guru and H. R. Hiziroglu, Electric Machinery and Transformers, ex. 8.3, p. 483: 36 ohm in delta are 12 ohm in wye; read in the companion notebook',
    find: () => {
      const found = atEmf(toNeutral(440), 9, toNeutral(560), round(36 / 3));
      return {
        delta_deg: found.deltaDeg,
        T_Nm: torqueNm(9, (188.5 * 60) / (2 * Math.PI)),
        pf: found.powerFactor,
        pf_sense: found.sense,
        pf_notebook: found.powerFactor,
        IL_A: found.currentA,
      };
    },
    printed: { delta_deg: -26, T_Nm: 47.75, pf_notebook: 0.98 },
    tolerance: 0.01,
    // Printed -26.0.
    within: { delta_deg: 0.05 },
    wrong: { pf_notebook: 'The notebook takes the cosine of degrees as radians.' },
    recomputed: {
      delta_deg: -25.996,
      T_Nm: 47.745,
      pf: 0.96828,
      pf_sense: 'leading',
      pf_notebook: 0.96828,
      IL_A: 12.196,
    },
  },
  {
    // The power of a round rotor at an angle is in proportion to its emf.
    id: 'DEL-19-1',
    source:
      'V. Del Toro, Electrical Engineering Fundamentals, ex. 19-1, p. 755: 200 hp at 15 degrees; read in the companion notebook',
    find: () => {
      const kw = (200 * KW_PER_HP) / 0.9;
      const perVolt = valueAt(powerOverAngle(toNeutral(2300), 1, { ra: 0, xd: 11, xq: 11 }, 0), Math.PI / 12);
      const emfV = (kw * 1000) / 3 / perVolt;
      const found = atEmf(toNeutral(2300), kw, emfV, round(11));
      const turn = (found.currentDeg * Math.PI) / 180;
      return {
        Ef_V: emfV,
        Ia_real_A: found.currentA * Math.cos(turn),
        Ia_imag_A: found.currentA * Math.sin(turn),
        Ia_A: found.currentA,
        pf: found.powerFactor,
        pf_sense: found.sense,
        Q_supplied_kvar: found.kvarDelivered,
      };
    },
    printed: { Ef_V: 1768.62, Ia_real_A: 41.614, Ia_imag_A: 34.586, pf: 0.77 },
    tolerance: 0.01,
    // The source rounds on the way.
    within: { Ef_V: 0.01 },
    recomputed: {
      Ef_V: 1768.6,
      Ia_real_A: 41.614,
      Ia_imag_A: 34.586,
      Ia_A: 54.11,
      pf: 0.76906,
      pf_sense: 'leading',
      Q_supplied_kvar: 137.78,
    },
  },
  {
    id: 'DUB-7-1',
    source:
      'G. K. Dubey, Fundamentals of Electrical Drives, ex. 7.1, p. 247: field in proportion to the emf, rated at 0.8 lagging and 10 A; read in the companion notebook',
    find: () => {
      const v = toNeutral(3300);
      const rated = atLoad(v, lagging(500, 0.8), round(15)).emfV;
      const half = atEmf(v, 250, rated, round(15));
      const atUnity = (kw: number) => atEmf(v, kw, 1.25 * rated, round(15)).kvarDelivered;
      const kw = brentRoot(atUnity, 100, 400, 'power at unity');
      return {
        E_rated_V: rated,
        half_load_Ia_A: half.currentA,
        half_load_angle_deg: half.currentDeg,
        half_load_pf: half.powerFactor,
        If_unity_rated_A: (10 * atLoad(v, { kw: 500, kvar: 0 }, round(15)).emfV) / rated,
        T_at_12p5A_unity_Nm: torqueNm(kw, 1500),
        P_at_12p5A_unity_kW: kw,
      };
    },
    printed: {
      half_load_Ia_A: 52.76,
      half_load_angle_deg: -34,
      half_load_pf: 0.83,
      If_unity_rated_A: 14.43,
      T_at_12p5A_unity_Nm: 1507.2,
    },
    tolerance: 0.01,
    // The angle is printed -34.0; 52.755 A lie on the edge.
    within: { half_load_angle_deg: 0.05, half_load_Ia_A: 0.006 },
    recomputed: {
      E_rated_V: 1603.2,
      half_load_Ia_A: 52.755,
      half_load_angle_deg: -33.995,
      half_load_pf: 0.82909,
      If_unity_rated_A: 14.43,
      T_at_12p5A_unity_Nm: 1507.2,
      P_at_12p5A_unity_kW: 236.75,
    },
  },
  {
    id: 'THE-38-27',
    source:
      'B. L. Theraja, A Textbook of Electrical Technology, ex. 38.27, p. 1519: 1000 to 1500 kW at one field; read in the companion notebook',
    find: () => {
      const load = leading(1000, 0.8);
      const { emfV } = atLoad(toNeutral(6600), load, round(20));
      const found = atEmf(toNeutral(6600), 1500, emfV, round(20));
      return {
        E_V: emfV,
        delta2_deg: found.deltaDeg,
        pf2: found.powerFactor,
        pf2_sense: found.sense,
        Q1_supplied_kvar: -load.kvar,
        Q2_supplied_kvar: found.kvarDelivered,
      };
    },
    printed: { pf2: 0.9433 },
    tolerance: 0.01,
    // The source rounds on the way.
    within: { pf2: 0.0001 },
    recomputed: {
      E_V: 5413.2,
      delta2_deg: -28.999,
      pf2: 0.94324,
      pf2_sense: 'leading',
      Q1_supplied_kvar: 750,
      Q2_supplied_kvar: 528.14,
    },
  },
];
