import { KW_PER_HP, capability, operatingPoint, ratedCurrentA, type SynchronousMotor } from '@/core/machine';
import { brentRoot } from '@/core/machine/roots';
import { buildLosslessMotor } from '../core/machine/build-motor';
import { leading, motorOfOhms, round, toNeutral } from './machine-case';
import type { Figures, MachineCase } from './machine-case';

/** [FIT] ex. 5.8: 5.5 A of field at rated amperes and 0.8 leading, fed beside the armature. Its reactances play no part. */
const smallMotor = motorOfOhms({ kva: 45, lineV: 220 }, round(0.8, 0.0399), {
  ratedFieldCurrentA: 5.5,
  fieldResistanceOhm: 35.5,
  exciterEfficiency: 1,
  exciterSupply: 'bus',
  lossSplit: { coreKw: 1.8, frictionWindageKw: 0.91, strayKw: 0.37 },
});

/** Shaft load at which the armature of a motor whose field is fed beside it takes a power. [kW] */
function atArmatureKw(motor: SynchronousMotor, armatureKw: number, kvar: number): number {
  const excess = (shaftKw: number) => {
    const { inputKw, lossesKw } = operatingPoint(motor, { shaftKw, kvar });
    return inputKw - lossesKw.field - lossesKw.exciter - armatureKw;
  };
  return brentRoot(excess, 0, armatureKw, 'shaft load of an armature power');
}

/** Armature 1.0 %, stray 0.4 %, field 0.9 % of kVA at the rated point; exciter efficiency 0.85. */
const largeKva = (2000 * KW_PER_HP) / (0.96 * 0.8);
const largePlate = {
  ratedOutputKw: 0.8 * largeKva,
  ratedPowerFactor: 0.8,
  xdPu: 1.1,
  xqPu: 0.7,
  exciterSupply: 'bus',
} as const;
// The example's field follows the emf without armature resistance: one motor for the rotor, one for the stator.
const largeRotor = buildLosslessMotor({ ...largePlate, fieldResistanceOhm: (0.009 * largeKva * 1000) / 150 ** 2 });
const largeStator = buildLosslessMotor({
  ...largePlate,
  raPu: 0.01,
  lossSplit: { frictionWindageKw: 0, coreKw: 0, strayKw: 0.004 * largeKva },
});

/** The large motor at 0.6 pu of armature power and kvar delivered. */
function largeMotorAt(kvar: number) {
  const rotor = operatingPoint(largeRotor, { shaftKw: 0.6 * largeKva, kvar: -kvar });
  const stator = operatingPoint(largeStator, {
    shaftKw: atArmatureKw(largeStator, 0.6 * largeKva, -kvar),
    kvar: -kvar,
  });
  const { armature, stray } = stator.lossesKw;
  const exciterInput = rotor.lossesKw.field + rotor.lossesKw.exciter;
  const total = armature + stray + exciterInput;
  return {
    currentPu: stator.lineCurrentA / ratedCurrentA(largeStator),
    fieldShare: rotor.fieldCurrentA / 150,
    armature,
    stray,
    exciterInput,
    total,
  };
}

function largeMotorLosses(): Figures {
  const wide = { ...largeRotor, limits: { armatureCurrentA: 1e6 } };
  const limitKvar = capability(wide, { shaftKw: 0.6 * largeKva }).kvarDelivered!;
  const figures: Figures = { kVA_rated: largeKva };
  const unityKw = largeMotorAt(0).total;
  const settings = { unity: 0, q03: 0.3 * largeKva, q06: 0.6 * largeKva, fieldlimit: limitKvar };
  for (const [name, kvar] of Object.entries(settings)) {
    const found = largeMotorAt(kvar);
    figures[`Q_kvar_${name}`] = kvar;
    figures[`Ia_pu_${name}`] = found.currentPu;
    figures[`If_ratio_${name}`] = found.fieldShare;
    figures[`arm_kW_${name}`] = found.armature;
    figures[`stray_kW_${name}`] = found.stray;
    figures[`exciter_input_kW_${name}`] = found.exciterInput;
    figures[`var_loss_kW_${name}`] = found.total;
    if (kvar > 0) figures[`extra_W_per_kvar_${name}`] = (1000 * (found.total - unityKw)) / kvar;
  }
  figures.marginal_W_per_kvar_at_q06 =
    (1000 * (largeMotorAt(settings.q06 + 1).total - largeMotorAt(settings.q06 - 1).total)) / 2;
  // 8000 h at 0.08 USD/kWh.
  figures.annual_cost_USD_q06 = (largeMotorAt(settings.q06).total - unityKw) * 8000 * 0.08;
  return figures;
}

/** Losses of motors and what more kvar cost in them. */
export const lossCases: MachineCase[] = [
  {
    // The field is fed beside the armature; its ohms are those that take 70 W at the amperes of this point.
    id: 'GUR-8-1',
    source:
      'B. S. Guru and H. R. Hiziroglu, Electric Machinery and Transformers, ex. 8.1, p. 477: 10 hp at 0.707 leading, 230 W of rotation and 70 W of field; read in the companion notebook',
    find: () => {
      const motor = motorOfOhms({ kva: 10, lineV: 230 }, round(5), {
        exciterSupply: 'bus',
        exciterEfficiency: 1,
        lossSplit: { frictionWindageKw: 0.23, coreKw: 0, strayKw: 0 },
      });
      const at = { shaftKw: 10 * KW_PER_HP, kvar: leading(10 * KW_PER_HP + 0.23, 0.707).kvar };
      const { fieldCurrentA } = operatingPoint(motor, at);
      const point = operatingPoint({ ...motor, fieldResistanceOhm: 70 / fieldCurrentA ** 2 }, at);
      return {
        eff_pct: (100 * at.shaftKw) / point.inputKw,
        Ea_V: point.emfPu * toNeutral(230),
        delta_deg: -point.loadAngleDeg,
        Ia_A: point.lineCurrentA,
        Q_supplied_kvar: -point.kvar,
      };
    },
    printed: { eff_pct: 96.1, Ea_V: 248.8, delta_deg: -22.8 },
    tolerance: 0.01,
    recomputed: { eff_pct: 96.134, Ea_V: 248.82, delta_deg: -22.824, Ia_A: 27.304, Q_supplied_kvar: 7.6923 },
  },
  {
    id: 'FIT-5-8',
    source:
      '[FIT] ex. 5.8, p. 279: losses of 45 kVA, 220 V at rated amperes and 0.8 leading; read in the companion notebook',
    find: () => {
      const shaftKw = atArmatureKw(smallMotor, 36, -27);
      const { inputKw, lineCurrentA, lossesKw } = operatingPoint(smallMotor, { shaftKw, kvar: -27 });
      return {
        Ia_A: lineCurrentA,
        field_Cu_W: 1000 * lossesKw.field,
        arm_Cu_W: 1000 * lossesKw.armature,
        total_loss_W: 1000 * (inputKw - shaftKw),
        P_in_W: 1000 * inputKw,
        eff_pct: (100 * shaftKw) / inputKw,
      };
    },
    printed: { eff_pct: 84.3 },
    tolerance: 0.01,
    recomputed: {
      Ia_A: 118.09,
      field_Cu_W: 1073.9,
      arm_Cu_W: 1669.4,
      total_loss_W: 5823.2,
      P_in_W: 37074,
      eff_pct: 84.293,
    },
  },
  {
    id: 'LOSS-FIT45',
    source: 'Own extension of [FIT] ex. 5.8: stator losses at 36 kW from 0 to 27 kvar; worked apart from this code',
    find: () => {
      const watts = (kvar: number) => {
        const { armature, stray } = operatingPoint(smallMotor, {
          shaftKw: atArmatureKw(smallMotor, 36, -kvar),
          kvar: -kvar,
        }).lossesKw;
        return 1000 * (armature + stray);
      };
      return {
        arm_plus_stray_W_unity: watts(0),
        arm_plus_stray_W_q09: watts(9),
        arm_plus_stray_W_q18: watts(18),
        arm_plus_stray_W_q27: watts(27),
        extra_stator_W_per_kvar_q27: (watts(27) - watts(0)) / 27,
      };
    },
    tolerance: 0.01,
    recomputed: {
      arm_plus_stray_W_unity: 1305.2,
      arm_plus_stray_W_q09: 1386.8,
      arm_plus_stray_W_q18: 1631.5,
      arm_plus_stray_W_q27: 2039.4,
      extra_stator_W_per_kvar_q27: 27.192,
    },
  },
  {
    id: 'LOSS-2000HP',
    source:
      'Own worked example: variable losses of 2000 hp, 0.8 leading, salient 1.1/0.7, at 0.6 pu; worked apart from this code',
    find: () => largeMotorLosses(),
    tolerance: 0.01,
    recomputed: {
      Q_kvar_unity: 0,
      Ia_pu_unity: 0.6,
      If_ratio_unity: 0.63069,
      arm_kW_unity: 6.9937,
      stray_kW_unity: 2.7975,
      exciter_input_kW_unity: 8.182,
      var_loss_kW_unity: 17.973,
      Q_kvar_q03: 582.81,
      Ia_pu_q03: 0.67082,
      If_ratio_q03: 0.78886,
      arm_kW_q03: 8.7422,
      stray_kW_q03: 3.4969,
      exciter_input_kW_q03: 12.801,
      var_loss_kW_q03: 25.04,
      extra_W_per_kvar_q03: 12.125,
      Q_kvar_q06: 1165.6,
      Ia_pu_q06: 0.84853,
      If_ratio_q06: 0.95283,
      arm_kW_q06: 13.987,
      stray_kW_q06: 5.595,
      exciter_input_kW_q06: 18.675,
      var_loss_kW_q06: 38.258,
      extra_W_per_kvar_q06: 17.402,
      Q_kvar_fieldlimit: 1330.8,
      Ia_pu_fieldlimit: 0.91063,
      If_ratio_fieldlimit: 1,
      arm_kW_fieldlimit: 16.11,
      stray_kW_fieldlimit: 6.4439,
      exciter_input_kW_fieldlimit: 20.57,
      var_loss_kW_fieldlimit: 43.123,
      extra_W_per_kvar_fieldlimit: 18.899,
      marginal_W_per_kvar_at_q06: 27.965,
      kVA_rated: 1942.7,
      annual_cost_USD_q06: 12982,
    },
  },
];
