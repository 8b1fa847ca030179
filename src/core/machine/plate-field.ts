import { copperResistanceOhm } from './copper';
import { ratedKva } from './motor';
import type { SynchronousMotor } from './motor';
import { outputKwOf } from './plate';
import type { Assume, Nameplate } from './plate';
import { hotTemperatureC } from './plate-temperature';
import { typicalExciterEfficiency, typicalFieldShare, typicalFieldVoltageV } from './typical';

type Rating = Pick<SynchronousMotor, 'ratedOutputKw' | 'ratedEfficiency' | 'ratedPowerFactor'>;

/** Field and exciter of a plate; what is missing is assumed. */
export function fieldOf(plate: Nameplate, rating: Rating, assume: Assume) {
  const kva = ratedKva(rating);
  const share = typicalFieldShare(kva);
  const ratedFieldCurrentA =
    plate.fieldCurrentA ?? currentFromOthers(plate) ?? assumedFieldCurrent(plate, share.value * kva * 1000, assume);
  const kind = plate.exciter;
  const why = kind ? 'Typical of this kind of exciter.' : 'The kind of exciter is not known.';
  return {
    ratedFieldCurrentA,
    fieldResistanceOhm: hotResistanceOhm(plate, ratedFieldCurrentA, kva, assume),
    exciterEfficiency: plate.exciterEfficiency ?? assume('exciterEfficiency', typicalExciterEfficiency(kind), why),
    exciterSupply: kind === 'static' ? ('bus' as const) : ('shaft' as const),
    ...(plate.exciterField && { exciterField: plate.exciterField }),
  };
}

/** Hot resistance: as entered, from volts and amperes of the plate, measured cold and corrected, or assumed. */
function hotResistanceOhm(plate: Nameplate, fieldCurrentA: number, kva: number, assume: Assume): number {
  if (plate.fieldResistanceOhm !== undefined) return plate.fieldResistanceOhm;
  if (plate.fieldVoltageV !== undefined) return plate.fieldVoltageV / fieldCurrentA;
  if (plate.coldField) return correctedResistanceOhm(plate, plate.coldField, assume);
  const share = typicalFieldShare(kva);
  const ohm = (part: number) => (part * kva * 1000) / fieldCurrentA ** 2;
  return assume(
    'fieldResistanceOhm',
    { value: ohm(share.value), low: ohm(share.low), high: ohm(share.high) },
    `Field power typical of this size: ${(100 * share.value).toFixed(2)} % of rated kVA.`,
  );
}

function correctedResistanceOhm(
  plate: Nameplate,
  { resistanceOhm: ohm, atC: fromC }: NonNullable<Nameplate['coldField']>,
  assume: Assume,
): number {
  const hot = hotTemperatureC(plate);
  const at = (toC: number) => copperResistanceOhm({ ohm, fromC, toC });
  if (hot.known) return at(hot.value);
  return assume(
    'fieldResistanceOhm',
    { value: at(hot.value), low: at(hot.low), high: at(hot.high) },
    `Measured ${ohm} ohm at ${fromC} degC; the hot winding is taken at ${hot.value} degC, since the plate gives no rise.`,
  );
}

function currentFromOthers(plate: Nameplate): number | null {
  if (plate.fieldVoltageV === undefined || plate.fieldResistanceOhm === undefined) return null;
  return plate.fieldVoltageV / plate.fieldResistanceOhm;
}

function assumedFieldCurrent(plate: Nameplate, watts: number, assume: Assume): number {
  const volts = typicalFieldVoltageV(outputKwOf(plate));
  const at = plate.fieldVoltageV;
  const typical =
    at === undefined
      ? { value: watts / volts.value, low: watts / volts.high, high: watts / volts.low }
      : { value: watts / at, low: (0.6 * watts) / at, high: (1.5 * watts) / at };
  return assume(
    'ratedFieldCurrentA',
    typical,
    'The plate gives no field current: settings in amperes need it. Ratios to rated field hold without.',
  );
}
