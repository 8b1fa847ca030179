import { KW_PER_HP } from '@/core/machine';
import { combineLoads, upstreamLossSavedShare, type BusLoad } from '@/core/plan';
import { lagging, leading, lineAmperes } from './machine-case';
import type { MachineCase } from './machine-case';

/** Worked examples of plants in which a synchronous motor takes another's place. */
export const plantCases: MachineCase[] = [
  {
    id: 'CHP-EX3',
    source:
      'S. J. Chapman, Electric Machinery Fundamentals, plant example: 450 kW, the synchronous motor at 0.85 lagging, then leading; from memory',
    find: () => {
      const plant = (motor: BusLoad) => combineLoads([lagging(100, 0.78), lagging(200, 0.8), motor]);
      const before = plant(lagging(150, 0.85));
      const after = plant(leading(150, 0.85));
      return {
        P_total_kW: before.kw,
        Q_a_kvar: before.kvar,
        pf_a: before.powerFactor,
        IL_a_A: lineAmperes(before.kva, 480),
        Q_b_kvar: after.kvar,
        pf_b: after.powerFactor,
        IL_b_A: lineAmperes(after.kva, 480),
        loss_reduction_pct: 100 * upstreamLossSavedShare(before.powerFactor, after.powerFactor),
      };
    },
    printed: {
      P_total_kW: 450,
      Q_a_kvar: 323.2,
      pf_a: 0.812,
      IL_a_A: 667,
      Q_b_kvar: 137.2,
      pf_b: 0.957,
      IL_b_A: 566,
      loss_reduction_pct: 28,
    },
    tolerance: 0.01,
    // The source rounds on the way.
    within: { Q_b_kvar: 0.1, pf_b: 0.0006, IL_a_A: 0.7 },
    recomputed: {
      P_total_kW: 450,
      Q_a_kvar: 323.19,
      pf_a: 0.81223,
      IL_a_A: 666.4,
      Q_b_kvar: 137.27,
      pf_b: 0.95649,
      IL_b_A: 565.89,
      loss_reduction_pct: 27.89,
    },
  },
  {
    id: 'KOS-8-7',
    source:
      'I. L. Kosow, Electric Machinery and Transformers, ex. 8-7, p. 244: induction motor or synchronous motor of 1000 hp; read in the companion notebook',
    find: () => {
      const kw = (1000 * KW_PER_HP) / 0.92;
      const induction = combineLoads([lagging(2000, 0.6), lagging(kw, 0.8)]);
      const synchronous = combineLoads([lagging(2000, 0.6), leading(kw, 0.8)]);
      return {
        I_with_im_A: lineAmperes(induction.kva, 6000),
        pf_with_im: induction.powerFactor,
        I_with_sm_A: lineAmperes(synchronous.kva, 6000),
        pf_with_sm: synchronous.powerFactor,
        current_reduction_pct: 100 * (1 - synchronous.kva / induction.kva),
        Q_after_kvar: synchronous.kvar,
      };
    },
    printed: {
      I_with_im_A: 415.3,
      pf_with_im: 0.6513,
      I_with_sm_A: 335.3,
      pf_with_sm: 0.807,
      current_reduction_pct: 19.3,
    },
    tolerance: 0.01,
    // 335.25 A lie on the edge.
    within: { I_with_sm_A: 0.06 },
    recomputed: {
      I_with_im_A: 415.28,
      pf_with_im: 0.65131,
      I_with_sm_A: 335.25,
      pf_with_sm: 0.80679,
      current_reduction_pct: 19.271,
      Q_after_kvar: 2058.5,
    },
  },
  {
    id: 'MCP-2-5',
    source:
      'G. McPherson, An Introduction to Electrical Machines and Transformers, ex. 2-5, p. 23: a 500 hp induction motor of a plant of 5000 kW gives way to a synchronous motor; read in the companion notebook',
    find: () => {
      const kw = (500 * KW_PER_HP) / 0.96;
      const induction = lagging(kw, 0.9);
      const synchronous = leading(kw, 0.8);
      const before = combineLoads([lagging(5000, 0.8)]);
      const after = combineLoads([before, { kw: -induction.kw, kvar: -induction.kvar }, synchronous]);
      return {
        sm_kW: kw,
        im_Q_kvar: induction.kvar,
        sm_Q_supplied_kvar: -synchronous.kvar,
        Q_new_kvar: after.kvar,
        pf_new: after.powerFactor,
        S_reduction_pct: 100 * (1 - after.kva / before.kva),
      };
    },
    printed: {
      sm_kW: 388.54,
      im_Q_kvar: 188.18,
      sm_Q_supplied_kvar: 291.41,
      Q_new_kvar: 3271,
      pf_new: 0.837,
      S_reduction_pct: 4.4,
    },
    tolerance: 0.01,
    // The source rounds on the way.
    within: { Q_new_kvar: 0.7 },
    recomputed: {
      sm_kW: 388.54,
      im_Q_kvar: 188.18,
      sm_Q_supplied_kvar: 291.41,
      Q_new_kvar: 3270.4,
      pf_new: 0.83688,
      S_reduction_pct: 4.4067,
    },
  },
  {
    id: 'PEER-21',
    source:
      'Peerless Pump, Technical Information Bulletin 21: 600 kW at 0.7, then a motor of 203 kW at 0.8 leading, inferred from the two points',
    find: () => {
      const load = combineLoads([lagging(600, 0.7)]);
      const plant = combineLoads([load, leading(203, 0.8)]);
      return {
        Q_load_kvar: load.kvar,
        S_load_kVA: load.kva,
        P_final_kW: plant.kw,
        S_final_kVA: plant.kva,
        Q_final_kvar: plant.kvar,
        pf_final: plant.powerFactor,
      };
    },
    printed: {
      Q_load_kvar: 610,
      S_load_kVA: 856,
      P_final_kW: 803,
      S_final_kVA: 925,
      Q_final_kvar: 455,
      pf_final: 0.868,
    },
    tolerance: 0.012,
    // Read from a graph.
    within: { Q_load_kvar: 2.2, S_load_kVA: 1.2, Q_final_kvar: 5 },
    recomputed: {
      Q_load_kvar: 612.12,
      S_load_kVA: 857.14,
      P_final_kW: 803,
      S_final_kVA: 925.36,
      Q_final_kvar: 459.87,
      pf_final: 0.86777,
    },
  },
];
