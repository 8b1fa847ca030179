import { copperResistanceOhm, copperTemperatureC } from './copper';
import type { Nameplate, PlateRemark } from './plate';
import { hotTemperatureC } from './plate-temperature';
import { percent } from './plate-words';

/** Agreement expected of excitation volts, amperes and resistance. [unitless] Common practice: volts often name the exciter. */
const FIELD_TOLERANCE = 0.05;

/** No winding is run hotter: above every class of insulation. [degC] */
const HOTTEST_C = 180;

/** Excitation volts, amperes and resistance, warm and cold, against one another. */
export function checkField(plate: Nameplate): PlateRemark[] {
  const warm = warmPair(plate);
  return [checkWarm(plate), warm && plate.coldField ? checkCold(plate, plate.coldField, warm) : null].filter(
    (remark) => remark !== null,
  );
}

function checkWarm({ fieldCurrentA, fieldVoltageV, fieldResistanceOhm }: Nameplate): PlateRemark | null {
  if (fieldCurrentA === undefined || fieldVoltageV === undefined || fieldResistanceOhm === undefined) return null;
  const implied = fieldVoltageV / fieldCurrentA;
  const off = fieldResistanceOhm / implied - 1;
  if (Math.abs(off) <= FIELD_TOLERANCE) return null;
  const cold = off < -0.1 && off > -0.35 ? ' A resistance measured cold is 15 to 30 % below the hot one.' : '';
  return {
    field: 'fieldResistanceOhm',
    message:
      `Field resistance disagrees with field volts and amperes by ${percent(off)}: ${fieldVoltageV} V / ${fieldCurrentA} A = ` +
      `${implied.toFixed(3)} ohm, entered ${fieldResistanceOhm} ohm.`,
    remedy: `Keep the hot resistance.${cold}`,
  };
}

interface WarmPair {
  ohm: number;
  words: string;
}

/** The hot resistance the plate states, by itself or as volts over amperes. */
function warmPair({ fieldCurrentA, fieldVoltageV, fieldResistanceOhm }: Nameplate): WarmPair | null {
  if (fieldResistanceOhm !== undefined)
    return { ohm: fieldResistanceOhm, words: `the hot resistance of ${fieldResistanceOhm} ohm` };
  if (fieldCurrentA === undefined || fieldVoltageV === undefined) return null;
  const ohm = fieldVoltageV / fieldCurrentA;
  return { ohm, words: `${fieldVoltageV} V / ${fieldCurrentA} A = ${ohm.toFixed(3)} ohm` };
}

function checkCold(
  plate: Nameplate,
  { resistanceOhm, atC }: NonNullable<Nameplate['coldField']>,
  warm: WarmPair,
): PlateRemark | null {
  const hot = hotTemperatureC(plate);
  const expected = copperResistanceOhm({ ohm: resistanceOhm, fromC: atC, toC: hot.value });
  const off = warm.ohm / expected - 1;
  const impliedC = copperTemperatureC({ ohm: warm.ohm, knownOhm: resistanceOhm, knownC: atC });
  const fits = hot.known ? Math.abs(off) <= FIELD_TOLERANCE : impliedC >= hot.low - 15 && impliedC <= hot.high + 15;
  if (fits) return null;
  const impossible = impliedC < atC || impliedC > HOTTEST_C;
  return {
    field: 'coldField',
    message:
      `Cold and hot field resistance disagree: ${resistanceOhm} ohm at ${atC} degC become ${expected.toFixed(3)} ohm at ` +
      `${hot.value} degC, ${hot.known ? 'ambient plus rise' : 'typical at rated load'}; ${warm.words} is ${percent(off)} ` +
      `${off < 0 ? 'below' : 'above'} that, as of a winding at ${impliedC.toFixed(0)} degC.`,
    remedy: impossible
      ? 'No winding runs at that temperature: measure again at the rings without brush contact, or check volts and amperes; excitation volts often name the exciter.'
      : 'Check the temperature of the measurement and the rise; excitation volts often name what the exciter gives, not what the field takes.',
  };
}
