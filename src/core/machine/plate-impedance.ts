import { copperResistanceOhm } from './copper';
import { ratedKva } from './motor';
import type { SynchronousMotor } from './motor';
import { outputKwOf, polesOf } from './plate';
import type { Assume, Nameplate } from './plate';
import { hotTemperatureC } from './plate-temperature';
import { typicalRaPu, typicalXdPu, typicalXlPu, typicalXqShare } from './typical';
import type { RotorKind } from './typical';

type Rating = Pick<SynchronousMotor, 'ratedOutputKw' | 'ratedEfficiency' | 'ratedPowerFactor' | 'ratedVoltageV'>;

/**
 * Per unit of an ohm of one phase of the winding, on the motor's rating.
 *
 *     Zbase = V^2 / S;   Zwye = Zdelta / 3
 */
function puPerOhm(rating: Rating, connection: 'wye' | 'delta'): number {
  const baseOhm = rating.ratedVoltageV ** 2 / (1000 * ratedKva(rating));
  return 1 / (baseOhm * (connection === 'delta' ? 3 : 1));
}

/** Reactances and armature resistance of a plate, per unit and hot; what is missing is assumed. */
export function impedancesOf(plate: Nameplate, rating: Rating, assume: Assume) {
  const rotor = plate.rotor ?? (polesOf(plate) === 2 ? 'round' : 'salient');
  const { ohms } = plate;
  const perOhm = ohms ? puPerOhm(rating, ohms.connection) : NaN;
  const entered = (pu: number | undefined, ohm: number | undefined) =>
    pu ?? (ohm === undefined ? undefined : ohm * perOhm);
  const raPu = armatureResistancePu(plate, perOhm, assume);
  const reactances = reactancesOf(
    plate,
    { xdPu: entered(plate.xdPu, ohms?.xdOhm), xqPu: entered(plate.xqPu, ohms?.xqOhm), rotor },
    assume,
  );
  const curve = plate.openCircuitCurve;
  if (!curve) return { raPu, ...reactances, ...(plate.xlPu !== undefined && { xlPu: plate.xlPu }) };
  const xlPu =
    plate.xlPu ?? assume('xlPu', typicalXlPu, 'Leakage reactance typical of salient and round rotors alike.');
  return { raPu, ...reactances, xlPu, openCircuitCurve: curve };
}

function reactancesOf(
  plate: Nameplate,
  given: { xdPu: number | undefined; xqPu: number | undefined; rotor: RotorKind },
  assume: Assume,
): { xdPu: number; xqPu: number } {
  const { rotor } = given;
  const speedRpm = (120 * plate.frequencyHz) / polesOf(plate);
  const kind = rotor === 'round' ? 'round rotors' : `salient poles at ${Math.round(speedRpm)} rpm`;
  const share = typicalXqShare(speedRpm, rotor);
  let typicalXd = typicalXdPu(speedRpm, rotor);
  if (given.xqPu !== undefined && given.xqPu > typicalXd.value) {
    const value = given.xqPu / share.value;
    typicalXd = { value, low: given.xqPu, high: Math.max(value, typicalXd.high) };
  }
  const xdPu = given.xdPu ?? assume('xdPu', typicalXd, `Direct-axis reactance typical of ${kind}.`);
  const typicalXq = { value: share.value * xdPu, low: share.low * xdPu, high: share.high * xdPu };
  const xqPu =
    given.xqPu ?? assume('xqPu', typicalXq, `Quadrature-axis reactance typical of ${kind}: a share of xdPu.`);
  return { xdPu, xqPu };
}

function armatureResistancePu(plate: Nameplate, perOhm: number, assume: Assume): number {
  if (plate.raPu !== undefined) return plate.raPu;
  const { raOhm, raAtC } = plate.ohms ?? {};
  if (raOhm === undefined)
    return assume('raPu', typicalRaPu(outputKwOf(plate)), 'Armature resistance typical of this size.');
  if (raAtC === undefined) return raOhm * perOhm;
  const hot = hotTemperatureC(plate);
  const raPuAt = (toC: number) => perOhm * copperResistanceOhm({ ohm: raOhm, fromC: raAtC, toC });
  if (hot.known) return raPuAt(hot.value);
  return assume(
    'raPu',
    { value: raPuAt(hot.value), low: raPuAt(hot.low), high: raPuAt(hot.high) },
    `Armature resistance measured at ${raAtC} degC; the hot winding is taken at ${hot.value} degC.`,
  );
}
