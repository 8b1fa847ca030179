import { z } from 'zod';

/** Ways of making the field's current. `static`: rectifier and slip rings; `shaft-dc`: an exciter with commutator on the shaft. */
export const exciterKinds = ['static', 'brushless', 'shaft-dc'] as const;
export type ExciterKind = (typeof exciterKinds)[number];

export const outputUnits = ['hp', 'metric-hp', 'kW'] as const;
export type OutputUnit = (typeof outputUnits)[number];

/** Letters of the insulation's thermal class. */
export const insulationClasses = ['A', 'B', 'F', 'H'] as const;

export const connections = ['wye', 'delta'] as const;

/** An empty entry means "not on the plate"; it is then filled with a typical value and marked assumed. */
const absent = z.union([z.null(), z.undefined()]).transform(() => undefined);
const optionalNumber = (least: number, most: number, words: string) =>
  z.union([absent, z.number({ error: words }).min(least, words).max(most, words)]).optional();

const optionalChoice = <Choice extends string>(choices: readonly [Choice, ...Choice[]]) =>
  z.union([absent, z.enum(choices)]).optional();

const output = z
  .number({ error: 'Write the rated output.' })
  .positive('The rated output must be above 0.')
  .max(200_000, 'The rated output is at most 200,000.');

const curvePoint = z.object({
  fieldCurrentA: z.number({ error: 'Write amperes.' }).min(0, 'Amperes of 0 or more.').max(20_000),
  voltagePu: z.number({ error: 'Write per unit of rated voltage.' }).min(0, 'Per unit of 0 or more.').max(2),
});

type CurvePoint = z.output<typeof curvePoint>;

/** Number, from 1, of the first point that does not rise from the one before; the first may be the origin itself. */
function firstNotRising(curve: CurvePoint[]): number | null {
  let before: CurvePoint = { fieldCurrentA: 0, voltagePu: 0 };
  for (const [index, point] of curve.entries()) {
    const isOrigin = index === 0 && point.fieldCurrentA === 0 && point.voltagePu === 0;
    const rises = point.fieldCurrentA > before.fieldCurrentA && point.voltagePu > before.voltagePu;
    if (!isOrigin && !rises) return index + 1;
    before = point;
  }
  return null;
}

const limitsInput = z.object({
  fieldCurrentA: optionalNumber(0.1, 5_000, 'The field limit lies between 0.1 and 5,000 A.'),
  armatureCurrentA: optionalNumber(0.1, 20_000, 'The stator limit lies between 0.1 and 20,000 A.'),
  pullOutMargin: optionalNumber(1, 5, 'The pull-out margin is a ratio between 1 and 5.'),
  reservePercent: optionalNumber(0, 50, 'The reserve lies between 0 and 50 %.'),
  /** Brushless: of the exciter's field, as its panel shows it. */
  exciterFieldA: optionalNumber(0.1, 500, 'The exciter field limit lies between 0.1 and 500 A.'),
  /** What the exciter is rated to give. */
  exciterOutputA: optionalNumber(0.1, 5_000, 'The exciter gives between 0.1 and 5,000 A.'),
  exciterOutputV: optionalNumber(1, 2_000, 'The exciter gives between 1 and 2,000 V.'),
  /** Least field that regulator or maker allow, as the panel shows it. */
  leastPanelA: optionalNumber(0, 5_000, 'The least field lies between 0 and 5,000 A.'),
  /** Bus voltages at which every limit must hold, on rated voltage. */
  voltageLowPu: optionalNumber(0.7, 1, 'The low voltage lies between 0.7 and 1 per unit of rated voltage.'),
  voltageHighPu: optionalNumber(1, 1.3, 'The high voltage lies between 1 and 1.3 per unit of rated voltage.'),
});

/** What stands on the plate itself, in its own words and units. */
const ratingEntries = {
  output,
  outputUnit: z.enum(outputUnits),
  voltageV: z
    .number({ error: 'Write the rated voltage in volts.' })
    .min(100, 'The rated voltage lies between 100 and 30,000 V between lines.')
    .max(30_000, 'The rated voltage lies between 100 and 30,000 V between lines.'),
  currentA: optionalNumber(0.1, 20_000, 'The rated armature current lies between 0.1 and 20,000 A.'),
  apparentKva: optionalNumber(1, 300_000, 'The rated kVA lie between 1 and 300,000.'),
  powerFactor: z
    .number({ error: 'Write the rated power factor, as 0.8 or 1.' })
    .min(0.5, 'The rated power factor lies between 0.5 and 1.')
    .max(1, 'The rated power factor cannot be above 1.'),
  speedRpm: optionalNumber(50, 3_600, 'The speed lies between 50 and 3,600 rpm.'),
  poles: optionalNumber(2, 120, 'The number of poles lies between 2 and 120.'),
  frequencyHz: z
    .number({ error: 'Write the frequency, 50 or 60 Hz.' })
    .min(16, 'The frequency lies between 16 and 70 Hz.')
    .max(70, 'The frequency lies between 16 and 70 Hz.'),
  efficiencyPercent: optionalNumber(
    40,
    99.5,
    'An efficiency lies between 40 and 99.5 %: more than 100 % would mean the motor makes power.',
  ),
  serviceFactor: optionalNumber(1, 1.5, 'The service factor lies between 1 and 1.5.'),
  temperatureRiseC: optionalNumber(5, 180, 'The temperature rise lies between 5 and 180 K.'),
  insulationClass: optionalChoice(insulationClasses),
  ambientC: optionalNumber(-20, 70, 'The ambient lies between -20 and 70 °C.'),
};

/** Field, exciter and data sheet. */
const machineEntries = {
  fieldCurrentA: optionalNumber(0.1, 5_000, 'The rated field current lies between 0.1 and 5,000 A.'),
  fieldVoltageV: optionalNumber(1, 2_000, 'The rated field voltage lies between 1 and 2,000 V.'),
  fieldResistanceOhm: optionalNumber(0.001, 1_000, 'The field resistance lies between 0.001 and 1,000 ohm.'),
  coldFieldResistanceOhm: optionalNumber(0.001, 1_000, 'The field resistance lies between 0.001 and 1,000 ohm.'),
  coldFieldAtC: optionalNumber(-20, 150, 'The winding was measured between -20 and 150 °C.'),
  exciterKind: z.enum(exciterKinds, { error: 'Say how the field is supplied.' }),
  exciterFieldA: optionalNumber(0.1, 500, 'The exciter field current lies between 0.1 and 500 A.'),
  exciterNoLoadA: optionalNumber(0, 500, 'The exciter field current at no load lies between 0 and 500 A.'),
  exciterEfficiencyPercent: optionalNumber(30, 100, 'The exciter efficiency lies between 30 and 100 %.'),
  rotor: z.enum(['salient', 'round']).default('salient'),
  xdPu: optionalNumber(0.1, 5, 'Xd lies between 0.1 and 5 per unit.'),
  xqPu: optionalNumber(0.1, 5, 'Xq lies between 0.1 and 5 per unit.'),
  raPu: optionalNumber(0, 0.2, 'Ra lies between 0 and 0.2 per unit.'),
  /** Of one phase of the winding, in place of the per-unit values. */
  connection: optionalChoice(connections),
  xdOhm: optionalNumber(0.001, 10_000, 'Xd lies between 0.001 and 10,000 ohm.'),
  xqOhm: optionalNumber(0.001, 10_000, 'Xq lies between 0.001 and 10,000 ohm.'),
  raOhm: optionalNumber(0, 1_000, 'Ra lies between 0 and 1,000 ohm.'),
  raAtC: optionalNumber(-20, 150, 'The winding was measured between -20 and 150 °C.'),
  xlPu: optionalNumber(0, 0.6, 'The leakage reactance lies between 0 and 0.6 per unit.'),
  openCircuitCurve: z.array(curvePoint).min(2, 'A curve has at least two points.').max(40).optional(),
};

type Entered = z.output<z.ZodObject<typeof ratingEntries & typeof machineEntries>>;
type Fault = (path: string, message: string) => void;

function checkField(plate: Entered, fault: Fault): void {
  const brushless = plate.exciterKind === 'brushless';
  const resistance = [plate.fieldVoltageV, plate.fieldResistanceOhm, plate.coldFieldResistanceOhm];
  if (plate.fieldCurrentA === undefined && !brushless) {
    fault('fieldCurrentA', 'Write the rated field current in amperes.');
  }
  if (plate.fieldCurrentA === undefined && brushless && plate.exciterFieldA === undefined) {
    fault(
      'exciterFieldA',
      'Write the exciter field current at rated load: plate and panel of a brushless motor show it.',
    );
  }
  if ((plate.fieldCurrentA !== undefined || !brushless) && resistance.every((one) => one === undefined)) {
    fault(
      'fieldVoltageV',
      'Write the rated field voltage, or the resistance, hot or measured cold: the loss of the field depends on it.',
    );
  }
  if ((plate.coldFieldResistanceOhm === undefined) !== (plate.coldFieldAtC === undefined)) {
    const missing = plate.coldFieldAtC === undefined ? 'coldFieldAtC' : 'coldFieldResistanceOhm';
    fault(missing, 'A measured resistance needs its temperature, and the temperature its resistance.');
  }
  if (plate.exciterNoLoadA !== undefined && plate.exciterFieldA === undefined) {
    fault('exciterFieldA', 'Write the exciter field current at rated field too.');
  }
  if (plate.exciterFieldA !== undefined && (plate.exciterNoLoadA ?? 0) >= plate.exciterFieldA) {
    fault('exciterNoLoadA', 'At no load the exciter field is below the one at rated field. Check both figures.');
  }
}

function checkMachine(plate: Entered, fault: Fault): void {
  const flat = plate.openCircuitCurve ? firstNotRising(plate.openCircuitCurve) : null;
  if (flat !== null) {
    const message = `Point ${flat} of the curve does not rise from the one before it. Write the points upwards, amperes and voltage.`;
    fault('openCircuitCurve', message);
  }
  const [xd, xq] = plate.xdOhm === undefined ? [plate.xdPu, plate.xqPu] : [plate.xdOhm, plate.xqOhm];
  if (xd !== undefined && xq !== undefined && xq > xd) {
    fault(plate.xdOhm === undefined ? 'xqPu' : 'xqOhm', 'Xq is at most Xd. Check whether the two were exchanged.');
  }
  const inOhms = [plate.xdOhm, plate.xqOhm, plate.raOhm].some((ohm) => ohm !== undefined);
  if (inOhms && plate.connection === undefined) {
    fault('connection', 'Say how the winding is connected: ohms of a delta count a third.');
  }
}

/** A nameplate as it is worded, plus data sheets and limits where there are any. */
export const plateInput = z
  .object({
    ...ratingEntries,
    ...machineEntries,
    limits: limitsInput.default({}),
    /** Where the figures come from: "photograph of 3 Sep", "data sheet". */
    source: z.string().trim().max(200, 'At most 200 characters.').optional(),
  })
  .superRefine((plate, context) => {
    const fault: Fault = (path, message) => context.addIssue({ code: 'custom', path: path.split('.'), message });
    checkField(plate, fault);
    if (plate.speedRpm === undefined && plate.poles === undefined) {
      fault('speedRpm', 'Write the speed or the number of poles.');
    }
    if (plate.poles !== undefined && plate.poles % 2 !== 0) fault('poles', 'The number of poles is even.');
    checkMachine(plate, fault);
    const { voltageLowPu, voltageHighPu } = plate.limits;
    if ((voltageLowPu === undefined) !== (voltageHighPu === undefined)) {
      fault(
        voltageLowPu === undefined ? 'limits.voltageLowPu' : 'limits.voltageHighPu',
        'Write both ends of the voltage band, or neither.',
      );
    }
  });
export type PlateInput = z.output<typeof plateInput>;
