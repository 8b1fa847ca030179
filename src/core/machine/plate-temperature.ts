import type { Nameplate, PlateRemark } from './plate';
import { USUAL_AMBIENT_C, typicalHotC } from './typical';
import type { InsulationClass, TypicalValue } from './typical';

/** Temperature of the windings at rated load, and whether it is the plate's or a typical one. */
export interface HotTemperature extends TypicalValue {
  known: boolean;
}

/** Ambient plus rise where the plate gives the rise; else typical of the insulation class. [degC] */
export function hotTemperatureC(plate: Nameplate): HotTemperature {
  if (plate.temperatureRiseC === undefined) return { ...typicalHotC(plate.insulationClass), known: false };
  const value = (plate.ambientC ?? USUAL_AMBIENT_C) + plate.temperatureRiseC;
  return { value, low: value, high: value, known: true };
}

/** Greatest temperature of an insulation class. [degC] By the number in the class's own designation, IEC 60085. */
const CLASS_LIMIT_C: Record<InsulationClass, number> = { A: 105, B: 130, F: 155, H: 180 };

/** A rise that the class of insulation does not bear. */
export function checkTemperature(plate: Nameplate): PlateRemark | null {
  const { insulationClass, temperatureRiseC } = plate;
  if (insulationClass === undefined || temperatureRiseC === undefined) return null;
  const hotC = hotTemperatureC(plate).value;
  const over = hotC - CLASS_LIMIT_C[insulationClass];
  if (over <= 0) return null;
  return {
    field: 'temperatureRiseC',
    message:
      `Temperature rise and insulation class disagree: ${temperatureRiseC} K above ${hotC - temperatureRiseC} degC make ` +
      `${hotC} degC, ${over} K over what class ${insulationClass} bears.`,
    remedy: 'Read rise, ambient and class again; a rise in degrees Fahrenheit is 1.8 times the one in kelvin.',
  };
}
