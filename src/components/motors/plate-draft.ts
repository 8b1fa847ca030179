import type { PlateInput } from '../../schemas/plate';
import { typedNumber } from '../ui/typed-number';

const plateNumbers = [
  'output',
  'voltageV',
  'currentA',
  'apparentKva',
  'powerFactor',
  'speedRpm',
  'poles',
  'frequencyHz',
  'efficiencyPercent',
  'serviceFactor',
  'temperatureRiseC',
  'ambientC',
  'fieldCurrentA',
  'fieldVoltageV',
  'fieldResistanceOhm',
  'coldFieldResistanceOhm',
  'coldFieldAtC',
  'exciterEfficiencyPercent',
  'xlPu',
] as const;
const brushlessNumbers = ['exciterFieldA', 'exciterNoLoadA'] as const;
const perUnitNumbers = ['xdPu', 'xqPu', 'raPu'] as const;
const ohmNumbers = ['xdOhm', 'xqOhm', 'raOhm', 'raAtC'] as const;
const plateChoices = ['outputUnit', 'insulationClass', 'exciterKind', 'rotor', 'source'] as const;
const limitNumbers = [
  'armatureCurrentA',
  'pullOutMargin',
  'reservePercent',
  'exciterOutputA',
  'exciterOutputV',
  'leastPanelA',
  'voltageLowPu',
  'voltageHighPu',
] as const;

const allNumbers = [...plateNumbers, ...brushlessNumbers, ...perUnitNumbers, ...ohmNumbers] as const;
const allLimits = [...limitNumbers, 'fieldCurrentA', 'exciterFieldA'] as const;

/** A plate as it is typed. `impedanceUnit` says which of the per-unit and ohm entries are shown and sent. */
export type PlateDraft = Record<
  (typeof allNumbers)[number] | (typeof plateChoices)[number] | 'connection' | 'impedanceUnit' | 'openCircuitCurve',
  string
> & { limits: Record<(typeof allLimits)[number], string> };

export const shown = (value: unknown) => (value === undefined || value === null ? '' : String(value));

/** Rows of an open-circuit curve: amperes and per-unit volts on a line. */
function typedCurve(text: string): { fieldCurrentA: number; voltagePu: number }[] | undefined {
  const lines = text.split('\n').filter((line) => line.trim() !== '');
  if (lines.length === 0) return undefined;
  return lines.map((line) => {
    const [amperes = '', volts = ''] = line.trim().split(/[\s;,]+/);
    return { fieldCurrentA: Number(amperes || NaN), voltagePu: Number(volts || NaN) };
  });
}

/** Whether field limits are typed in amperes of the exciter's field: what the panel of a brushless machine shows. */
export const limitsAtPanel = (plate: Pick<PlateDraft, 'exciterKind' | 'exciterFieldA'>) =>
  plate.exciterKind === 'brushless' && plate.exciterFieldA.trim() !== '';

/** What the schema is asked to read. Entries the form does not show are not sent. */
export function plateToInput(plate: PlateDraft): Record<string, unknown> {
  const inOhms = plate.impedanceUnit === 'ohm';
  const sent = [
    ...plateNumbers,
    ...(plate.exciterKind === 'brushless' ? brushlessNumbers : []),
    ...(inOhms ? ohmNumbers : perUnitNumbers),
  ];
  const choices = inOhms ? [...plateChoices, 'connection' as const] : plateChoices;
  const limits = [...limitNumbers, limitsAtPanel(plate) ? ('exciterFieldA' as const) : ('fieldCurrentA' as const)];
  return {
    ...Object.fromEntries(sent.map((name) => [name, typedNumber(plate[name])])),
    ...Object.fromEntries(choices.map((name) => [name, plate[name] === '' ? undefined : plate[name]])),
    limits: Object.fromEntries(limits.map((name) => [name, typedNumber(plate.limits[name])])),
    openCircuitCurve: typedCurve(plate.openCircuitCurve),
  };
}

/** What a stored plate looks like in the form. */
export function plateDraftOf(plate: PlateInput): PlateDraft {
  const texts = [...allNumbers, ...plateChoices].map((name) => [name, shown(plate[name])]);
  const inOhms = ohmNumbers.some((name) => plate[name] !== undefined);
  return {
    ...Object.fromEntries(texts),
    connection: plate.connection ?? 'wye',
    impedanceUnit: inOhms ? 'ohm' : 'pu',
    openCircuitCurve: (plate.openCircuitCurve ?? [])
      .map((point) => `${point.fieldCurrentA} ${point.voltagePu}`)
      .join('\n'),
    limits: Object.fromEntries(allLimits.map((name) => [name, shown(plate.limits[name])])),
  } as PlateDraft;
}

/** An empty plate: a 60 Hz machine with a static exciter. */
export function emptyPlate(): PlateDraft {
  const blank = (names: readonly string[]) => Object.fromEntries(names.map((name) => [name, '']));
  return {
    ...blank([...allNumbers, ...plateChoices]),
    outputUnit: 'hp',
    frequencyHz: '60',
    exciterKind: 'static',
    rotor: 'salient',
    connection: 'wye',
    impedanceUnit: 'pu',
    openCircuitCurve: '',
    limits: blank(allLimits),
  } as PlateDraft;
}

/** Names of the entries of a plate, by path. */
export const plateLabels: Record<string, string> = {
  'plate.output': 'Rated output',
  'plate.outputUnit': 'Unit of output',
  'plate.voltageV': 'Rated voltage',
  'plate.currentA': 'Rated armature current',
  'plate.apparentKva': 'Rated kVA',
  'plate.powerFactor': 'Rated power factor, leading',
  'plate.speedRpm': 'Speed',
  'plate.poles': 'Poles',
  'plate.frequencyHz': 'Frequency',
  'plate.efficiencyPercent': 'Efficiency',
  'plate.serviceFactor': 'Service factor',
  'plate.temperatureRiseC': 'Temperature rise',
  'plate.insulationClass': 'Insulation class',
  'plate.ambientC': 'Ambient',
  'plate.fieldCurrentA': 'Rated field current',
  'plate.fieldVoltageV': 'Rated field voltage',
  'plate.fieldResistanceOhm': 'Field resistance, hot',
  'plate.coldFieldResistanceOhm': 'Field resistance, measured',
  'plate.coldFieldAtC': 'Measured at',
  'plate.exciterKind': 'Exciter',
  'plate.exciterFieldA': 'Exciter field at rated field',
  'plate.exciterNoLoadA': 'Exciter field at no load',
  'plate.exciterEfficiencyPercent': 'Exciter efficiency',
  'plate.rotor': 'Rotor',
  'plate.impedanceUnit': 'Reactances and Ra in',
  'plate.connection': 'Connection of the winding',
  'plate.xdPu': 'Xd',
  'plate.xqPu': 'Xq',
  'plate.raPu': 'Ra',
  'plate.xdOhm': 'Xd',
  'plate.xqOhm': 'Xq',
  'plate.raOhm': 'Ra',
  'plate.raAtC': 'Ra measured at',
  'plate.xlPu': 'Leakage reactance',
  'plate.openCircuitCurve': 'Open-circuit curve',
  'plate.source': 'Source of the figures',
  'plate.limits.fieldCurrentA': 'Field limit',
  'plate.limits.armatureCurrentA': 'Stator limit',
  'plate.limits.pullOutMargin': 'Least pull-out over load',
  'plate.limits.reservePercent': 'Reserve',
  'plate.limits.exciterFieldA': 'Exciter field limit',
  'plate.limits.exciterOutputA': 'Exciter gives at most',
  'plate.limits.exciterOutputV': 'Exciter voltage at most',
  'plate.limits.leastPanelA': 'Least field current',
  'plate.limits.voltageLowPu': 'Bus voltage, low',
  'plate.limits.voltageHighPu': 'Bus voltage, high',
};

/** Entries of a plate by path, as text. */
export function plateEntries(plate: PlateDraft): Record<string, string> {
  const entries: Record<string, string> = {};
  for (const [name, value] of Object.entries(plate)) if (typeof value === 'string') entries[`plate.${name}`] = value;
  for (const [name, value] of Object.entries(plate.limits)) entries[`plate.limits.${name}`] = value;
  return entries;
}
